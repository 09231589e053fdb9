import 'server-only';
import type { z } from 'zod';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { chooseReadingSchema } from '@/lib/domain/repeats';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { inTransaction } from '../transaction';

/** Chooses which accepted reading of a unit is reported. A later choice stands beside the earlier one. */
export async function chooseReading(
  context: CommandContext,
  { readingId, reason }: z.output<typeof chooseReadingSchema>,
): Promise<null> {
  const { tables } = db();
  return inTransaction(context, async (work) => {
    const { transaction } = work;
    const [reading] = await select<{ unit_id: number | null; status: string; name: string; number: number }>(
      `SELECT r.unit_id, s.status, f.file_name AS name, r.number FROM readings r
       JOIN reading_states s ON s.reading_id = r.id JOIN frames f ON f.id = r.frame_id WHERE r.id = :readingId
       FOR UPDATE`,
      { readingId },
      transaction,
    );
    if (!reading) throw new AppError('NOT_FOUND', 'There is no such reading.');
    const { unit_id: unitId } = reading;
    if (unitId === null)
      throw new AppError('WRONG_STATE', 'This reading is of no unit, so there is nothing to choose.');
    if (reading.status !== READING_STEPS.accept.to)
      throw new AppError('WRONG_STATE', 'Only an accepted reading can be reported.');
    const unit = await tables.units.findByPk(unitId, { transaction, rejectOnEmpty: true });
    const before = await tables.reportableChoices.findOne({
      where: { unitId },
      order: [['id', 'DESC']],
      transaction,
    });
    await tables.reportableChoices.create(
      { unitId, readingId, reason, chosenBy: context.actor.id, chosenAt: context.at },
      { transaction },
    );
    work.audit({
      action: 'unit.choose-reading',
      subject: { kind: 'unit', id: unitId, text: unit.serial },
      before: before ? { readingId: before.readingId, reason: before.reason } : null,
      after: { readingId, reading: `${reading.name}, reading ${reading.number}`, reason },
    });
    return null;
  });
}
