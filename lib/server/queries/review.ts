import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { Me, ReviewView } from '@/lib/domain/views';
import { select } from '../db';
import { passwordCountsUntil } from '../password-proofs';
import { getSessionId } from '../session';
import { findFrame, mayFor } from './frames';

export interface QueueEntry {
  readingId: number;
  frameId: number;
}

/** What waits for a reviewer: riskiest first, then the one that waits longest. */
export function reviewQueue(benchId: number | null): Promise<QueueEntry[]> {
  return select<QueueEntry>(
    `SELECT reading_id AS readingId, frame_id AS frameId FROM reading_states
     WHERE status = :status ${benchId === null ? '' : 'AND bench_id = :benchId'}
     ORDER BY risk DESC, sent_at, reading_id LIMIT 2000`,
    { status: READING_STEPS.send.to, benchId },
  );
}

/** A reading as the review page shows it, with its place in the queue. */
export async function findReview(me: Me, readingId: number): Promise<ReviewView | null> {
  const [row] = await select<{ frame_id: number }>('SELECT frame_id FROM readings WHERE id = :readingId', {
    readingId,
  });
  if (!row) return null;
  const frame = await findFrame(row.frame_id, readingId);
  if (!frame) return null;
  const queue = await reviewQueue(null);
  const at = queue.findIndex((entry) => entry.readingId === readingId);
  return {
    frame,
    may: await mayFor(me, frame),
    queue: {
      at: at + 1,
      of: queue.length,
      previousId: at > 0 ? queue[at - 1].readingId : null,
      nextId: (at < 0 ? queue[0] : queue[at + 1])?.readingId ?? null,
    },
    passwordUntil:
      (await passwordCountsUntil(me.id, await getSessionId(), new Date()))?.toISOString() ?? null,
  };
}
