import 'server-only';
import { randomBytes } from 'node:crypto';
import { LIMITS } from '@/lib/domain/limits';
import { sha256 } from '../canonical';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { inTransaction } from '../transaction';

/** Mails between two links for one person. */
const MOST_PER_HOUR = 5;

/** Mails a link to set a new password. Answers the same whether or not anybody has this e-mail. */
export async function askReset(
  context: CommandContext,
  { email, site }: { email: string; site: string },
): Promise<null> {
  const { tables } = db();
  await inTransaction(context, async (work) => {
    const { transaction } = work;
    const person = await tables.people.findOne({ where: { email, active: true }, transaction });
    if (!person) return;
    const [asked] = await select<{ many: number }>(
      'SELECT COUNT(*) AS many FROM password_resets WHERE person_id = :id AND created_at > :since',
      { id: person.id, since: new Date(context.at.getTime() - 3_600_000) },
      transaction,
    );
    if (asked.many >= MOST_PER_HOUR) return;
    const token = randomBytes(32).toString('base64url');
    await tables.passwordResets.create(
      {
        personId: person.id,
        tokenHash: sha256(token),
        createdAt: context.at,
        expiresAt: new Date(context.at.getTime() + LIMITS.resetMinutes * 60_000),
      },
      { transaction },
    );
    await work.mail({
      to: person.email,
      subject: 'Set a new Midfringe password',
      text: [
        `Hello ${person.name},`,
        '',
        'somebody, probably you, asked to set a new password for Midfringe. Open this address to do so:',
        '',
        `${site}/reset/${token}`,
        '',
        `It works once, within ${LIMITS.resetMinutes} minutes. If it was not you, nothing has changed and there is nothing to do.`,
      ].join('\n'),
    });
    work.audit({
      action: 'person.ask-reset',
      subject: { kind: 'person', id: person.id, text: person.name },
      before: null,
      after: null,
    });
  });
  return null;
}
