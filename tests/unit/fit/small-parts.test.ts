/** The fit's small parts against sums done another way. All numbers in here are invented. */
import { inverseSymmetric, solveSymmetric } from '@/lib/fit/small-matrix';
import { medianWithin } from '@/lib/fit/median';
import { foreseenSumOfSquares, leastSquares } from '@/lib/fit/least-squares';
import { random } from '@/scripts/simulator/random';

/** Rounding of a 6 x 6 system with a condition number of some hundreds. */
const ROUNDING = 1e-9;

function gram(n: number, seed: number): Float64Array {
  const r = random(seed);
  const rows = Array.from({ length: 3 * n }, () => Array.from({ length: n }, () => r.normal()));
  const a = new Float64Array(n * n);
  for (const row of rows)
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) a[i * n + j] += row[i] * row[j];
  return a;
}

describe('inverse of a symmetric matrix', () => {
  it.each([1, 2, 6, 7])(
    'of size %i times the matrix is the unit matrix, and solves as elimination does',
    (n) => {
      const a = gram(n, 40 + n);
      const inverse = inverseSymmetric(a, n);
      if (inverse === null) throw new Error('The matrix is not singular.');
      for (let i = 0; i < n; i++) {
        const unit = new Float64Array(n);
        unit[i] = 1;
        const column = solveSymmetric(a, unit, n);
        for (let j = 0; j < n; j++) {
          let product = 0;
          for (let k = 0; k < n; k++) product += a[i * n + k] * inverse[k * n + j];
          expect(Math.abs(product - (i === j ? 1 : 0))).toBeLessThan(ROUNDING);
          expect(Math.abs((column?.[j] ?? NaN) - inverse[j * n + i])).toBeLessThan(ROUNDING);
        }
      }
    },
  );

  it('does not exist where one column is another', () => {
    expect(inverseSymmetric(Float64Array.from([2, 2, 2, 2]), 2)).toBeNull();
  });
});

describe('median by selection', () => {
  it.each([1, 2, 3, 8, 9, 64, 101])('of %i values is that of the sorted ones, ties included', (n) => {
    const r = random(n);
    for (let round = 0; round < 20; round++) {
      const values = Float64Array.from({ length: n + 4 }, () => Math.round(6 * r.normal()) / 2);
      const sorted = values.slice(2, 2 + n).sort();
      const expected = n % 2 === 1 ? sorted[(n - 1) / 2] : (sorted[n / 2 - 1] + sorted[n / 2]) / 2;
      // Adding nothing makes one zero of two.
      expect(medianWithin(values, 2, 2 + n) + 0).toBe(expected + 0);
    }
  });
});

describe('what one linear step promises', () => {
  it('is the least sum of squares itself for a straight line', () => {
    const r = random(7);
    const t = Array.from({ length: 30 }, (_, i) => i / 10);
    const y = t.map((x) => 2 - 0.7 * x + 0.1 * r.normal());
    const problem = {
      residuals: t.length,
      evaluate(p: Float64Array, out: Float64Array, jacobian: Float64Array | null) {
        t.forEach((x, i) => {
          out[i] = y[i] - p[0] - p[1] * x;
          if (jacobian) {
            jacobian[i] = 1;
            jacobian[t.length + i] = x;
          }
        });
        return true;
      },
    };
    const solved = leastSquares(problem, [0, 0]);
    expect(foreseenSumOfSquares(problem, Float64Array.from([5, 5]))).toBeCloseTo(solved.chiSquare, 9);
    expect(solved.startChiSquare).toBeGreaterThan(solved.chiSquare);
  });
});
