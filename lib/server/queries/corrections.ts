import 'server-only';
import type { CorrectionView } from '@/lib/domain/views';
import { correctedReadings, correctedTime } from '../corrections';

/** Rows a page shows; verdicts that change come first. */
const MOST_ROWS = 100;

/** What a setup that corrects the past would do, or null for one that does not. */
export async function correctionView(setupId: number): Promise<CorrectionView | null> {
  const time = await correctedTime(setupId);
  if (!time) return null;
  const readings = await correctedReadings(time);
  const rows = readings.map((reading) => ({
    readingId: reading.readingId,
    frameId: reading.frameId,
    name: reading.name,
    status: reading.status,
    medium: reading.medium,
    was: { valueNm: reading.valueNm, expandedNm: reading.expandedNm, verdict: reading.verdict },
    becomes:
      reading.isMeasured && reading.message === null
        ? {
            valueNm: reading.newValueNm,
            expandedNm: reading.newExpandedNm,
            verdict: reading.newVerdict,
          }
        : null,
    message: reading.message,
    flips: Boolean(reading.isMeasured) && reading.message === null && reading.verdict !== reading.newVerdict,
  }));
  return {
    from: time.from.toISOString(),
    until: time.until?.toISOString() ?? null,
    total: rows.length,
    measured: readings.filter(({ isMeasured }) => isMeasured).length,
    flips: rows.filter(({ flips }) => flips).length,
    withoutAnswer: rows.filter(({ message }) => message !== null).length,
    rows: [...rows.filter(({ flips }) => flips), ...rows.filter(({ flips }) => !flips)].slice(0, MOST_ROWS),
  };
}
