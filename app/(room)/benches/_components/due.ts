import type { FindingWord } from '@/lib/domain/reading-result';

const DAY_MS = 86_400_000;
/** A value due within this many days is worth a look. */
export const SOON_DAYS = 30;

/** Whole days from today to a calendar date; negative when it has passed. */
export function daysUntil(date: string, today: Date): number {
  const start = Date.UTC(today.getUTCFullYear(), today.getUTCMonth(), today.getUTCDate());
  return Math.round((Date.parse(`${date}T00:00:00Z`) - start) / DAY_MS);
}

export function dueWord(days: number): FindingWord {
  return days < 0 ? 'stop' : days <= SOON_DAYS ? 'look' : 'clear';
}
