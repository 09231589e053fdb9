/**
 * The law of propagation of uncertainty with correlated inputs.
 * Source: JCGM 100:2008, 5.2.2, equation (16).
 */

/** Correlation of the inputs with index i and j, -1 to 1; asked for i ≠ j only. */
export type Correlation = (i: number, j: number) => number;

const INDEPENDENT: Correlation = () => 0;

/**
 * Combined variance u² = ΣᵢΣⱼ cᵢuᵢ·cⱼuⱼ·r(i, j), with r(i, i) = 1.
 * @param contributions cᵢuᵢ with their sign, in the unit of the result
 * Rounding may leave a sum of wholly correlated terms a little below zero; that is answered as 0.
 */
export function combinedVariance(
  contributions: readonly number[],
  correlation: Correlation = INDEPENDENT,
): number {
  let variance = 0;
  for (let i = 0; i < contributions.length; i += 1) {
    variance += contributions[i] * contributions[i];
    for (let j = 0; j < i; j += 1) {
      variance += 2 * contributions[i] * contributions[j] * correlation(i, j);
    }
  }
  return Math.max(0, variance);
}

/**
 * Effective degrees of freedom by Welch–Satterthwaite, ν = u⁴ / Σ(uᵢ⁴/νᵢ), not rounded; null is infinite.
 * The contributions must be independent of each other. Source: JCGM 100:2008, G.4.1, equation (G.2b).
 */
export function effectiveDof(
  contributions: readonly { contribution: number; dof: number | null }[],
): number | null {
  const variance = combinedVariance(contributions.map(({ contribution }) => contribution));
  const quartic = contributions.reduce(
    (sum, { contribution: c, dof }) => (dof === null ? sum : sum + (c * c * c * c) / dof),
    0,
  );
  return quartic > 0 ? (variance * variance) / quartic : null;
}
