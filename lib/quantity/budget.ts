import type { BudgetRow } from '@/lib/domain/reading-result';
import { combinedVariance, effectiveDof } from './propagate';
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
 * Combines a budget: rows that share an input become one first, then u² = Σ(cᵢuᵢ)², ν_eff = u⁴ / Σ((cᵢuᵢ)⁴/νᵢ),
 * U = t₉₅.₄₅(ν_eff)·u. All in nm (or whatever unit the sensitivities lead to).
 * Source: JCGM 100:2008, 5.1.2, G.4.1 and table G.2. Throws RangeError for a negative or non-finite u.
 */
export function combineBudget(inputs: readonly BudgetInput[]): CombinedBudget {
  for (const row of inputs) {
    if (!Number.isFinite(row.sensitivity * row.u) || row.u < 0)
      throw new RangeError(`The uncertainty of ${row.name} is not a number.`);
  }
  const merged = mergeShared(inputs);
  const contributions = merged.map((row) => Math.abs(row.sensitivity * row.u));
  const variance = combinedVariance(contributions);
  const dof = effectiveDof(merged.map((row, i) => ({ contribution: contributions[i], dof: row.dof })));
  const uNm = Math.sqrt(variance);
  const k = coverageFactor(dof);
  const rows = merged.map((row, i) => ({
    ...row,
    contributionNm: contributions[i],
    share: variance > 0 ? (contributions[i] * contributions[i]) / variance : 0,
  }));
  return { rows, uNm, dof, k, expandedNm: k * uNm };
}

/**
 * Rows that go back to one input are wholly correlated: their contributions add with their signs and stand as one row,
 * which has the smallest degrees of freedom among them (Welch–Satterthwaite asks for independent terms).
 */
function mergeShared(inputs: readonly BudgetInput[]): BudgetInput[] {
  const groups = new Map<string, BudgetInput[]>();
  inputs.forEach((row, i) => {
    const key = row.input === undefined ? `alone ${i}` : `shared ${row.input}`;
    groups.set(key, [...(groups.get(key) ?? []), row]);
  });
  return [...groups.values()].map((rows) => (rows.length === 1 ? rows[0] : mergedRow(rows)));
}

function mergedRow(rows: readonly BudgetInput[]): BudgetInput {
  const contributions = rows.map((row) => row.sensitivity * row.u);
  const dofs = rows.flatMap((row) => row.dof ?? []);
  const { shape } = rows[0];
  return {
    key: rows.map((row) => row.key).join('+'),
    name: rows.map((row, i) => (i === 0 ? row.name : row.name.toLowerCase())).join(', '),
    symbol: '',
    value: null,
    unit: 'nm',
    u: Math.sqrt(combinedVariance(contributions, () => 1)),
    known: rows[0].known,
    dof: dofs.length ? Math.min(...dofs) : null,
    sensitivity: 1,
    ...(shape ? { shape } : {}),
    input: rows[0].input,
  };
}

/** The same budget with another standard uncertainty for one row, in that row's own unit: what would it be worth? */
export function withRowUncertainty(rows: readonly BudgetRow[], key: string, u: number): CombinedBudget {
  return combineBudget(rows.map((row) => (row.key === key ? { ...row, u } : row)));
}
