import { addressOf, idParam, textParam, type SearchParams } from './address';
import { RISKS, type QueueFilter, type Risk } from '@/lib/domain/review-queue';

const isRisk = (word: string): word is Risk => (RISKS as readonly string[]).includes(word);

/** The part of the queue an address names. */
export function readQueueFilter(params: SearchParams): QueueFilter {
  const risk = textParam(params, 'risk');
  return {
    risk: isRisk(risk) ? risk : null,
    benchId: idParam(params, 'bench'),
    find: textParam(params, 'find').trim().slice(0, 120),
  };
}

/** An address in the same part of the queue. */
export function queueHref(path: string, { risk, benchId, find }: QueueFilter, page = 1): string {
  return addressOf(path, { risk, bench: benchId, find, page: page > 1 ? page : null });
}

/** "3 days", "5 h", "12 min": how long something waits. */
export function ageText(since: string, nowMs: number): string {
  const minutes = Math.max(0, Math.round((nowMs - Date.parse(since)) / 60_000));
  if (minutes < 90) return `${minutes} min`;
  const hours = Math.round(minutes / 60);
  return hours < 36 ? `${hours} h` : `${Math.round(hours / 24)} days`;
}
