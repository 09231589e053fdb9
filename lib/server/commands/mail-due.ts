import 'server-only';
import type { CommandContext } from '../context';
import { db } from '../db';
import { mailText, peopleWith, type Addressee } from '../people-mail';
import { listDue, type DueItem } from '../queries/due';
import { inTransaction } from '../transaction';

/**
 * One mail a day to everybody of Admin and QA while something is overdue or due soon. The day a person was last told is
 * kept with the mail in one transaction, so that a restart neither repeats nor forgets it. Answers how many were told.
 */
export async function mailDue(context: CommandContext): Promise<number> {
  const items = await listDue(context.at);
  if (!items.length) return 0;
  let told = 0;
  for (const person of await peopleWith(['admin', 'qa'])) {
    if (await tell(context, person, items)) told += 1;
  }
  return told;
}

async function tell(context: CommandContext, person: Addressee, items: DueItem[]): Promise<boolean> {
  const { tables } = db();
  const name = `due-mail-${person.id}`;
  const valueJson = JSON.stringify({ day: context.at.toISOString().slice(0, 10) });
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    // The person's row is the lock: of two servers one sees what the other has written.
    await tables.people.findByPk(person.id, { transaction, lock: transaction.LOCK.UPDATE });
    const last = await tables.settings.findByPk(name, { transaction });
    if (last?.valueJson === valueJson) return false;
    const kept = { name, valueJson, changedAt: context.at };
    if (last) await last.update(kept, { transaction });
    else await tables.settings.create(kept, { transaction });
    const overdue = items.filter(({ days }) => days < 0).length;
    await work.mail({
      to: person.email,
      subject: overdue
        ? `${overdue} overdue, ${items.length - overdue} due within 14 days`
        : `${items.length} due within 14 days`,
      text: mailText(
        person.name,
        [
          'these certificates run out, the most urgent first:',
          items.map(({ what, when }) => `- ${what} ${when}`).join('\n'),
          'Once one is overdue, frames can be taken and fitted, but their readings cannot be accepted.',
        ],
        '/benches',
      ),
    });
    return true;
  });
}
