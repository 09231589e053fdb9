/** Several frames of one unit: how they agree. */
import { z } from 'zod';
import { studentQuantile } from '@/lib/quantity/student';
import type { ReadingState } from './life-cycle';
import { LIMITS } from './limits';
import type { Medium } from './specification';
import type { Instant, PersonRef } from './views';

export interface Agreement {
  /** Mean of the values, nm. */
  meanNm: number;
  /** Sample standard deviation, nm; null with fewer than two. */
  scatterNm: number | null;
  /** Index of the one value that does not belong to the others; null where none stands out. */
  outlier: number | null;
}

/** Chance of naming a value an outlier though it is none. */
const OUTLIER_RISK = 0.05;

/**
 * Mean, sample standard deviation and one outlier of n values in nm. The outlier is that of Grubbs' two-sided test at
 * 5 %: the largest |x - mean| / s against (n - 1) / sqrt(n) * sqrt(t² / (n - 2 + t²)), t the upper 0.05 / (2 n) point of
 * Student's t with n - 2 degrees of freedom (F. E. Grubbs, Technometrics 11 (1969) 1). It assumes normal scatter and
 * at most one outlier; with fewer than three values, or equal ones, it names none. Null for no values.
 */
export function agreementOf(valuesNm: readonly number[]): Agreement | null {
  const n = valuesNm.length;
  if (n === 0) return null;
  const meanNm = valuesNm.reduce((sum, v) => sum + v, 0) / n;
  if (n < 2) return { meanNm, scatterNm: null, outlier: null };
  const away = valuesNm.map((v) => Math.abs(v - meanNm));
  const scatterNm = Math.sqrt(away.reduce((sum, d) => sum + d * d, 0) / (n - 1));
  const far = away.indexOf(Math.max(...away));
  const isOutlier = n > 2 && scatterNm > 0 && away[far] / scatterNm > grubbsLimit(n);
  return { meanNm, scatterNm, outlier: isOutlier ? far : null };
}

function grubbsLimit(n: number): number {
  const t = studentQuantile(1 - OUTLIER_RISK / (2 * n), n - 2);
  return ((n - 1) / Math.sqrt(n)) * Math.sqrt((t * t) / (n - 2 + t * t));
}

/** One frame of the unit with the reading that stands for it. */
export interface RepeatRow {
  frameId: number;
  readingId: number;
  number: number;
  status: ReadingState;
  takenAt: Instant;
  valueNm: number | null;
  expandedNm: number | null;
  /** Counts in mean and scatter. */
  counts: boolean;
  isOutlier: boolean;
}

export interface RepeatsView {
  unitId: number;
  medium: Medium;
  rows: RepeatRow[];
  meanNm: number | null;
  scatterNm: number | null;
  chosen: { readingId: number; reason: string; by: PersonRef; at: Instant } | null;
}

export const chooseReadingSchema = z.object({
  readingId: z.number().int().positive(),
  reason: z
    .string()
    .trim()
    .min(1, 'Say why this one is reported.')
    .max(LIMITS.wordsLength, `The reason is longer than ${LIMITS.wordsLength} characters.`),
});
