import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { CommandContext } from './context';
import { change, db, select } from './db';
import { EVER_IN_FORCE, IN_FORCE_FROM } from './setup-timeline';
import type { Work } from './transaction';

/** Later than any moment a setup is entered for. */
const NEVER = new Date('9999-01-01T00:00:00Z');

interface Wanted {
  plateId: number;
  benchId: number;
  from: Date;
}

/** The plate with its row locked: of two who move it one waits for the other. */
export async function lockPlate(work: Work, plateId: number): Promise<{ id: number; name: string }> {
  const { transaction } = work;
  const plate = await db().tables.plates.findByPk(plateId, { transaction, lock: transaction.LOCK.UPDATE });
  if (!plate) throw new AppError('NOT_FOUND', 'There is no such plate.');
  return plate;
}

/**
 * Puts a plate on a bench from a moment until the bench's next setup, and ends what was there. Refused while it is on
 * another bench at any moment of that time; the unique keys of the table stand behind it. The bench's row is locked by
 * the caller.
 */
export async function mountPlate(work: Work, context: CommandContext, wanted: Wanted): Promise<void> {
  const { plateId, benchId, from } = wanted;
  const { transaction } = work;
  const plate = await lockPlate(work, plateId);
  const [next] = await select<{ at: Date | null }>(
    `SELECT MIN(${IN_FORCE_FROM}) AS at FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
     WHERE s.bench_id = :benchId AND ${EVER_IN_FORCE} AND ${IN_FORCE_FROM} > :from`,
    { benchId, from },
    transaction,
  );
  const until = next.at;
  await requireFree(work, plate, wanted, until ?? NEVER);
  await change(
    `UPDATE plate_mounts SET to_at = :from WHERE bench_id = :benchId AND from_at <= :from AND (to_at IS NULL OR to_at > :from)`,
    { benchId, from },
    transaction,
  );
  try {
    await db().tables.plateMounts.create(
      { plateId, benchId, fromAt: from, toAt: until, mountedBy: context.actor.id },
      { transaction },
    );
  } catch (problem) {
    if (!(problem instanceof UniqueConstraintError)) throw problem;
    throw new AppError(
      'CHANGED_MEANWHILE',
      `Plate ${plate.name} was mounted somewhere meanwhile. Load the page to see where it is.`,
    );
  }
  work.audit({
    action: 'plate.mount',
    subject: { kind: 'plate', id: plateId, text: `Plate ${plate.name}` },
    before: null,
    after: { benchId, from, until },
  });
}

async function requireFree(
  work: Work,
  plate: { id: number; name: string },
  { benchId, from }: Wanted,
  until: Date,
): Promise<void> {
  // A locking read sees what others have committed while this one waited for the plate.
  const [elsewhere] = await select<{ bench: string; from_at: Date }>(
    `SELECT b.name AS bench, m.from_at FROM plate_mounts m JOIN benches b ON b.id = m.bench_id
     WHERE m.plate_id = :plateId AND m.bench_id <> :benchId AND m.from_at < :until
       AND (m.to_at IS NULL OR m.to_at > :from) ORDER BY m.from_at LIMIT 1 FOR UPDATE`,
    { plateId: plate.id, benchId, from, until },
    work.transaction,
  );
  if (!elsewhere) return;
  throw new AppError(
    'WRONG_STATE',
    `Plate ${plate.name} is on ${elsewhere.bench} since ${elsewhere.from_at.toISOString().slice(0, 16).replace('T', ' ')} UTC. Take it off there first, under Plates.`,
  );
}

/** Is the plate of this setup on this bench at this moment? */
export async function isMounted(benchId: number, setupId: number, at: Date): Promise<boolean> {
  const [found] = await select<{ id: number }>(
    `SELECT m.id FROM plate_mounts m JOIN setup_plates x ON x.plate_id = m.plate_id
     WHERE x.setup_id = :setupId AND m.bench_id = :benchId AND m.from_at <= :at AND (m.to_at IS NULL OR m.to_at > :at) LIMIT 1`,
    { benchId, setupId, at },
  );
  return Boolean(found);
}
