import 'server-only';
import { UniqueConstraintError } from 'sequelize';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import type { benchRuleSchema, releaseBenchSchema } from '@/lib/domain/references';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { benchRule } from '../reference-checks';
import { inTransaction } from '../transaction';

/** Opens a stopped bench for accepting again. The reason stays with the stop. */
export async function releaseBench(
  context: CommandContext,
  { stopId, reason }: z.output<typeof releaseBenchSchema>,
): Promise<null> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const stop = await tables.benchStops.findByPk(stopId, { transaction });
    if (!stop) throw new AppError('NOT_FOUND', 'There is no such stop.');
    const bench = await tables.benches.findByPk(stop.benchId, {
      transaction,
      lock: transaction.LOCK.UPDATE,
      rejectOnEmpty: true,
    });
    const [newest] = await select<{ id: number }>(
      'SELECT MAX(id) AS id FROM reference_checks WHERE bench_id = :benchId',
      { benchId: bench.id },
      transaction,
    );
    try {
      await tables.benchReleases.create(
        {
          stopId,
          afterCheckId: newest.id,
          reason,
          releasedBy: context.actor.id,
          releasedAt: context.at,
        },
        { transaction },
      );
    } catch (problem) {
      if (!(problem instanceof UniqueConstraintError)) throw problem;
      throw new AppError('WRONG_STATE', 'Somebody else has released this bench already.');
    }
    work.audit({
      action: 'bench.release',
      subject: { kind: 'bench', id: bench.id, text: bench.name },
      before: { stopId, stoppedAt: stop.stoppedAt },
      after: { reason },
    });
    return null;
  });
}

/** How a bench is checked and how its wavelengths are found, from now on. */
export async function setBenchRule(
  context: CommandContext,
  { benchId, limitNm, method, why }: z.output<typeof benchRuleSchema>,
): Promise<null> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const bench = await tables.benches.findByPk(benchId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
    const before = await benchRule(benchId, transaction);
    await tables.benchRules.create(
      { benchId, limitNm, method, why, enteredBy: context.actor.id, enteredAt: context.at },
      { transaction },
    );
    work.audit({
      action: 'bench.rule',
      subject: { kind: 'bench', id: benchId, text: bench.name },
      before,
      after: { limitNm, method, why },
    });
    return null;
  });
}
