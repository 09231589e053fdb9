'use client';

import { useEffect, useState } from 'react';
import type { ScanDrawing } from '@/lib/domain/scan-result';

const LOST = 'The scan could not be loaded. The numbers below still move the region.';

/** The whole scan of a frame for a drawing; null until it is here. */
export function useScanDrawing(frameId: number): { drawing: ScanDrawing | null; problem: string | null } {
  const [drawing, setDrawing] = useState<ScanDrawing | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  useEffect(() => {
    const abort = new AbortController();
    fetch(`/api/frames/${frameId}/scan`, { signal: abort.signal })
      .then(async (response) => {
        if (response.ok) setDrawing((await response.json()) as ScanDrawing);
        else setProblem(LOST);
      })
      .catch(() => {
        if (!abort.signal.aborted) setProblem(LOST);
      });
    return () => abort.abort();
  }, [frameId]);
  return { drawing, problem };
}
