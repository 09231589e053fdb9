import 'server-only';
import { AppError } from '@/lib/domain/errors';

interface Bucket {
  tokens: number;
  at: number;
}

export interface Rate {
  /** Calls in a burst, and how many come back each minute. */
  burst: number;
  perMinute: number;
}

const held = globalThis as { midfringeBuckets?: Map<string, Bucket> };
const MOST_BUCKETS = 20_000;

/** One token per call of `name` by `who`; throws TOO_MANY when none is left. */
export function spendToken(name: string, who: string, rate: Rate, now: Date): void {
  const buckets = (held.midfringeBuckets ??= new Map());
  if (buckets.size > MOST_BUCKETS) buckets.clear();
  const key = `${name} ${who}`;
  const at = now.getTime();
  const before = buckets.get(key) ?? { tokens: rate.burst, at };
  const tokens = Math.min(rate.burst, before.tokens + ((at - before.at) / 60_000) * rate.perMinute);
  if (tokens < 1)
    throw new AppError('TOO_MANY', 'That was too often in a short time. Wait a minute and try again.');
  buckets.set(key, { tokens: tokens - 1, at });
}
