import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import { checkOwnPassword } from './commands/check-password';
import type { CommandContext } from './context';
import { change, db, select } from './db';

const LASTS_MS = LIMITS.passwordMinutes * 60_000;

/**
 * Makes sure that it is the person who signs: by the password now, or by one typed to sign in the same session at
 * most five minutes ago. Answers when it was typed. Throws WRONG_PASSWORD or TOO_MANY.
 */
export async function requireOwnPassword(context: CommandContext, password: string): Promise<Date> {
  const { actor, at, sessionId } = context;
  if (password === '') {
    const typed = sessionId ? await typedAt(actor.id, sessionId, at) : null;
    if (typed) return typed;
    throw new AppError('WRONG_PASSWORD', 'Type your password to sign. Nothing was signed.', {
      password: 'Type your password to sign.',
    });
  }
  await checkOwnPassword(actor.id, password, at);
  if (sessionId) {
    await change('DELETE FROM password_proofs WHERE at < :old', { old: new Date(at.getTime() - LASTS_MS) });
    await db().tables.passwordProofs.upsert({ personId: actor.id, sessionId, at });
  }
  return at;
}

/** Until when the password typed last in this session still signs; null when it must be typed. */
export async function passwordCountsUntil(
  personId: number,
  sessionId: string | null,
  now: Date,
): Promise<Date | null> {
  const typed = sessionId ? await typedAt(personId, sessionId, now) : null;
  return typed && new Date(typed.getTime() + LASTS_MS);
}

async function typedAt(personId: number, sessionId: string, now: Date): Promise<Date | null> {
  const [proof] = await select<{ at: Date }>(
    `SELECT p.at FROM password_proofs p WHERE p.person_id = :personId AND p.session_id = :sessionId
     AND p.at > :since AND p.at <= :now`,
    { personId, sessionId, since: new Date(now.getTime() - LASTS_MS), now },
  );
  return proof?.at ?? null;
}
