/**
 * Evaluation of repeated observations.
 * Source: JCGM 100:2008, 4.2 (mean, experimental standard deviation) and H.3.6, equation (H.23a) for pooling.
 */
export interface TypeA {
  mean: number;
  /** Experimental standard deviation of one observation. */
  s: number;
  /** Standard deviation of the mean, s/√n. */
  u: number;
  dof: number;
}

/** Throws RangeError for fewer than two observations: they have no scatter. */
export function typeA(values: readonly number[]): TypeA {
  const n = values.length;
  if (n < 2) throw new RangeError('At least two observations are needed.');
  const mean = values.reduce((sum, v) => sum + v, 0) / n;
  const s = Math.sqrt(values.reduce((sum, v) => sum + (v - mean) ** 2, 0) / (n - 1));
  return { mean, s, u: s / Math.sqrt(n), dof: n - 1 };
}

/**
 * Standard deviation of one observation within groups, s² = Σ νᵢsᵢ² / Σ νᵢ; groups of one say nothing and are left out.
 * Null where no group has two observations.
 */
export function pooledScatter(groups: readonly (readonly number[])[]): { s: number; dof: number } | null {
  const parts = groups.filter((group) => group.length > 1).map(typeA);
  const dof = parts.reduce((sum, part) => sum + part.dof, 0);
  if (dof === 0) return null;
  return { s: Math.sqrt(parts.reduce((sum, part) => sum + part.dof * part.s ** 2, 0) / dof), dof };
}
