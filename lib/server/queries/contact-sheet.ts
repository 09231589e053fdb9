import 'server-only';
import { LIMITS } from '@/lib/domain/limits';
import type { QueueFilter, QueueRow } from '@/lib/domain/review-queue';
import type { Me } from '@/lib/domain/views';
import { findReading, whyBarred } from '../reading-facts';
import { queueRows, reviewQueue } from './review-queue';

export interface ContactSheet {
  /** Clean, within their limits, and open to this person. */
  rows: QueueRow[];
  /** As clean, but this person had a hand in them. */
  barred: number;
  /** More than fit on one sheet. */
  left: number;
}

/** The calm end of the queue, for one person to sign together. */
export async function contactSheet(me: Me, filter: QueueFilter): Promise<ContactSheet> {
  const queue = await reviewQueue({ ...filter, risk: null });
  const calm = queue.filter(({ risk }) => risk === 'rest' || risk === 'new-supplier');
  const rows = (await queueRows(calm)).filter(
    ({ reading }) => reading.word === 'clear' && reading.judgement?.verdict === 'within',
  );
  const open: QueueRow[] = [];
  let barred = 0;
  for (const row of rows) {
    if (await whyBarred(me.id, await findReading(row.readingId))) barred += 1;
    else open.push(row);
    if (open.length > LIMITS.sheetReadings) break;
  }
  return {
    rows: open.slice(0, LIMITS.sheetReadings),
    barred,
    left: Math.max(0, rows.length - barred - LIMITS.sheetReadings),
  };
}
