'use client';

import { useMemo, useState } from 'react';
import type { Region } from '@/lib/domain/reading-result';
import { isScanRegion, isScanResult, type ScanRegion } from '@/lib/domain/scan-result';
import type { FitFacts, ReadingView, RegionChange } from '@/lib/domain/views';
import { kept, rounded, sameRegion, startRegion, turn, type Picture } from './region';
import { beginHistory, changed as changedHistory, redone, undone, type History } from './region-history';
import { keptInScan, roundedInScan } from './scan-region';
import { usePreviewFit, type PreviewState } from './use-preview-fit';
import { useTrials, type TrialKeeper } from './use-trials';

type AnyRegion = Region | ScanRegion;

export interface RegionDesk {
  /** A rectangle of a picture, or a part of a scan. */
  region: AnyRegion;
  /** Width of a scan's detector, null for a point. */
  detectorMm: number | null;
  leaveOut: number[];
  zeroShift: number;
  /** What differs from the reading that is shown, or null. */
  change: RegionChange | null;
  preview: PreviewState;
  setRegion: (region: AnyRegion) => void;
  /** Turns a picture's region. */
  turnBy: (deg: number) => void;
  setDetector: (detectorMm: number | null) => void;
  toggleOrder: (m: number) => void;
  /** Counts all orders from the one that now has this number. */
  zeroAt: (m: number) => void;
  drop: () => void;
  /** null where there is nothing to undo, or to do again. */
  undo: (() => void) | null;
  redo: (() => void) | null;
  trials: TrialKeeper;
  /** Fits the region as it stands, where there is no reading yet to differ from. */
  fitAsItStands: () => void;
}

interface Start {
  frameId: number;
  /** What the region lies on: a picture's size or a scan's length; null where the file gives neither. */
  bounds: Picture | ScanRegion | null;
  /** Of a scan, as it was uploaded. */
  detectorMm: number | null;
  reading: ReadingView | null;
  /** What a fit of the frame is made with. */
  facts: FitFacts;
  /** This person may change the region now. */
  mayFit: boolean;
}

interface DeskState {
  from: number | null;
  history: History<RegionChange>;
  asked: boolean;
}

const sameAny = (a: AnyRegion, b: AnyRegion) => {
  if (!isScanRegion(a)) return !isScanRegion(b) && sameRegion(a, b);
  return isScanRegion(b) && a.fromMm === b.fromMm && a.toMm === b.toMm;
};

const isLength = (bounds: Picture | ScanRegion | null): bounds is ScanRegion =>
  bounds !== null && 'fromMm' in bounds;

function startOn(bounds: Picture | ScanRegion | null): AnyRegion {
  if (isLength(bounds)) return { fromMm: bounds.fromMm, toMm: bounds.toMm };
  return startRegion(bounds ?? { widthPx: 1000, heightPx: 600 });
}

/** The region inside its bounds, in numbers a person can read back. */
function tidy(next: AnyRegion, before: AnyRegion, bounds: Picture | ScanRegion | null): AnyRegion {
  if (isScanRegion(next)) {
    if (!isLength(bounds) || !isScanRegion(before)) return next;
    return roundedInScan(keptInScan(next, bounds, before), bounds);
  }
  return rounded(bounds && !isLength(bounds) ? kept(next, bounds) : next);
}

const sameNumbers = (a: readonly number[], b: readonly number[]) =>
  a.length === b.length && [...a].sort().join() === [...b].sort().join();

/** The region, the orders left out and the zero order as a person changes them, with the fit they would give. */
export function useRegionChange({ frameId, bounds, detectorMm, reading, facts, mayFit }: Start): RegionDesk {
  const start = useMemo<RegionChange>(
    () => ({
      region: reading?.result.region ?? startOn(bounds),
      leaveOut: reading?.leaveOut ?? [],
      zeroShift: reading?.zeroShift ?? 0,
      ...(isLength(bounds)
        ? { detectorMm: reading && isScanResult(reading.result) ? reading.result.detectorMm : detectorMm }
        : {}),
    }),
    [reading, bounds, detectorMm],
  );
  const begin = (): DeskState => ({ from: reading?.id ?? null, history: beginHistory(start), asked: false });
  const [state, setState] = useState(begin);
  // Another reading is shown: start again from it.
  if (state.from !== (reading?.id ?? null)) setState(begin());

  const { history } = state;
  const { now } = history;
  const { region, leaveOut, zeroShift } = now;
  const changed =
    !sameAny(region, start.region) ||
    now.detectorMm !== start.detectorMm ||
    !sameNumbers(leaveOut, start.leaveOut) ||
    zeroShift !== start.zeroShift;
  const change = changed || state.asked ? now : null;
  const preview = usePreviewFit(
    { frameId, readingId: reading?.id ?? null, facts, mayFit, isScan: isLength(bounds) },
    change,
  );
  const trials = useTrials(frameId, reading?.id ?? null, change, preview);
  const set = (part: Partial<RegionChange>) => {
    const kind = Object.keys(part).join(' ');
    const atMs = Date.now();
    setState((before) => ({
      ...before,
      history: changedHistory(before.history, { ...before.history.now, ...part }, kind, atMs),
    }));
  };
  const step = (move: (from: History<RegionChange>) => History<RegionChange>) => () =>
    setState((before) => ({ ...before, history: move(before.history) }));

  const setRegion = (next: AnyRegion) => set({ region: tidy(next, region, bounds) });

  return {
    region,
    leaveOut,
    zeroShift,
    change,
    preview,
    detectorMm: now.detectorMm ?? null,
    setRegion,
    turnBy: (deg) => {
      if (!isScanRegion(region)) setRegion(turn(region, deg));
    },
    setDetector: (mm) => set({ detectorMm: mm }),
    toggleOrder: (m) =>
      set({ leaveOut: leaveOut.includes(m) ? leaveOut.filter((o) => o !== m) : [...leaveOut, m] }),
    zeroAt: (m) => set({ zeroShift: zeroShift - m, leaveOut: leaveOut.map((o) => o - m) }),
    drop: () => {
      trials.send();
      const atMs = Date.now();
      setState((before) => ({
        ...before,
        history: changedHistory(before.history, start, 'drop', atMs),
        asked: false,
      }));
    },
    undo: history.past.length ? step(undone) : null,
    redo: history.future.length ? step(redone) : null,
    trials,
    fitAsItStands: () => setState((before) => ({ ...before, asked: true })),
  };
}
