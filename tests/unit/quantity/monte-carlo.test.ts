import { combineBudget, type BudgetInput } from '@/lib/quantity/budget';
import { drawBudget, propagateByDrawing, uOfHalfWidth, type Drawn } from '@/lib/quantity/monte-carlo';
import { drawStudent, randomFrom } from '@/lib/quantity/random';

/** SHA-256 of nothing: any text of hexadecimal digits is a seed. */
const SEED = 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855';
const DRAWS = 400_000;
/** At this many draws: u to 0.5 %, ends to 1 % of the interval's width (five times their scatter). */
const U_SHARE = 0.005;
const END_SHARE = 0.01;

const sum = (x: Float64Array) => x.reduce((s, v) => s + v, 0);
const rectangle = (u: number): Drawn => ({ value: 0, u, shape: 'rectangular' });
const at95 = (inputs: Drawn[], model = sum) =>
  propagateByDrawing(inputs, model, DRAWS, randomFrom(SEED), 0.95);

function expectInterval(got: { low: number; high: number }, low: number, high: number) {
  expect(Math.abs(got.low - low)).toBeLessThan(END_SHARE * (high - low));
  expect(Math.abs(got.high - high)).toBeLessThan(END_SHARE * (high - low));
}

// JCGM 101:2008, 9.2: sums of four inputs. Inputs read; the printed results from memory, and exact by calculation
// (9.2.3: ± 2√3(2 − (3/5)^¼)).
describe('sums, JCGM 101 9.2', () => {
  test('9.2.2: four normal inputs', () => {
    const got = at95([1, 1, 1, 1].map((u) => ({ value: 0, u })));
    expect(Math.abs(got.u - 2)).toBeLessThan(2 * U_SHARE);
    expectInterval(got, -3.92, 3.92);
  });
  test('9.2.3: four rectangles of the same width', () => {
    const got = at95([1, 1, 1, 1].map(rectangle));
    expect(Math.abs(got.u - 2)).toBeLessThan(2 * U_SHARE);
    expectInterval(got, -3.879407, 3.879407);
  });
  test('9.2.4: one rectangle ten times as wide: narrower than the law of propagation says', () => {
    const got = at95([1, 1, 1, 10].map(rectangle));
    expect(Math.abs(got.u - 10.149)).toBeLessThan(10 * U_SHARE);
    expectInterval(got, -17.01, 17.01);
    expect(got.high).toBeLessThan(0.9 * 19.89);
  });
});

// JCGM 101:2008, 9.3: calibration of a mass. Printed 1.2340, 0.0754, shortest [1.0834, 1.3825] from memory; the ends
// recomputed with an independent library are [1.0840, 1.3831].
test('mass calibration, JCGM 101 9.3', () => {
  const half = (low: number, high: number): Drawn => ({
    value: (low + high) / 2,
    u: uOfHalfWidth((high - low) / 2, 'rectangular'),
    shape: 'rectangular',
  });
  const got = at95(
    [
      { value: 100_000, u: 0.05 },
      { value: 1.234, u: 0.02 },
      half(1.1, 1.3),
      half(7000, 9000),
      half(7950, 8050),
    ],
    ([m, dm, air, w, r]) => (m + dm) * (1 + (air - 1.2) * (1 / w - 1 / r)) - 100_000,
  );
  expect(got.mean).toBeCloseTo(1.234, 3);
  expect(Math.abs(got.u - 0.0754)).toBeLessThan(0.0754 * 2 * U_SHARE);
  expectInterval({ low: got.shortestLow, high: got.shortestHigh }, 1.084, 1.3831);
});

// JCGM 101:2008, 9.4: Y = X₁² + X₂², x₁ 0.010 and 0.050, u 0.005: exact 150, 111.80 and 2550, 502.49 (1e-6).
test.each([
  [0.01, 150e-6, 111.8e-6],
  [0.05, 2550e-6, 502.49e-6],
])('squares, JCGM 101 9.4 with x₁ = %d', (x1, mean, u) => {
  const got = at95(
    [
      { value: x1, u: 0.005 },
      { value: 0, u: 0.005 },
    ],
    ([a, b]) => a * a + b * b,
  );
  expect(Math.abs(got.mean / mean - 1)).toBeLessThan(2 * U_SHARE);
  expect(Math.abs(got.u / u - 1)).toBeLessThan(2 * U_SHARE);
});

describe('drawing', () => {
  test('the same seed gives the same digits, another seed others', () => {
    const first = (seed: string) => randomFrom(seed).normal();
    expect(at95([rectangle(1)])).toEqual(at95([rectangle(1)]));
    expect(first(SEED)).toBe(first(SEED));
    expect(first(SEED)).not.toBe(first(SEED.replace('e3', 'e4')));
    expect(() => randomFrom('not a hash')).toThrow(RangeError);
  });
  // Standard deviation of Student's t is √(ν/(ν − 2)), also for fractional ν.
  test.each([4.5, 7, 30])('t with %d degrees of freedom', (dof) => {
    const random = randomFrom(SEED);
    let square = 0;
    for (let n = 0; n < DRAWS; n += 1) square += drawStudent(random, dof) ** 2;
    const expected = dof / (dof - 2);
    expect(Math.abs(square / DRAWS / expected - 1)).toBeLessThan(dof < 5 ? 0.1 : 0.02);
  });
  // Half widths a/√3, a/√6, a/√2: JCGM 100:2008, 4.3.7, 4.3.9 and H.1.3.4.
  test.each([
    ['rectangular', 4, 2.3094],
    ['triangular', 4, 1.633],
    ['u-shaped', 0.5, 0.3536],
  ] as const)('%s within ± %d', (shape, half, u) => {
    expect(uOfHalfWidth(half, shape)).toBeCloseTo(u, 4);
    const got = at95([{ value: 0, u, shape }]);
    expect(Math.abs(got.u / u - 1)).toBeLessThan(U_SHARE);
    expect(got.high).toBeLessThanOrEqual(half);
    expect(got.high).toBeGreaterThan(0.7 * half);
  });
});

describe('a budget drawn', () => {
  const row = (key: string, part: Partial<BudgetInput>): BudgetInput => ({
    key,
    name: key,
    symbol: '',
    value: null,
    unit: '',
    u: 0,
    known: '',
    dof: null,
    sensitivity: 1,
    ...part,
  });
  const draw = (rows: BudgetInput[], value: number) => {
    const { rows: weighed, expandedNm } = combineBudget(rows);
    return { ...drawBudget(weighed, value, expandedNm, SEED), gum: expandedNm };
  };
  test('of many parts agrees with the law of propagation', () => {
    const got = draw(
      [
        row('d', { value: 250, u: 0.1, sensitivity: 635 / 250 }),
        row('L', { value: 500, u: 0.3 / Math.sqrt(3), sensitivity: -635 / 500, shape: 'rectangular' }),
        row('fit', { value: 368, u: 0.05, sensitivity: 635 / 368, dof: 12 }),
      ],
      635,
    );
    expect(got.agrees).toBe(true);
    expect(Math.abs(got.expandedNm / got.gum - 1)).toBeLessThan(0.05);
  });
  test('of one rectangle does not: its interval ends where the rectangle ends', () => {
    const got = draw([row('L', { u: 1, shape: 'rectangular' })], 635);
    expect(got.agrees).toBe(false);
    expect(got.expandedNm).toBeLessThan(Math.sqrt(3));
  });
});
