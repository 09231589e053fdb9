import 'server-only';
import { AppError } from '@/lib/domain/errors';
import type { Trial } from '@/lib/domain/review-schemas';
import type { CommandContext } from '../context';
import { loadFrame } from '../frame-facts';
import { findReading, readingText } from '../reading-facts';
import { storeTrials } from '../region-trials';
import { inTransaction } from '../transaction';

/** Keeps what regions were tried of a change that was then dropped or left. */
export async function logTrials(
  context: CommandContext,
  { frameId, readingId, trials }: { frameId: number; readingId: number | null; trials: readonly Trial[] },
): Promise<void> {
  const frame = await loadFrame(frameId);
  const reading = readingId === null ? null : await findReading(readingId);
  if (reading && reading.frameId !== frameId)
    throw new AppError('BAD_INPUT', 'This reading is of another frame.');
  await inTransaction(context, async (work) => {
    await storeTrials(work, context, { frameId, fromReadingId: readingId, keptReadingId: null }, trials);
    work.audit({
      action: 'reading.try',
      subject: reading
        ? { kind: 'reading', id: reading.readingId, text: readingText(reading) }
        : { kind: 'frame', id: frame.id, text: frame.fileName },
      before: null,
      after: { regionsTried: trials.length, valuesNm: trials.map(({ valueNm }) => valueNm) },
    });
  });
}
