import type { BudgetRow } from '@/lib/domain/reading-result';
import { coverageFactor } from './student';

/** A budget row before it is weighed against the others. */
export type BudgetInput = Omit<BudgetRow, 'contributionNm' | 'share'>;

export interface CombinedBudget {
  rows: BudgetRow[];
  /** Combined standard uncertainty, nm. */
  uNm: number;
  /** Effective degrees of freedom (Welch–Satterthwaite), not rounded; null is infinite. */
  dof: number | null;
  k: number;
  /** U = k·u for 95.45 %, nm. */
  expandedNm: number;
}

/**
 * Combines independent contributions: u² = Σ(cᵢuᵢ)², ν_eff = u⁴ / Σ((cᵢuᵢ)⁴/νᵢ), U = t₉₅.₄₅(ν_eff)·u.
 * Rows that share an input must be merged into one before (their smallest ν among them).
 * Source: JCGM 100:2008, 5.1.2, G.4.1 and table G.2. Throws RangeError for a negative or non-finite u.
 */
export function combineBudget(inputs: readonly BudgetInput[]): CombinedBudget {
  let variance = 0;
  let quartic = 0;
  const contributions = inputs.map((row) => {
    const c = Math.abs(row.sensitivity * row.u);
    if (!Number.isFinite(c) || row.u < 0)
      throw new RangeError(`The uncertainty of ${row.name} is not a number.`);
    variance += c * c;
    if (row.dof !== null) quartic += (c * c * c * c) / row.dof;
    return c;
  });
  const dof = quartic > 0 ? (variance * variance) / quartic : null;
  const uNm = Math.sqrt(variance);
  const k = coverageFactor(dof);
  const rows = inputs.map((row, i) => ({
    ...row,
    contributionNm: contributions[i],
    share: variance > 0 ? (contributions[i] * contributions[i]) / variance : 0,
  }));
  return { rows, uNm, dof, k, expandedNm: k * uNm };
}
