import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { Outcome } from '@/lib/domain/views';
import type { CommandContext } from '../context';
import { db } from '../db';
import { inTransaction } from '../transaction';

/** What becomes of a unit. A later word stands beside the earlier one; the newest counts. */
export async function setOutcome(
  context: CommandContext,
  { unitId, outcome, reason }: { unitId: number; outcome: Outcome; reason: string },
): Promise<null> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const unit = await tables.units.findByPk(unitId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!unit) throw new AppError('NOT_FOUND', 'There is no such unit.');
    const before = await tables.unitOutcomes.findOne({
      where: { unitId },
      order: [['id', 'DESC']],
      transaction,
    });
    await tables.unitOutcomes.create(
      { unitId, outcome, reason, setBy: context.actor.id, setAt: context.at },
      { transaction },
    );
    work.audit({
      action: 'unit.outcome',
      subject: { kind: 'unit', id: unitId, text: unit.serial },
      before: before ? { outcome: before.outcome, reason: before.reason } : null,
      after: { outcome, reason },
    });
    return null;
  });
}
