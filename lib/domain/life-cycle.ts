/**
 * The life of a frame and of a reading, as data. A state word is compared nowhere else: commands ask
 * `frameStep` / `readingStep` which state a step leads from and to.
 */
export const FRAME_STATES = ['copying', 'waiting', 'fitting', 'fitted', 'refused', 'unreadable'] as const;
export type FrameState = (typeof FRAME_STATES)[number];

export const READING_STATES = ['draft', 'review', 'returned', 'accepted', 'withdrawn', 'replaced'] as const;
export type ReadingState = (typeof READING_STATES)[number];

export const FRAME_WORDS: Record<FrameState, string> = {
  copying: 'Copying',
  waiting: 'Waiting',
  fitting: 'Fitting',
  fitted: 'Fitted',
  refused: 'Refused',
  unreadable: 'Unreadable',
};

export const READING_WORDS: Record<ReadingState, string> = {
  draft: 'Draft',
  review: 'To review',
  returned: 'Returned',
  accepted: 'Accepted',
  withdrawn: 'Withdrawn',
  replaced: 'Replaced',
};

export const FRAME_STEPS = {
  land: { from: ['copying'], to: 'waiting' },
  breakOff: { from: ['copying'], to: 'unreadable' },
  take: { from: ['waiting'], to: 'fitting' },
  putBack: { from: ['fitting'], to: 'waiting' },
  fit: { from: ['fitting', 'refused'], to: 'fitted' },
  refuse: { from: ['fitting'], to: 'refused' },
  /** A scan without a reading is to be fitted with another detector. */
  fitAnew: { from: ['waiting', 'refused'], to: 'waiting' },
  giveUp: { from: ['fitting'], to: 'unreadable' },
} as const satisfies Record<string, { from: readonly FrameState[]; to: FrameState }>;

export const READING_STEPS = {
  send: { from: ['draft'], to: 'review' },
  accept: { from: ['review'], to: 'accepted' },
  return: { from: ['review'], to: 'returned' },
  /** By a second person, for a reason; what was signed stays as it was. */
  withdraw: { from: ['accepted'], to: 'withdrawn' },
  /** A re-fit makes a new reading; the one it was made from steps back. */
  replace: { from: ['draft', 'review', 'returned'], to: 'replaced' },
} as const satisfies Record<string, { from: readonly ReadingState[]; to: ReadingState }>;

/** Where each begins its life. */
export const BORN = { frame: 'copying', reading: 'draft' } as const satisfies {
  frame: FrameState;
  reading: ReadingState;
};

export type FrameStep = keyof typeof FRAME_STEPS;
export type ReadingStep = keyof typeof READING_STEPS;

/** May the step be taken from this state? */
export function readingMay(step: ReadingStep, state: ReadingState): boolean {
  return (READING_STEPS[step].from as readonly ReadingState[]).includes(state);
}

/** May the step be taken from this state? */
export function frameMay(step: FrameStep, state: FrameState): boolean {
  return (FRAME_STEPS[step].from as readonly FrameState[]).includes(state);
}

/** May a new reading follow this one without a step of its own? What was withdrawn stays withdrawn. */
export function readingMayBeFollowed(state: ReadingState): boolean {
  return state === READING_STEPS.withdraw.to;
}

/** True while the frame's state can still change by itself; a page shows these live. */
export function frameIsMoving(state: FrameState): boolean {
  return state === 'copying' || state === 'waiting' || state === 'fitting';
}
