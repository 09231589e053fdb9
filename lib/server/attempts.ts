import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { change, db, select } from './db';

const WINDOW_MINUTES = 15;
/** Wrong passwords for one e-mail, and from one address, within the window. */
export const WRONG_PER_EMAIL = 5;
const WRONG_PER_ADDRESS = 30;

/**
 * Notes a try before the password is looked at, so that many tries at once count as many; a right password drops
 * the note again. Throws TOO_MANY with the wait in words while the door is shut for this e-mail or address.
 */
export async function noteAttempt(email: string, address: string, at: Date): Promise<number> {
  const since = new Date(at.getTime() - WINDOW_MINUTES * 60_000);
  const { id } = await db().tables.signInAttempts.create({ email: email.slice(0, 254), address, at });
  const byEmail = await earlier('email', email, id, since);
  const byAddress = await earlier('address', address, id, since);
  const shut =
    byEmail.many >= WRONG_PER_EMAIL ? byEmail : byAddress.many >= WRONG_PER_ADDRESS ? byAddress : null;
  if (!shut?.first) return id;
  await dropAttempt(id);
  const waitMs = shut.first.getTime() + WINDOW_MINUTES * 60_000 - at.getTime();
  const minutes = Math.max(1, Math.ceil(waitMs / 60_000));
  throw new AppError(
    'TOO_MANY',
    `Too many wrong passwords. Wait ${minutes} ${minutes === 1 ? 'minute' : 'minutes'}, or set a new password by mail.`,
  );
}

async function earlier(column: 'email' | 'address', value: string, id: number, since: Date) {
  const [found] = await select<{ many: number; first: Date | null }>(
    `SELECT COUNT(*) AS many, MIN(at) AS first FROM sign_in_attempts
     WHERE ${column} = :value AND at > :since AND id < :id`,
    { value, since, id },
  );
  return found;
}

export async function dropAttempt(id: number): Promise<void> {
  await change('DELETE FROM sign_in_attempts WHERE id = :id', { id });
}

/** A right password forgives the e-mail's earlier mistakes; old rows are swept on the way. */
export async function forgetWrongPasswords(email: string, at: Date): Promise<void> {
  await change('DELETE FROM sign_in_attempts WHERE email = :email OR at < :old', {
    email,
    old: new Date(at.getTime() - 24 * 3_600_000),
  });
}
