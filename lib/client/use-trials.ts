'use client';

import { useEffect, useRef } from 'react';
import { LIMITS } from '@/lib/domain/limits';
import type { RegionChange } from '@/lib/domain/views';
import type { PreviewState } from './use-preview-fit';

/** A region counts as tried once a person has rested on it this long with its value in sight. */
const REST_MS = 400;

interface Noted {
  change: RegionChange;
  valueNm: number | null;
  expandedNm: number | null;
  problem: string | null;
  atMs: number;
}

export type SentTrial = RegionChange & Omit<Noted, 'change' | 'atMs'> & { agoMs: number };

/** The regions a person has tried since they were last handed over; the newest ones where there are too many. */
class Trials {
  private noted: Noted[] = [];

  note(trial: Noted): void {
    const last = this.noted.at(-1);
    if (last && JSON.stringify(last.change) === JSON.stringify(trial.change)) return;
    this.noted = [...this.noted, trial].slice(-LIMITS.trialsAtOnce);
  }

  take(nowMs: number): SentTrial[] {
    const taken = this.noted.map(({ change, atMs, ...seen }) => ({
      ...change,
      ...seen,
      agoMs: Math.max(0, Math.round(nowMs - atMs)),
    }));
    this.noted = [];
    return taken;
  }

  /** Gives back what could not be kept. */
  putBack(trials: readonly SentTrial[], nowMs: number): void {
    const again = trials.map(({ valueNm, expandedNm, problem, agoMs, ...change }) => ({
      change,
      valueNm,
      expandedNm,
      problem,
      atMs: nowMs - agoMs,
    }));
    this.noted = [...again, ...this.noted].slice(-LIMITS.trialsAtOnce);
  }
}

export interface TrialKeeper {
  /** Hands over what was tried, to go with a change that is kept. */
  take: () => SentTrial[];
  putBack: (trials: readonly SentTrial[]) => void;
  /** Sends what was tried of a change that is dropped. */
  send: () => void;
}

/** Sent so that it still arrives when the page is left at once. What cannot be sent waits for the next time. */
function sendAway(frameId: number, readingId: number | null, noted: Trials): void {
  const trials = noted.take(Date.now());
  if (!trials.length) return;
  void fetch(`/api/frames/${frameId}/trials`, {
    method: 'POST',
    keepalive: true,
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ readingId, trials }),
  }).catch(() => noted.putBack(trials, Date.now()));
}

/** Notes each region a person rests on with the value shown for it, and sees that none is lost. */
export function useTrials(
  frameId: number,
  readingId: number | null,
  change: RegionChange | null,
  preview: PreviewState,
): TrialKeeper {
  const trials = useRef(new Trials());
  const { fit, problem, working } = preview;
  useEffect(() => {
    if (!change || working || (!fit && !problem)) return undefined;
    const timer = setTimeout(
      () =>
        trials.current.note({
          change,
          valueNm: fit?.wavelengthNm ?? null,
          expandedNm: fit?.expandedNm ?? null,
          problem: fit ? null : problem,
          atMs: Date.now(),
        }),
      REST_MS,
    );
    return () => clearTimeout(timer);
  }, [change, fit, problem, working]);
  useEffect(() => {
    const kept = trials.current;
    const leave = () => sendAway(frameId, readingId, kept);
    window.addEventListener('pagehide', leave);
    return () => {
      window.removeEventListener('pagehide', leave);
      leave();
    };
  }, [frameId, readingId]);
  return {
    take: () => trials.current.take(Date.now()),
    putBack: (back) => trials.current.putBack(back, Date.now()),
    send: () => sendAway(frameId, readingId, trials.current),
  };
}
