import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { CommandContext } from '../context';
import { change, db, select } from '../db';
import { lockPlate, mountPlate } from '../plate-mounts';
import { setupAt } from '../setup-timeline';
import { inTransaction } from '../transaction';

/** Takes a plate off the bench it is on. The bench's frames can be taken, not accepted, until a plate is on it again. */
export async function takePlateOff(context: CommandContext, { plateId }: { plateId: number }): Promise<null> {
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const plate = await lockPlate(work, plateId);
    const [mount] = await select<{ id: number; bench_id: number; from_at: Date }>(
      `SELECT id, bench_id, from_at FROM plate_mounts
       WHERE plate_id = :plateId AND from_at <= :at AND (to_at IS NULL OR to_at > :at) LIMIT 1 FOR UPDATE`,
      { plateId, at: context.at },
      transaction,
    );
    if (!mount) throw new AppError('WRONG_STATE', `Plate ${plate.name} is on no bench.`);
    await change(
      'UPDATE plate_mounts SET to_at = :at WHERE id = :id',
      { id: mount.id, at: context.at },
      transaction,
    );
    work.audit({
      action: 'plate.take-off',
      subject: { kind: 'plate', id: plateId, text: `Plate ${plate.name}` },
      before: { benchId: mount.bench_id, from: mount.from_at },
      after: { benchId: null, from: context.at },
    });
    return null;
  });
}

/** Puts a plate back on the bench whose setup in force names it. Another plate needs another setup. */
export async function putPlateBack(
  context: CommandContext,
  { plateId, benchId }: { plateId: number; benchId: number },
): Promise<null> {
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const bench = await db().tables.benches.findByPk(benchId, {
      transaction,
      lock: transaction.LOCK.UPDATE,
    });
    if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
    const setup = await setupAt(benchId, context.at, transaction);
    const picked = setup ? await db().tables.setupPlates.findByPk(setup.id, { transaction }) : null;
    if (picked?.plateId !== plateId) {
      throw new AppError(
        'WRONG_STATE',
        `The setup in force of ${bench.name} names another plate. To use this one, enter a setup with it.`,
      );
    }
    await mountPlate(work, context, { plateId, benchId, from: context.at });
    return null;
  });
}
