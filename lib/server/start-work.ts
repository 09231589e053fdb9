import 'server-only';
import { anchorLog } from './commands/anchor-log';
import { fitFrame } from './commands/fit-frame';
import { healCopying, healFrames } from './commands/heal-frames';
import { PRODUCT } from './context';
import { env } from './env';
import { describe, log } from './log';
import { startOutbox } from './outbox';
import { nudgeQueue, startQueue } from './queue';

/** How often copies that broke off while the server ran are taken up again, and how old they must be. */
const RETRY_MS = 60_000;
const BROKEN_OFF_MS = 10 * 60_000;
/** How often it is looked whether the day has its anchor yet. */
const ANCHOR_MS = 10 * 60_000;

/** What the server process does beside answering: finishes what a crash left, fits waiting frames, sends mails, anchors the log. */
export async function startWork(): Promise<void> {
  env();
  try {
    const healed = await healFrames({ actor: PRODUCT, at: new Date() });
    log().info(healed, 'started');
  } catch (problem) {
    log().error(
      { problem: describe(problem) },
      'what a crash left could not be looked at yet; it is tried again every minute',
    );
  }
  startQueue(fitFrame);
  startOutbox();
  setInterval(() => void retryCopies(), RETRY_MS).unref();
  void anchorToday();
  setInterval(() => void anchorToday(), ANCHOR_MS).unref();
}

async function anchorToday(): Promise<void> {
  try {
    await anchorLog({ actor: PRODUCT, at: new Date() });
  } catch (problem) {
    log().warn({ problem: describe(problem) }, 'the log could not be anchored yet; it is tried again');
  }
}

async function retryCopies(): Promise<void> {
  const now = new Date();
  try {
    const { landed } = await healCopying(
      { actor: PRODUCT, at: now },
      new Date(now.getTime() - BROKEN_OFF_MS),
    );
    if (landed) nudgeQueue();
  } catch (problem) {
    log().warn({ problem: describe(problem) }, 'copies that broke off wait for the store or the database');
  }
}
