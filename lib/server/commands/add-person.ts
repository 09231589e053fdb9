import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { Role } from '@/lib/domain/roles';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { hashPassword } from '../passwords';
import { inTransaction, type Work } from '../transaction';

export interface NewPerson {
  name: string;
  email: string;
  roles: Role[];
  password: string;
  /** yyyy-mm-dd; the access ends with this day. */
  lastDay?: string | null;
}

export async function addPerson(context: CommandContext, person: NewPerson): Promise<{ personId: number }> {
  const passwordHash = await hashPassword(person.password);
  return inTransaction(context, (work) => insertPerson(work, context, person, passwordHash));
}

/** The first visit of an empty installation makes its first admin; afterwards this door is shut for good. */
export async function createFirstAdmin(
  context: CommandContext,
  person: Omit<NewPerson, 'roles'>,
): Promise<{ personId: number }> {
  const passwordHash = await hashPassword(person.password);
  return inTransaction(context, async (work) => {
    // The log's head is locked first here: of two first visits at once, the second waits and then finds somebody.
    await db().tables.auditHead.findByPk(1, {
      transaction: work.transaction,
      lock: work.transaction.LOCK.UPDATE,
    });
    const [found] = await select<{ many: number }>(
      'SELECT COUNT(*) AS many FROM people',
      {},
      work.transaction,
    );
    if (found.many > 0)
      throw new AppError('ALREADY_THERE', 'The first admin is already there. Ask them for an account.');
    return insertPerson(work, context, { ...person, roles: ['admin'] }, passwordHash);
  });
}

/** The moment a calendar day (UTC) is over. */
export function endOfDay(day: string | null | undefined): Date | null {
  return day ? new Date(Date.parse(`${day}T00:00:00Z`) + 86_400_000) : null;
}

async function insertPerson(work: Work, context: CommandContext, person: NewPerson, passwordHash: string) {
  const { tables } = db();
  const { transaction } = work;
  const { name, email, roles } = person;
  try {
    const { id } = await tables.people.create(
      { name, email, passwordHash, createdAt: context.at, accessUntil: endOfDay(person.lastDay) },
      { transaction },
    );
    await tables.personRoles.bulkCreate(
      [...new Set(roles)].map((role) => ({ personId: id, role })),
      { transaction },
    );
    work.audit({
      action: 'person.add',
      subject: { kind: 'person', id, text: name },
      before: null,
      after: { name, email, roles, active: true, ...(person.lastDay ? { lastDay: person.lastDay } : {}) },
    });
    return { personId: id };
  } catch (problem) {
    if (!(problem instanceof UniqueConstraintError)) throw problem;
    throw new AppError('ALREADY_THERE', 'Somebody has this e-mail already.', {
      email: 'Somebody has this e-mail already.',
    });
  }
}
