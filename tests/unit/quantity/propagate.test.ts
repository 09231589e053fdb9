import { combinedVariance, effectiveDof } from '@/lib/quantity/propagate';
import { typeA } from '@/lib/quantity/type-a';

// JCGM 100:2008, H.2: five sets of voltage, current and phase; resistance, reactance and impedance from their means.
const V = [5.007, 4.994, 5.005, 4.99, 4.999];
const I = [19.663e-3, 19.639e-3, 19.64e-3, 19.685e-3, 19.678e-3];
const PHI = [1.0456, 1.0438, 1.0468, 1.0428, 1.0433];
/** Half a unit of the last printed digit, or one where the table prints the second approach's figure. */
const OHM = 0.001;

function correlation(a: readonly number[], b: readonly number[]): number {
  const [ma, mb] = [typeA(a), typeA(b)];
  const sum = a.reduce((s, v, i) => s + (v - ma.mean) * (b[i] - mb.mean), 0);
  return sum / ((a.length - 1) * ma.s * mb.s);
}

const inputs = [V, I, PHI];
const r = (i: number, j: number) => correlation(inputs[i], inputs[j]);
const [v, i, phi] = inputs.map((x) => typeA(x));
const z = v.mean / i.mean;
/** Sensitivities by hand, times u of the mean. */
const resistance = [
  Math.cos(phi.mean) / i.mean,
  (-z * Math.cos(phi.mean)) / i.mean,
  -z * Math.sin(phi.mean),
].map((c, n) => c * [v, i, phi][n].u);
const reactance = [
  Math.sin(phi.mean) / i.mean,
  (-z * Math.sin(phi.mean)) / i.mean,
  z * Math.cos(phi.mean),
].map((c, n) => c * [v, i, phi][n].u);
const impedance = [1 / i.mean, -z / i.mean, 0].map((c, n) => c * [v, i, phi][n].u);

describe('GUM H.2', () => {
  test('the correlations of the three inputs', () => {
    expect(r(0, 1)).toBeCloseTo(-0.36, 2);
    expect(r(0, 2)).toBeCloseTo(0.86, 2);
    expect(r(1, 2)).toBeCloseTo(-0.65, 2);
  });
  test.each([
    ['resistance', resistance, z * Math.cos(phi.mean), 127.732, 0.071],
    ['reactance', reactance, z * Math.sin(phi.mean), 219.847, 0.295],
    ['impedance', impedance, z, 254.26, 0.236],
  ])('%s', (_name, contributions, value, printed, u) => {
    expect(Math.abs(value - printed)).toBeLessThanOrEqual(OHM);
    expect(Math.abs(Math.sqrt(combinedVariance(contributions, r)) - u)).toBeLessThanOrEqual(OHM);
  });
  test('correlations ignored miss it', () => {
    for (const [contributions, u] of [
      [resistance, 0.071],
      [reactance, 0.295],
      [impedance, 0.236],
    ] as const)
      expect(Math.abs(Math.sqrt(combinedVariance(contributions)) - u)).toBeGreaterThan(20 * OHM);
  });
});

test('wholly correlated contributions add, opposite ones cancel', () => {
  expect(Math.sqrt(combinedVariance([3, 4], () => 1))).toBeCloseTo(7, 12);
  expect(combinedVariance([0.1, -0.1], () => 1)).toBeCloseTo(0, 18);
});

// JCGM 100:2008, G.4.2 in use with G.4.1: all infinite stays infinite.
test('degrees of freedom', () => {
  expect(effectiveDof([{ contribution: 1, dof: null }])).toBeNull();
  expect(effectiveDof([{ contribution: 2, dof: 7.5 }])).toBeCloseTo(7.5, 12);
});
