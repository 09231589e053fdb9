import 'server-only';
import { FRAME_STEPS } from '@/lib/domain/life-cycle';
import { PRODUCT, type CommandContext } from './context';
import { select } from './db';
import { env } from './env';
import { describe, log } from './log';

/** What the queue does to one frame; given by the server's start so that this file knows no commands. */
type Fit = (context: CommandContext, frameId: number) => Promise<unknown>;

interface Queue {
  fit: Fit;
  running: number;
  again: boolean;
  timer: NodeJS.Timeout | null;
}

const held = globalThis as { midfringeQueue?: Queue };
/** How long the queue rests when it is empty, and after a failure of the store or the database. */
const IDLE_MS = 5_000;

/** Started by the server process only; elsewhere frames wait until it runs. */
export function startQueue(fit: Fit): void {
  held.midfringeQueue ??= { fit, running: 0, again: false, timer: null };
  nudgeQueue();
}

/** One thread of the pool is left to people at work, where there is more than one. */
function atOnce(): number {
  return Math.max(1, env().MEASURE_THREADS - 1);
}

export function nudgeQueue(): void {
  const queue = held.midfringeQueue;
  if (!queue) return;
  if (queue.timer) clearTimeout(queue.timer);
  queue.timer = null;
  queue.again = true;
  while (queue.running < atOnce()) {
    queue.running += 1;
    queue.again = false;
    void drain(queue).finally(() => {
      queue.running -= 1;
      queue.timer ??= setTimeout(nudgeQueue, queue.again ? 0 : IDLE_MS).unref();
    });
  }
}

async function drain(queue: Queue): Promise<void> {
  try {
    for (;;) {
      const [next] = await select<{ id: number }>(
        'SELECT id FROM frames WHERE state IN (:from) ORDER BY id LIMIT 1',
        {
          from: FRAME_STEPS.take.from,
        },
      );
      if (!next) return;
      await queue.fit({ actor: PRODUCT, at: new Date() }, next.id);
    }
  } catch (problem) {
    log().error({ problem: describe(problem) }, 'the queue rests after a failure');
  }
}
