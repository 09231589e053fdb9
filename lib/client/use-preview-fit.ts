'use client';

import { useEffect, useRef, useState } from 'react';
import type { FitPreview, RegionChange } from '@/lib/domain/views';

export interface PreviewState {
  /** A newer fit is on its way; the last one stays in sight meanwhile. */
  working: boolean;
  fit: FitPreview | null;
  /** Why there is no fit for this change. */
  problem: string | null;
}

const REST: PreviewState = { working: false, fit: null, problem: null };
/** A drag settles this long before a fit is asked for. */
const SETTLE_MS = 250;

async function ask(frameId: number, readingId: number | null, change: RegionChange, signal: AbortSignal) {
  const response = await fetch(`/api/frames/${frameId}/preview-fit`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ ...change, readingId }),
    signal,
  });
  const body: unknown = await response.json();
  if (response.ok) return { fit: body as FitPreview, problem: null };
  const title = (body as { title?: unknown }).title;
  return { fit: null, problem: typeof title === 'string' ? title : 'The fit could not be made. Try again.' };
}

/** Fits a change of the region without keeping it. `change` is null while nothing is changed. */
export function usePreviewFit(
  frameId: number,
  readingId: number | null,
  change: RegionChange | null,
): PreviewState {
  const [state, setState] = useState<PreviewState>(REST);
  const asked = useRef(0);
  const key = change ? JSON.stringify(change) : '';

  useEffect(() => {
    const mine = ++asked.current;
    if (!key) {
      setState(REST);
      return undefined;
    }
    const abort = new AbortController();
    setState((before) => ({ ...before, working: true }));
    const timer = setTimeout(() => {
      ask(frameId, readingId, JSON.parse(key) as RegionChange, abort.signal)
        .then((answer) => {
          if (mine === asked.current) setState({ working: false, ...answer });
        })
        .catch((problem: unknown) => {
          if (abort.signal.aborted || mine !== asked.current) return;
          const lost = problem instanceof TypeError;
          setState({
            working: false,
            fit: null,
            problem: lost
              ? 'The service could not be reached. Your change is kept here; move it again to fit it.'
              : 'The fit could not be made. Try again.',
          });
        });
    }, SETTLE_MS);
    return () => {
      clearTimeout(timer);
      abort.abort();
    };
  }, [key, frameId, readingId]);

  return state;
}
