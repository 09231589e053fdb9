/** What reference checks say about a bench: words, views, and what a person may enter. */
import { z } from 'zod';
import type { Explanation } from '@/lib/quantity/reference-check';
import { LIMITS } from './limits';
import { METHODS, type Method } from './specification';
import type { Instant, PersonRef } from './views';

/** Nothing checked yet, agrees, outside once (repeat), stopped for accepting. */
export type BenchStanding = 'unchecked' | 'agrees' | 'repeat' | 'stopped';

/** So many checks in a row outside, with one setup and since the last release, stop a bench. */
const OUTSIDE_TO_STOP = 2;

/** One check as far as the standing goes, newest last. */
export interface CheckWord {
  setupId: number;
  inside: boolean;
}

/**
 * How a bench stands after its checks since the last release. A new setup starts the count anew: what was outside may have
 * been put right by it.
 */
export function standingAfter(checks: readonly CheckWord[]): Exclude<BenchStanding, 'stopped'> | 'stop' {
  const newest = checks.at(-1);
  if (!newest) return 'unchecked';
  if (newest.inside) return 'agrees';
  let outside = 0;
  for (let i = checks.length - 1; i >= 0; i -= 1) {
    if (checks[i].inside || checks[i].setupId !== newest.setupId) break;
    outside += 1;
  }
  return outside >= OUTSIDE_TO_STOP ? 'stop' : 'repeat';
}

export interface CheckView {
  id: number;
  frameId: number;
  readingId: number;
  source: string;
  setupNumber: number;
  /** In air, nm. */
  publishedNm: number;
  measuredNm: number;
  deviationNm: number;
  expandedNm: number;
  limitNm: number;
  ownLimit: boolean;
  inside: boolean;
  at: Instant;
  /** For a check outside: which constant would explain it, likeliest first. */
  explanations: Explanation[];
}

export interface StopView {
  id: number;
  at: Instant;
}

export interface ReleaseView {
  reason: string;
  by: PersonRef;
  at: Instant;
}

export interface BenchRule {
  limitNm: number | null;
  method: Method;
}

/** The rule of a bench nobody has given one. */
export const FIRST_RULE: BenchRule = { limitNm: null, method: 'absolute' };

export interface ReferencesView {
  standing: BenchStanding;
  /** The open stop, or null. */
  stop: StopView | null;
  lastRelease: ReleaseView | null;
  rule: BenchRule & { why: string; by: PersonRef | null; at: Instant | null };
  /** Newest first, at most a page. */
  checks: CheckView[];
  many: number;
  /** Scatter of one check within a setup, nm; null with fewer than two. */
  remount: { uNm: number; dof: number } | null;
}

const id = z.number().int().positive();
const words = (what: string) =>
  z
    .string()
    .trim()
    .min(1, `${what} is missing.`)
    .max(LIMITS.wordsLength, `${what} is longer than ${LIMITS.wordsLength} characters.`);

export const releaseBenchSchema = z.object({ stopId: id, reason: words('The reason') });
export const benchRuleSchema = z.object({
  benchId: id,
  limitNm: z
    .number({ error: 'The limit must be a number.' })
    .refine((v) => v > 0 && v <= 50, 'The limit lies between 0 and 50 nm.')
    .nullable()
    .default(null),
  method: z.enum(METHODS),
  why: words('Why'),
});
