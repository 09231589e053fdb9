/**
 * Student's t distribution: the coverage factor of a GUM interval. `dof` null stands for infinitely many
 * degrees of freedom (the normal distribution); fractional degrees of freedom are allowed.
 */

/** The GUM's 95.45 % coverage, which is exactly k = 2 for a normal distribution. */
export const COVERAGE = 0.954499736103642;

const LANCZOS = [
  0.99999999999980993, 676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059,
  12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7,
];

/** ln Γ(x) for x > 0 by the Lanczos sum (g = 7, 9 terms; Numerical approximation of 1e-14). */
function logGamma(x: number): number {
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x);
  const z = x - 1;
  let sum = LANCZOS[0];
  for (let i = 1; i < 9; i += 1) sum += LANCZOS[i] / (z + i);
  const t = z + 7.5;
  return 0.5 * Math.log(2 * Math.PI) + (z + 0.5) * Math.log(t) - t + Math.log(sum);
}

/** Regularised incomplete beta I_x(a, b) by its continued fraction (modified Lentz). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log(1 - x));
  if (x >= (a + 1) / (a + b + 2)) return 1 - (front * betaFraction(1 - x, b, a)) / b;
  return (front * betaFraction(x, a, b)) / a;
}

function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  const nudge = (v: number) => (Math.abs(v) < tiny ? tiny : v);
  let c = 1;
  let d = 1 / nudge(1 - ((a + b) * x) / (a + 1));
  let h = d;
  for (let m = 1; m <= 500; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / nudge(1 + even * d);
    c = nudge(1 + even / c);
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / nudge(1 + odd * d);
    c = nudge(1 + odd / c);
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) < 1e-15) break;
  }
  return h;
}

/** Φ(z): the normal distribution, through the incomplete gamma function to about 1e-15. */
export function normalCdf(z: number): number {
  if (z === 0) return 0.5;
  const half = incompleteGammaHalf((z * z) / 2) / 2;
  return z > 0 ? 0.5 + half : 0.5 - half;
}

/** P(1/2, x), the regularised lower incomplete gamma function at a = 1/2 (= erf √x). */
function incompleteGammaHalf(x: number): number {
  const a = 0.5;
  const front = Math.exp(-x + a * Math.log(x) - logGamma(a));
  if (x < a + 1) {
    let term = 1 / a;
    let sum = term;
    for (let n = 1; n < 1000; n += 1) {
      term *= x / (a + n);
      sum += term;
      if (term < sum * 1e-17) break;
    }
    return sum * front;
  }
  let b = x + 1 - a;
  let c = 1e300;
  let d = 1 / b;
  let h = d;
  for (let i = 1; i < 1000; i += 1) {
    const an = -i * (i - a);
    b += 2;
    d = 1 / (an * d + b);
    c = b + an / c;
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) < 1e-16) break;
  }
  return 1 - front * h;
}

/** P(T ≤ t) for Student's t with `dof` degrees of freedom (null: normal). */
export function studentCdf(t: number, dof: number | null): number {
  if (dof === null || dof > 1e7) return normalCdf(t);
  if (!(dof > 0)) throw new RangeError('Degrees of freedom must be larger than 0.');
  if (t === 0) return 0.5;
  const tail = incompleteBeta(dof / (dof + t * t), dof / 2, 0.5) / 2;
  return t > 0 ? 1 - tail : tail;
}

/** The t with P(T ≤ t) = p, 0 < p < 1, by bisection on the cumulative function (absolute 1e-12). */
export function studentQuantile(p: number, dof: number | null): number {
  if (!(p > 0 && p < 1)) throw new RangeError('A probability lies between 0 and 1.');
  if (p < 0.5) return -studentQuantile(1 - p, dof);
  let low = 0;
  let high = 2;
  while (studentCdf(high, dof) < p) high *= 2;
  while (high - low > 1e-12 * Math.max(1, high)) {
    const middle = (low + high) / 2;
    if (middle === low || middle === high) break;
    if (studentCdf(middle, dof) < p) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** Coverage factor k for 95.45 % (GUM table G.2): 2 for infinitely many degrees of freedom. */
export function coverageFactor(dof: number | null): number {
  return studentQuantile((1 + COVERAGE) / 2, dof);
}
