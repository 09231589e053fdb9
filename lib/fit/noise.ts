import { medianWithin } from './median';
import { solveSymmetric } from './small-matrix';

/** Variance of one pixel's light at mean light I: constant + shot I + grain I^2, none of them negative. */
export interface Noise {
  constant: number;
  shot: number;
  grain: number;
}

export function varianceAt(noise: Noise, light: number): number {
  const i = Math.max(0, light);
  return noise.constant + noise.shot * i + noise.grain * i * i;
}

const LEVELS = 14;
/** Variance of a normal distribution cut at three standard deviations, relative to the whole. */
const CUT_AT_3 = 0.9733;
/** Median of chi-square with one degree of freedom. */
const MEDIAN_CHI1 = 0.4549364;

/**
 * Fits the noise to squared residuals scaled to one pixel (`q`) at mean light `light`. Robust: within each level of light
 * residuals beyond three standard deviations (from the median) are not counted.
 * `least` is the smallest variance possible, from rounding to codes.
 */
export function fitNoise(light: Float64Array, q: Float64Array, least: number): Noise {
  const n = light.length;
  if (n < 10) return { constant: least, shot: 0, grain: 0 };
  const bounds = light.slice().sort();
  const levels = Math.max(1, Math.min(LEVELS, Math.floor(n / 30)));
  const edges = Array.from({ length: levels - 1 }, (_, k) => bounds[Math.floor(((k + 1) * n) / levels)]);
  const level = new Uint8Array(n);
  const counts = new Int32Array(levels);
  const sums = new Float64Array(levels);
  for (let i = 0; i < n; i++) {
    let k = 0;
    while (k < edges.length && light[i] >= edges[k]) k++;
    level[i] = k;
    counts[k]++;
    sums[k] += light[i];
  }
  const means: number[] = [];
  const variances: number[] = [];
  const part = new Float64Array(n);
  for (let k = 0; k < levels; k++) {
    if (counts[k] < 10) continue;
    let size = 0;
    for (let i = 0; i < n; i++) if (level[i] === k) part[size++] = q[i];
    const limit = (9 * medianWithin(part, 0, size)) / MEDIAN_CHI1;
    let s = 0;
    let count = 0;
    for (let i = 0; i < size; i++) {
      if (part[i] > limit) continue;
      s += part[i];
      count++;
    }
    means.push(sums[k] / size);
    variances.push(Math.max(least, count > 0 ? s / count / CUT_AT_3 : least));
  }
  if (means.length === 0) return { constant: least, shot: 0, grain: 0 };
  const noise = bestNonNegative(means, variances);
  return { ...noise, constant: Math.max(noise.constant, least) };
}

/** Non-negative least squares over the seven sets of terms, relative errors weighted alike. */
function bestNonNegative(light: number[], variance: number[]): Noise {
  let best: { rest: number; c: number[] } | null = null;
  for (let set = 1; set < 8; set++) {
    const terms = [0, 1, 2].filter((k) => set & (1 << k));
    const n = terms.length;
    const a = new Float64Array(n * n);
    const b = new Float64Array(n);
    for (let i = 0; i < light.length; i++) {
      const w = 1 / (variance[i] * variance[i]);
      const t = terms.map((k) => Math.max(0, light[i]) ** k);
      for (let j = 0; j < n; j++) {
        b[j] += w * t[j] * variance[i];
        for (let k = 0; k < n; k++) a[j * n + k] += w * t[j] * t[k];
      }
    }
    const x = solveSymmetric(a, b, n);
    if (x === null || x.some((v) => v < 0)) continue;
    const c = [0, 0, 0];
    terms.forEach((k, j) => (c[k] = x[j]));
    let rest = 0;
    for (let i = 0; i < light.length; i++) {
      const l = Math.max(0, light[i]);
      rest += ((c[0] + c[1] * l + c[2] * l * l - variance[i]) / variance[i]) ** 2;
    }
    if (best === null || rest < best.rest) best = { rest, c };
  }
  if (best === null)
    return { constant: variance.reduce((s, v) => s + v, 0) / variance.length, shot: 0, grain: 0 };
  return { constant: best.c[0], shot: best.c[1], grain: best.c[2] };
}
