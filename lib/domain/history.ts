import type { Instant } from './views';

/** What a step of a history is marked with. */
export const MARKED_STEPS = [
  'received',
  'fitted',
  'refused',
  'tried',
  'said',
  'sent',
  'returned',
  'accepted',
  'asked',
  'withdrawn',
  'outcome',
] as const;
export type MarkedStep = (typeof MARKED_STEPS)[number];

/** One step in the life of a frame and its readings. */
export interface HistoryStep {
  at: Instant;
  step: MarkedStep;
  who: string;
  /** Number of the reading it happened to; null for the frame itself. */
  reading: number | null;
  /** What happened, in words. */
  title: string;
  /** Reasons, numbers, words: each a line. */
  lines: string[];
}

export interface HistoryView {
  frameId: number;
  name: string;
  fileName: string;
  sha256: string;
  /** The reading that stands now. */
  readingId: number | null;
  steps: HistoryStep[];
}
