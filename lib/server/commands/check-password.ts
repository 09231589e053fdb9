import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { dropAttempt, forgetWrongPasswords, noteAttempt } from '../attempts';
import { change, select } from '../db';
import { comparePretend, isPassword } from '../passwords';

interface Knock {
  email: string;
  password: string;
  address: string;
  at: Date;
}

interface Known {
  id: number;
  name: string;
  password_hash: string;
  active: number;
  session_version: number;
}

/** E-mail and password, throttled. Throws WRONG_PASSWORD or TOO_MANY; the answer is the same for an unknown e-mail. */
export async function checkPassword({ email, password, address, at }: Knock) {
  const attempt = await noteAttempt(email, address, at);
  const [person] = await select<Known>(
    `SELECT id, name, password_hash, active AND (access_until IS NULL OR access_until > :at) AS active, session_version
     FROM people WHERE email = :email`,
    { email, at },
  );
  const right = person?.active
    ? await isPassword(person.password_hash, password)
    : await comparePretend(password);
  if (!right) throw new AppError('WRONG_PASSWORD', 'The e-mail or the password is not right.');
  await dropAttempt(attempt);
  await forgetWrongPasswords(email, at);
  await change('UPDATE people SET last_sign_in_at = :at WHERE id = :id', { at, id: person.id });
  return { id: person.id, name: person.name, sessionVersion: person.session_version };
}

/** The signed-in person types their password again to sign; throttled like the door. */
export async function checkOwnPassword(personId: number, password: string, at: Date): Promise<void> {
  const [person] = await select<{ email: string; password_hash: string }>(
    'SELECT email, password_hash FROM people WHERE id = :personId AND active',
    { personId },
  );
  if (!person) throw new AppError('NOT_SIGNED_IN', 'Your session has ended. Sign in again.');
  const attempt = await noteAttempt(person.email, `signing ${personId}`, at);
  if (!(await isPassword(person.password_hash, password))) {
    throw new AppError('WRONG_PASSWORD', 'The password is not right. Nothing was signed.', {
      password: 'The password is not right.',
    });
  }
  await dropAttempt(attempt);
}
