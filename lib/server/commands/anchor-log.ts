import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { pageAddress } from '../people-mail';
import { inTransaction } from '../transaction';

/**
 * Writes down once a day (UTC) where the log stands, and mails it to everyone in QA: whoever rewrote the whole log
 * would have to rewrite their mailboxes too. Answers false where the day has its anchor already.
 */
export async function anchorLog(context: CommandContext): Promise<boolean> {
  const day = context.at.toISOString().slice(0, 10);
  const { tables } = db();
  if (await tables.auditAnchors.findByPk(day)) return false;
  try {
    await inTransaction(context, async (work) => {
      const { transaction } = work;
      const head = await tables.auditHead.findByPk(1, {
        transaction,
        lock: transaction.LOCK.UPDATE,
        rejectOnEmpty: true,
      });
      const { lastId, hash } = head;
      await tables.auditAnchors.create({ day, lastId, hash, madeAt: context.at }, { transaction });
      const readers = await select<{ name: string; email: string }>(
        `SELECT p.name, p.email FROM people p JOIN person_roles r ON r.person_id = p.id AND r.role = 'qa'
         WHERE p.active ORDER BY p.id`,
        {},
        transaction,
      );
      for (const { name, email } of readers) {
        await work.mail({
          to: email,
          subject: `The log on ${day}: ${lastId} rows`,
          text: [
            `Hello ${name},`,
            '',
            `On ${day} the log has ${lastId} rows. The hash of the last one is`,
            '',
            hash,
            '',
            'Keep this mail. If row and hash in the log ever differ from it, the log was written anew.',
            '',
            pageAddress('/log'),
          ].join('\n'),
        });
      }
    });
    return true;
  } catch (problem) {
    // Another process of the product was faster by a moment; the day has its anchor and its mails.
    if (problem instanceof UniqueConstraintError) return false;
    throw problem;
  }
}
