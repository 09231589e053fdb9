import 'server-only';
import { ConnectionError, DatabaseError, type Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { appendAudit, type AuditEntry } from './audit';
import type { CommandContext } from './context';
import { db } from './db';
import { nudgeOutbox, postMail, type NewMail } from './outbox';

export interface Work {
  transaction: Transaction;
  /** Kept until the end: the log's head is the last row locked. */
  audit(entry: AuditEntry): void;
  /** Commits with the change and is sent after it. */
  mail(mail: NewMail): Promise<void>;
}

const TRIES = 5;

/** Runs the work and its log rows in one transaction; on a deadlock or a lock that is not given, again from the start. */
export async function inTransaction<T>(context: CommandContext, work: (w: Work) => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt += 1) {
    try {
      return await once(context, work);
    } catch (problem) {
      if (!isLockTrouble(problem)) throw problem;
      if (attempt >= TRIES) throw new AppError('BUSY', 'Too many people changed this at once. Try again.');
    }
  }
}

async function once<T>(context: CommandContext, work: (w: Work) => Promise<T>): Promise<T> {
  const { sequelize } = db();
  let mails = 0;
  const value = await sequelize.transaction(async (transaction) => {
    const entries: AuditEntry[] = [];
    const answer = await work({
      transaction,
      audit: (entry) => void entries.push(entry),
      mail: async (mail) => {
        mails += 1;
        await postMail(mail, context.at, transaction);
      },
    });
    await appendAudit(context, entries, transaction);
    return answer;
  });
  if (mails) nudgeOutbox();
  return value;
}

function isLockTrouble(problem: unknown): boolean {
  if (!(problem instanceof DatabaseError)) return false;
  const code = (problem.original as { code?: string }).code;
  return code === 'ER_LOCK_DEADLOCK' || code === 'ER_LOCK_WAIT_TIMEOUT' || code === 'ER_CHECKREAD';
}

export function isDatabaseDown(problem: unknown): boolean {
  return problem instanceof ConnectionError;
}
