'use client';

import { useEffect, useMemo, useSyncExternalStore } from 'react';
import { isScanResult } from '@/lib/domain/scan-result';
import type { FitFacts, FitPreview, RegionChange, SeenDigits } from '@/lib/domain/views';
import type { FitQuestion, FitReply } from './live-fit/fit-worker';
import { LiveFits, type FitHome, type FitServices } from './live-fit/live-fits';
import { fetchStack, fitOnServer, makeStack } from './live-fit/stacks';

export interface PreviewState {
  /** A newer fit is on its way; the last one stays in sight meanwhile. */
  working: boolean;
  fit: FitPreview | null;
  /** Why there is no fit for this change. */
  problem: string | null;
  /** Where the numbers come from; null where no fit is made here. */
  home: FitHome;
  /** Why the server fits and not this browser. */
  because: string | null;
  stackSha256: string | null;
}

interface Ask {
  frameId: number;
  readingId: number | null;
  facts: FitFacts;
  mayFit: boolean;
  /** A scan is fitted by the server: there are no bands to hold. */
  isScan: boolean;
}

/** The engine on a thread of this browser. Its file is bundled from the address below. */
function startWorker(onReply: (reply: FitReply) => void, onBroken: () => void) {
  const worker = new Worker(new URL('./live-fit/fit-worker.ts', import.meta.url), { type: 'module' });
  worker.addEventListener('message', (event: MessageEvent<FitReply>) => onReply(event.data));
  worker.addEventListener('error', (event) => {
    event.preventDefault();
    onBroken();
  });
  worker.addEventListener('messageerror', onBroken);
  return {
    postMessage: (question: FitQuestion, transfer: Transferable[]) => worker.postMessage(question, transfer),
    terminate: () => worker.terminate(),
  };
}

function servicesFor(frameId: number, readingId: number | null): FitServices {
  return {
    startWorker,
    fetchStack: (signal) => fetchStack(frameId, readingId ?? 0, signal),
    makeStack: (change, signal) => makeStack(frameId, change, signal),
    fitOnServer: (change, sha256, signal) => fitOnServer(frameId, change, sha256, signal),
  };
}

/** Fits a change of the region without keeping it. `change` is null while nothing is changed. */
export function usePreviewFit(ask: Ask, change: RegionChange | null): PreviewState {
  const { frameId, readingId, mayFit, isScan } = ask;
  const factsText = JSON.stringify(ask.facts);
  const fits = useMemo(
    () =>
      new LiveFits(servicesFor(frameId, readingId), JSON.parse(factsText) as FitFacts, readingId !== null),
    [frameId, readingId, factsText],
  );
  useEffect(() => {
    if (!mayFit) return undefined;
    fits.open(isScan);
    return () => fits.close();
  }, [fits, mayFit, isScan]);
  useEffect(() => fits.want(change), [fits, change]);
  const state = useSyncExternalStore(fits.subscribe, fits.current, fits.current);
  const { home, because, fit, problem, stackSha256 } = state;
  return { working: change !== null && state.change !== change, home, because, fit, problem, stackSha256 };
}

/** The digits of a fit that the server is to confirm when it is kept. */
export function digitsOf({ result }: FitPreview): SeenDigits | null {
  if (isScanResult(result)) return null;
  const { spacingPx, uSpacingPx, wavelengthNm, expandedNm } = result;
  return { spacingPx, uSpacingPx, wavelengthNm, expandedNm };
}
