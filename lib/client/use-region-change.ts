'use client';

import { useMemo, useState } from 'react';
import type { Region } from '@/lib/domain/reading-result';
import type { FitFacts, ReadingView, RegionChange } from '@/lib/domain/views';
import { kept, rounded, sameRegion, startRegion, type Picture } from './region';
import { usePreviewFit, type PreviewState } from './use-preview-fit';

export interface RegionDesk {
  region: Region;
  leaveOut: number[];
  zeroShift: number;
  /** What differs from the reading that is shown, or null. */
  change: RegionChange | null;
  preview: PreviewState;
  setRegion: (region: Region) => void;
  toggleOrder: (m: number) => void;
  /** Counts all orders from the one that now has this number. */
  zeroAt: (m: number) => void;
  drop: () => void;
  /** Fits the region as it stands, where there is no reading yet to differ from. */
  fitAsItStands: () => void;
}

interface Start {
  frameId: number;
  picture: Picture | null;
  reading: ReadingView | null;
  /** What a fit of the frame is made with. */
  facts: FitFacts;
  /** This person may change the region now. */
  mayFit: boolean;
}

const sameNumbers = (a: readonly number[], b: readonly number[]) =>
  a.length === b.length && [...a].sort().join() === [...b].sort().join();

/** The region, the orders left out and the zero order as a person changes them, with the fit they would give. */
export function useRegionChange({ frameId, picture, reading, facts, mayFit }: Start): RegionDesk {
  const start = useMemo<RegionChange>(
    () => ({
      region: reading?.result.region ?? startRegion(picture ?? { widthPx: 1000, heightPx: 600 }),
      leaveOut: reading?.leaveOut ?? [],
      zeroShift: reading?.zeroShift ?? 0,
    }),
    [reading, picture],
  );
  const [state, setState] = useState({ from: reading?.id ?? null, now: start, asked: false });
  // Another reading is shown: start again from it.
  if (state.from !== (reading?.id ?? null)) setState({ from: reading?.id ?? null, now: start, asked: false });

  const { region, leaveOut, zeroShift } = state.now;
  const changed =
    !sameRegion(region, start.region) ||
    !sameNumbers(leaveOut, start.leaveOut) ||
    zeroShift !== start.zeroShift;
  const change = changed || state.asked ? state.now : null;
  const preview = usePreviewFit({ frameId, readingId: reading?.id ?? null, facts, mayFit }, change);
  const set = (part: Partial<RegionChange>) =>
    setState((before) => ({ ...before, now: { ...before.now, ...part } }));

  return {
    region,
    leaveOut,
    zeroShift,
    change,
    preview,
    setRegion: (next) => set({ region: rounded(picture ? kept(next, picture) : next) }),
    toggleOrder: (m) =>
      set({ leaveOut: leaveOut.includes(m) ? leaveOut.filter((o) => o !== m) : [...leaveOut, m] }),
    zeroAt: (m) => set({ zeroShift: zeroShift - m, leaveOut: leaveOut.map((o) => o - m) }),
    drop: () => setState((before) => ({ ...before, now: start, asked: false })),
    fitAsItStands: () => setState((before) => ({ ...before, asked: true })),
  };
}
