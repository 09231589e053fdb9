/** Figures of a sample and their 95 % intervals. */

export const rms = (values: readonly number[]): number =>
  Math.sqrt(values.reduce((s, v) => s + v * v, 0) / Math.max(1, values.length));

export function median(values: readonly number[]): number {
  if (values.length === 0) return Number.NaN;
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)];
}

/** 95 % interval of a share k/n (Wilson, J. Am. Stat. Assoc. 22, 209, 1927). */
export function wilson(k: number, n: number): [number, number] {
  if (n === 0) return [0, 1];
  const z = 1.959964;
  const p = k / n;
  const middle = (p + (z * z) / (2 * n)) / (1 + (z * z) / n);
  const half = (z / (1 + (z * z) / n)) * Math.sqrt((p * (1 - p)) / n + (z * z) / (4 * n * n));
  return [middle - half, middle + half];
}

/** 95 % interval of a root mean square, from the scatter of the squares. */
export function rmsInterval(values: readonly number[]): [number, number] {
  const n = values.length;
  if (n < 2) return [0, Infinity];
  const squares = values.map((v) => v * v);
  const mean = squares.reduce((a, b) => a + b, 0) / n;
  const sd = Math.sqrt(squares.reduce((s, v) => s + (v - mean) ** 2, 0) / (n - 1));
  const half = (1.96 * sd) / Math.sqrt(n);
  return [Math.sqrt(Math.max(0, mean - half)), Math.sqrt(mean + half)];
}

/**
 * Interval of the median that holds it in at least 93.75 % of cases, by order statistics: the k-th smallest and largest
 * with 2·P(at most k − 1 of n below the median) ≤ 6.25 %. With five values these are the least and the most.
 */
export function medianInterval(values: readonly number[]): [number, number] {
  const sorted = [...values].sort((a, b) => a - b);
  const n = sorted.length;
  let k = 0;
  let tail = 0.5 ** n;
  for (let term = tail; 2 * tail <= 0.0625 && k < n / 2;) {
    k += 1;
    term *= (n - k + 1) / k;
    tail += term;
  }
  const at = Math.max(0, k - 1);
  return [sorted[at], sorted[n - 1 - at]];
}
