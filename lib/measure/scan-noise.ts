import type { Noise } from '@/lib/fit/noise';
import { solveSymmetric } from '@/lib/fit/small-matrix';

const ROUNDS = 12;
/** Squared residuals count at most as three standard deviations, so that a single spike does not make all points noisy. */
const MOST_SIGMAS = 3;

/**
 * Variance against fitted light, v = constant + shot I + grain I^2 with no term negative, from few squared residuals `q`:
 * the quasi-likelihood of a normal, sum of q/v + ln v, by iterated least squares with weights 1/v^2 of the fitted variance.
 * Of the sets of terms the one is taken that the Bayesian information criterion prefers (Schwarz 1978), so that a scan of
 * 200 counts is weighted by the square root of its mean alone. `least`: the smallest variance possible, from rounding.
 * Source of the estimate: McCullagh and Nelder, Generalized Linear Models, ch. 10 (from memory).
 */
export function scanNoise(light: ArrayLike<number>, q: ArrayLike<number>, least: number): Noise {
  let best: { cost: number; noise: Noise } | null = null;
  for (let set = 1; set < 8; set++) {
    const powers = [0, 1, 2].filter((k) => set & (1 << k));
    const noise = fitTerms(powers, light, q, least);
    if (noise === null) continue;
    const cost = deviance(noise, light, q, least) + powers.length * Math.log(q.length);
    if (best === null || cost < best.cost) best = { cost, noise };
  }
  const noise = best?.noise ?? { constant: least, shot: 0, grain: 0 };
  return { ...noise, constant: Math.max(noise.constant, least) };
}

const varianceOf = ({ constant, shot, grain }: Noise, light: number, least: number): number => {
  const i = Math.max(0, light);
  return Math.max(least, constant + shot * i + grain * i * i);
};

function deviance(noise: Noise, light: ArrayLike<number>, q: ArrayLike<number>, least: number): number {
  let sum = 0;
  for (let i = 0; i < q.length; i++) {
    const v = varianceOf(noise, light[i], least);
    sum += Math.min(q[i] / v, MOST_SIGMAS ** 2) + Math.log(v);
  }
  return sum;
}

function fitTerms(
  powers: readonly number[],
  light: ArrayLike<number>,
  q: ArrayLike<number>,
  least: number,
): Noise | null {
  const n = powers.length;
  const mean = Array.from(q).reduce((s, v) => s + v, 0) / Math.max(1, q.length);
  let noise: Noise = { constant: Math.max(least, mean), shot: 0, grain: 0 };
  for (let round = 0; round < ROUNDS; round++) {
    const a = new Float64Array(n * n);
    const b = new Float64Array(n);
    for (let i = 0; i < q.length; i++) {
      const v = varianceOf(noise, light[i], least);
      const terms = powers.map((k) => Math.max(0, light[i]) ** k / v);
      const seen = Math.min(q[i] / v, MOST_SIGMAS ** 2);
      for (let j = 0; j < n; j++) {
        b[j] += terms[j] * seen;
        for (let k = 0; k < n; k++) a[j * n + k] += terms[j] * terms[k];
      }
    }
    const x = solveSymmetric(a, b, n);
    if (x === null || x.some((value) => !(value >= 0))) return null;
    const of = (power: number) => (powers.includes(power) ? x[powers.indexOf(power)] : 0);
    noise = { constant: of(0), shot: of(1), grain: of(2) };
  }
  return noise;
}
