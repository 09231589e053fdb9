import 'server-only';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

/** Whether a person's notices come at once or together once a day. What waits already keeps its time. */
export async function setMailTiming(context: CommandContext, { daily }: { daily: boolean }): Promise<null> {
  const { id, name } = context.actor;
  return inTransaction(context, async (work) => {
    const person = await db().tables.people.findByPk(id, {
      transaction: work.transaction,
      lock: work.transaction.LOCK.UPDATE,
      rejectOnEmpty: true,
    });
    const before = person.mailDaily;
    if (before === daily) return null;
    await person.update({ mailDaily: daily }, { transaction: work.transaction });
    work.audit({
      action: 'person.mail-timing',
      subject: { kind: 'person', id, text: name },
      before: { daily: before },
      after: { daily },
    });
    return null;
  });
}
