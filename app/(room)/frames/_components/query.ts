import { addressOf, idParam, textParam, type SearchParams } from '@/lib/client/address';
import { FRAME_STATES, READING_STATES, type FrameState, type ReadingState } from '@/lib/domain/life-cycle';
import type { FramesQuery } from '@/lib/domain/views';

export const DAYS = [7, 30, 90, 0] as const;
export const DAYS_AT_REST = 90;

const STATES: readonly string[] = [...FRAME_STATES, ...READING_STATES];

function isState(word: string): word is FrameState | ReadingState {
  return STATES.includes(word);
}

/** The filters as the address gives them; what it does not name is at rest. */
export function readFramesQuery(params: SearchParams, benchInUse: number | null): FramesQuery {
  const state = textParam(params, 'state');
  const days = textParam(params, 'days');
  const bench = textParam(params, 'bench');
  return {
    state: isState(state) ? state : '',
    find: textParam(params, 'find').trim().slice(0, 120),
    benchId: bench === 'all' ? null : (idParam(params, 'bench') ?? benchInUse),
    lotId: idParam(params, 'lot'),
    days: days === 'all' ? 0 : Number(days) > 0 ? Math.min(3650, Math.round(Number(days))) : DAYS_AT_REST,
    mine: textParam(params, 'mine') === '1',
    page: idParam(params, 'page') ?? 1,
  };
}

/** The address of a list. The bench in use is kept by the browser, so the address does not repeat it. */
export function framesHref(query: FramesQuery): string {
  return addressOf('/frames', {
    state: query.state,
    find: query.find,
    lot: query.lotId,
    days: query.days === DAYS_AT_REST ? null : query.days === 0 ? 'all' : query.days,
    mine: query.mine ? 1 : null,
    page: query.page > 1 ? query.page : null,
  });
}
