import { globalRisks, normalPrior, type Prior } from '@/lib/quantity/risk';
import { normalCdf, studentQuantile } from '@/lib/quantity/student';

const one = (upper: number) => ({ lower: null, upper });

// JCGM 106:2012, 9.5.4 (ball bearings): prior gamma of shape 4 and rate 4 per µm, limit 2 µm, u 0.25 µm.
const BEARINGS: Prior = {
  density: (y) => (4 ** 4 / 6) * y ** 3 * Math.exp(-4 * y),
  from: 0,
  to: 12,
};
describe('ball bearings, JCGM 106 9.5.4', () => {
  test('4.2 % do not conform; consumer’s risk 0.80 %', () => {
    const risks = globalRisks(BEARINGS, 0.25, one(2), one(2));
    expect(100 * risks.nonconforming).toBeCloseTo(4.2, 1);
    expect(100 * risks.consumer).toBeCloseTo(0.8, 2);
    // Recomputed with an independent library.
    expect(100 * risks.producer).toBeCloseTo(1.744, 3);
  });
  test('a guard band of 0.328 µm brings it to 0.1 %', () => {
    const risks = globalRisks(BEARINGS, 0.25, one(2), one(1.67183));
    expect(100 * risks.consumer).toBeCloseTo(0.1, 3);
    expect(100 * risks.producer).toBeCloseTo(7.55, 2);
  });
});

// False-accept table of NCSLI RP-19 (read in a public library's tests): a normal process with the given share inside
// ± T, a measurement whose standard uncertainty is a quarter of the PROCESS's standard deviation (not of T).
test.each([
  [0.6, 4.83860326, 8.26008199],
  [0.7, 3.92234109, 5.72322042],
  [0.8, 2.85583037, 3.63227145],
  [0.9, 1.59995312, 1.7988043],
  [0.95, 0.87100925, 0.92389664],
  [0.99, 0.19991684, 0.20243866],
])('false accepts with %d in tolerance', (inside, falseAccept, conditional) => {
  const sd = 1 / studentQuantile((1 + inside) / 2, null);
  const limits = { lower: -1, upper: 1 };
  const risks = globalRisks(normalPrior(0, sd), sd / 4, limits, limits);
  expect(100 * risks.nonconforming).toBeCloseTo(100 * (1 - inside), 5);
  expect(100 * risks.consumer).toBeCloseTo(falseAccept, 5);
  const accepted = inside - risks.producer + risks.consumer;
  // The table's conditional risk is of those accepted among all that were in tolerance or accepted wrongly.
  expect((100 * risks.consumer) / accepted).toBeCloseTo(conditional, 1);
});

// A product N(0, 4), a test N(0, 1), limits ± 8: false accept 0.008, false reject 0.015 (read in a public library).
test('wide limits', () => {
  const limits = { lower: -8, upper: 8 };
  const risks = globalRisks(normalPrior(0, 4), 1, limits, limits);
  expect(risks.consumer).toBeCloseTo(0.0080061, 6);
  expect(risks.producer).toBeCloseTo(0.0148509, 6);
});

// ILAC-G8:09/2019, pages 9 and 10: at the acceptance limit the risk is below 2.5 % with w = U (k = 2), below 50 % with w = 0.
test.each([
  [2, 0.025],
  [0, 0.5],
])('specific risk at the acceptance limit with w = %d u', (w, most) => {
  const risk = 1 - normalCdf(w);
  expect(risk).toBeLessThanOrEqual(most);
  expect(risk).toBeGreaterThan(0.9 * most);
});

test('a measurement without uncertainty has no such risk to work out', () => {
  expect(() => globalRisks(normalPrior(0, 1), 0, one(1), one(1))).toThrow(RangeError);
});
