'use client';

import { useEffect, useState } from 'react';
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

/** The newest answer and the change it answers. */
interface Answered {
  key: string;
  fit: FitPreview | null;
  problem: string | null;
}

const NONE: Answered = { key: '', fit: null, problem: null };

function failure(problem: unknown): Pick<Answered, 'fit' | 'problem'> {
  const lost = problem instanceof TypeError;
  return {
    fit: null,
    problem: lost
      ? 'The service could not be reached. Your change is kept here; move it again to fit it.'
      : 'The fit could not be made. Try again.',
  };
}

/** Fits a change of the region without keeping it. `change` is null while nothing is changed. */
export function usePreviewFit(
  frameId: number,
  readingId: number | null,
  change: RegionChange | null,
): PreviewState {
  const [answered, setAnswered] = useState<Answered>(NONE);
  const key = change ? JSON.stringify([frameId, readingId, change]) : '';
  if (!key && answered !== NONE) setAnswered(NONE);

  useEffect(() => {
    if (!key) return undefined;
    const abort = new AbortController();
    const [, , wanted] = JSON.parse(key) as [number, number | null, RegionChange];
    const timer = setTimeout(() => {
      ask(frameId, readingId, wanted, abort.signal)
        .catch(failure)
        .then((answer) => {
          if (!abort.signal.aborted) setAnswered({ key, ...answer });
        });
    }, SETTLE_MS);
    return () => {
      clearTimeout(timer);
      abort.abort();
    };
  }, [key, frameId, readingId]);

  if (!key) return REST;
  return { working: answered.key !== key, fit: answered.fit, problem: answered.problem };
}
