import 'server-only';
import { WHOLE_QUEUE, type QueueFilter } from '@/lib/domain/review-queue';
import type { Me, ReviewView } from '@/lib/domain/views';
import { select } from '../db';
import { passwordCountsUntil } from '../password-proofs';
import { getSessionId } from '../session';
import { findFrame, mayFor } from './frames';
import { reviewQueue } from './review-queue';

/** A reading as the review page shows it, with its place in the part of the queue a person works through. */
export async function findReview(
  me: Me,
  readingId: number,
  filter: QueueFilter = WHOLE_QUEUE,
): Promise<ReviewView | null> {
  const [row] = await select<{ frame_id: number }>('SELECT frame_id FROM readings WHERE id = :readingId', {
    readingId,
  });
  if (!row) return null;
  const frame = await findFrame(row.frame_id, readingId);
  if (!frame) return null;
  const queue = await reviewQueue(filter);
  const at = queue.findIndex((entry) => entry.readingId === readingId);
  const next = at < 0 ? queue[0] : queue[at + 1];
  return {
    frame,
    may: await mayFor(me, frame),
    queue: {
      at: at + 1,
      of: queue.length,
      previousId: at > 0 ? queue[at - 1].readingId : null,
      nextId: next?.readingId ?? null,
      nextFrameId: next?.frameId ?? null,
      because: at >= 0 && queue[at].risk === 'new-supplier' ? queue[at].because : null,
    },
    passwordUntil:
      (await passwordCountsUntil(me.id, await getSessionId(), new Date()))?.toISOString() ?? null,
  };
}
