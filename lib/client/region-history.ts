/** Undo and redo of what a person changes: plain states, time as an argument. */

const MOST_STEPS = 100;
/** Changes of one kind this close together are one step: a drag, a key held down. */
const JOIN_MS = 600;

export interface History<T> {
  past: readonly T[];
  now: T;
  future: readonly T[];
  /** What was changed last, and when. */
  kind: string | null;
  atMs: number;
}

export function beginHistory<T>(now: T): History<T> {
  return { past: [], now, future: [], kind: null, atMs: 0 };
}

/** A change: one step more, or the last one carried on. What was undone before it is gone. */
export function changed<T>(history: History<T>, next: T, kind: string, atMs: number): History<T> {
  const joins = history.kind === kind && atMs - history.atMs < JOIN_MS && history.past.length > 0;
  const past = joins ? history.past : [...history.past, history.now].slice(-MOST_STEPS);
  return { past, now: next, future: [], kind, atMs };
}

export function undone<T>(history: History<T>): History<T> {
  const before = history.past.at(-1);
  if (before === undefined) return history;
  return {
    past: history.past.slice(0, -1),
    now: before,
    future: [history.now, ...history.future],
    kind: null,
    atMs: 0,
  };
}

export function redone<T>(history: History<T>): History<T> {
  const [next, ...rest] = history.future;
  if (next === undefined) return history;
  return { past: [...history.past, history.now], now: next, future: rest, kind: null, atMs: 0 };
}
