import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { forgetWrongPasswords } from '../attempts';
import { sha256 } from '../canonical';
import type { CommandContext } from '../context';
import { change, db } from '../db';
import { hashPassword } from '../passwords';
import { inTransaction } from '../transaction';

/** Sets a new password by a link that was mailed. The link works once; every session of the person ends. */
export async function resetPassword(
  context: CommandContext,
  { token, password }: { token: string; password: string },
): Promise<null> {
  const passwordHash = await hashPassword(password);
  const { tables } = db();
  const email = await inTransaction(context, async (work) => {
    const { transaction } = work;
    const tokenHash = sha256(token);
    const used = await change(
      'UPDATE password_resets SET used_at = :at WHERE token_hash = :tokenHash AND used_at IS NULL AND expires_at > :at',
      { tokenHash, at: context.at },
      transaction,
    );
    if (used !== 1)
      throw new AppError('BAD_INPUT', 'This link has been used or is too old. Ask for a new one.');
    const reset = await tables.passwordResets.findOne({
      where: { tokenHash },
      transaction,
      rejectOnEmpty: true,
    });
    const person = await tables.people.findByPk(reset.personId, { transaction, rejectOnEmpty: true });
    if (!person.active) throw new AppError('NOT_ALLOWED', 'This account is switched off. Ask an admin.');
    await person.update({ passwordHash, sessionVersion: person.sessionVersion + 1 }, { transaction });
    work.audit({
      action: 'person.reset-password',
      subject: { kind: 'person', id: person.id, text: person.name },
      before: null,
      after: null,
    });
    return person.email;
  });
  await forgetWrongPasswords(email, context.at);
  return null;
}
