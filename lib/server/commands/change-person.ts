import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { Role } from '@/lib/domain/roles';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { inTransaction } from '../transaction';
import { endOfDay } from './add-person';

/** Roles and whether the person may sign in. Their sessions end at once, so that no old right lingers. */
export async function changePerson(
  context: CommandContext,
  {
    personId,
    roles,
    active,
    lastDay = null,
  }: { personId: number; roles: Role[]; active: boolean; lastDay?: string | null },
): Promise<{ personId: number }> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    // Every admin's row is locked in one order: two admins can not switch each other off in the same moment.
    const admins = await select<{ id: number }>(
      `SELECT p.id FROM people p JOIN person_roles r ON r.person_id = p.id AND r.role = 'admin'
       WHERE p.active ORDER BY p.id FOR UPDATE`,
      {},
      transaction,
    );
    const person = await tables.people.findByPk(personId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!person) throw new AppError('NOT_FOUND', 'There is no such person.');
    const staysAdmin = active && roles.includes('admin');
    if (!staysAdmin && admins.every((admin) => admin.id === personId) && admins.length) {
      throw new AppError('WRONG_STATE', 'This is the last active admin. Make somebody else an admin first.');
    }
    const before = await tables.personRoles.findAll({ where: { personId }, transaction });
    await tables.personRoles.destroy({ where: { personId }, transaction });
    await tables.personRoles.bulkCreate(
      [...new Set(roles)].map((role) => ({ personId, role })),
      { transaction },
    );
    const wasActive = person.active;
    const accessUntil = endOfDay(lastDay);
    const wasUntil = person.accessUntil;
    await person.update({ active, accessUntil, sessionVersion: person.sessionVersion + 1 }, { transaction });
    work.audit({
      action: 'person.change',
      subject: { kind: 'person', id: personId, text: person.name },
      before: { roles: before.map((row) => row.role).sort(), active: wasActive, until: wasUntil },
      after: { roles: [...new Set(roles)].sort(), active, until: accessUntil },
    });
    return { personId };
  });
}

/** Ends every session of a person, on all their devices. */
export async function endSessions(context: CommandContext, personId: number): Promise<null> {
  return inTransaction(context, async (work) => {
    const person = await db().tables.people.findByPk(personId, {
      transaction: work.transaction,
      rejectOnEmpty: true,
    });
    await person.increment('sessionVersion', { transaction: work.transaction });
    work.audit({
      action: 'person.sign-out-everywhere',
      subject: { kind: 'person', id: personId, text: person.name },
      before: null,
      after: null,
    });
    return null;
  });
}
