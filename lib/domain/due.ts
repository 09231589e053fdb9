/** When a certified value runs out. Dates are calendar days in UTC; a value holds through its day. */
import { formatCalendarDate } from '@/lib/quantity/format';
import type { FindingWord } from './reading-result';

const DAY_MS = 86_400_000;
/** A value due within this many days is worth a look. */
export const DUE_SOON_DAYS = 14;

export interface Due {
  word: FindingWord;
  text: string;
}

/** Whole days from today to a calendar date; negative when it has passed. */
export function daysUntil(date: string, today: Date): number {
  return Math.round(
    (Date.parse(`${date}T00:00:00Z`) - Date.parse(`${today.toISOString().slice(0, 10)}T00:00:00Z`)) / DAY_MS,
  );
}

export function dueWord(days: number): FindingWord {
  return days < 0 ? 'stop' : days <= DUE_SOON_DAYS ? 'look' : 'clear';
}

/** "Overdue since 3 Mar 2027", "Due today", "Due 3 Mar 2027, in 9 days", "No end". */
export function dueOf(date: string | null, today: Date): Due {
  if (date === null) return { word: 'clear', text: 'No end' };
  const days = daysUntil(date, today);
  const word = dueWord(days);
  if (days < 0) return { word, text: `Overdue since ${formatCalendarDate(date)}` };
  if (days === 0) return { word, text: 'Due today' };
  return {
    word,
    text: `Due ${formatCalendarDate(date)}${word === 'look' ? `, in ${days} ${days === 1 ? 'day' : 'days'}` : ''}`,
  };
}
