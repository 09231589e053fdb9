import type { BudgetRow, Finding, ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import type { Specification } from '@/lib/domain/specification';
import { wavelengthOf } from '@/lib/measure/wavelength';
import { withRowUncertainty } from '@/lib/quantity/budget';
import { drawBudget, uOfHalfWidth } from '@/lib/quantity/monte-carlo';
import { spacingPx } from '@/lib/quantity/two-slit';
import { valueIn } from '@/lib/quantity/value-in';

/** The invented bench of the documentation: 635 nm, d 250 µm, L 500 mm, bare sensor of 3.450 µm pixels. */
const BENCH_A: SetupValues = {
  separationUm: { value: 250, u: 0.1, known: 'certificate, k = 2' },
  distanceMm: { value: 500, u: uOfHalfWidth(0.3, 'rectangular'), known: 'rectangular', shape: 'rectangular' },
  scaleUmPerPx: { value: 3.45, u: 1e-4 * 3.45, known: 'certificate, k = 2' },
  remountNm: { u: 0.06, dof: 29 },
  plateYawDeg: 1,
  effects: [
    { key: 'tone', name: 'Tone curve', uPpm: 50, known: 'as stated' },
    { key: 'background', name: 'Background', uPpm: 30, known: 'as stated' },
    { key: 'sensor-yaw', name: 'Sensor yaw', uPpm: 20, known: 'as stated' },
    { key: 'cover', name: 'Cover glass', uPpm: 20, known: 'as stated' },
    { key: 'expansion', name: 'Expansion', uPpm: 20, known: 'as stated' },
  ],
  sourceTemperature: { value: 25, u: uOfHalfWidth(0.5, 'rectangular'), shape: 'rectangular' },
};
const SPEC: Specification = {
  name: 'invented',
  nominalNm: 635,
  medium: 'air',
  lowerNm: 630,
  upperNm: 640,
  rule: 'guard-expanded',
  ownGuardNm: null,
  ratio: 1,
  halfToleranceNm: 5,
  atTemperature: { temperatureC: 25, nmPerK: 0.2, uNmPerK: 0.02 },
};
const SPACING = spacingPx(635, 250, 500, 3.45);

function resultOf(setup: SetupValues, more: Partial<ReadingResult> = {}): ReadingResult {
  const u = (0.08 / 635) * SPACING;
  const w = wavelengthOf({ spacingPx: SPACING, uSpacingPx: u, dof: 7, known: 'type A' }, setup, []);
  return {
    wavelengthNm: w.airNm,
    wavelengthVacuumNm: w.vacuumNm,
    uWavelengthNm: w.uNm,
    expandedNm: w.expandedNm,
    k: w.k,
    dofWavelength: w.dof,
    budget: w.budget,
    findings: [],
    ...more,
  } as unknown as ReadingResult;
}

const rowOf = (rows: readonly BudgetRow[], key: string) => rows.find((row) => row.key === key);

describe('bench A of the documentation', () => {
  const value = valueIn(resultOf(BENCH_A), { setup: BENCH_A, specification: SPEC });
  test('u = 0.368 nm, U = 0.74 nm, k = 2.00', () => {
    expect(Math.abs((value.uNm ?? 0) - 0.368)).toBeLessThanOrEqual(0.001);
    expect(value.expandedNm).toBeCloseTo(0.74, 2);
    expect(value.k).toBeCloseTo(2.0, 2);
    expect(value.judgement?.verdict).toBe('within');
  });
  // The documentation's table of this bench, nm at k = 1.
  test.each([
    ['separation', 0.254],
    ['distance', 0.22],
    ['fit', 0.08],
    ['scale', 0.064],
    ['remount', 0.06],
    ['unit-temperature', 0.058],
    ['plate-yaw', 0.056],
    ['tone', 0.032],
    ['background', 0.019],
  ])('%s contributes %d nm', (key, nm) => {
    expect(Math.abs((rowOf(value.budget, key)?.contributionNm ?? 0) - nm)).toBeLessThanOrEqual(0.0006);
  });
  test('the drawn interval agrees', () => {
    const seed = '0123456789abcdef0123456789abcdef';
    const drawn = drawBudget(value.budget, value.valueNm ?? 0, value.expandedNm ?? 0, seed);
    expect(drawn.agrees).toBe(true);
    expect(drawn.expandedNm).toBeCloseTo(0.73, 1);
  });
  test('what if: a better distance takes its share away, the other rows stay', () => {
    const better = withRowUncertainty(value.budget, 'distance', 0.001);
    expect(better.uNm).toBeCloseTo(Math.sqrt((value.uNm ?? 0) ** 2 - 0.22 ** 2), 2);
    expect(rowOf(better.rows, 'separation')?.contributionNm).toBeCloseTo(0.254, 3);
  });
});

describe('a value as its specification asks for it', () => {
  test('in vacuum everything is longer by the index of air', () => {
    const setup = { ...BENCH_A, sourceTemperature: undefined };
    const spec: Specification = { ...SPEC, medium: 'vacuum', atTemperature: null };
    const value = valueIn(resultOf(setup), { setup, specification: spec });
    expect((value.valueNm ?? 0) - 635).toBeCloseTo(0.172, 3);
    expect(rowOf(value.budget, 'air-index')).toBeUndefined();
  });
  test('air of a mountain is carried to standard air, with the index as a row', () => {
    const air = {
      temperatureC: 20,
      pressurePa: 80_000,
      humidityPercent: 50,
      co2Ppm: 450,
      uTemperatureC: 1,
      uPressurePa: 500,
    };
    const setup = { ...BENCH_A, air };
    const value = valueIn(resultOf(setup), { setup, specification: { ...SPEC, atTemperature: null } });
    // n − 1 is 2.139e-4 at 80 kPa and 2.713e-4 at 101.3 kPa (Ciddor's equation): 5.7e-5 of 635 nm.
    expect((value.valueNm ?? 0) - 635).toBeCloseTo(-0.0365, 3);
    // 500 Pa × 2.684e-9 /Pa and 1 K × 9.5e-7 /K (scaled to this pressure) of 635 nm.
    expect(rowOf(value.budget, 'air-index')?.contributionNm).toBeCloseTo(
      635 * Math.hypot(1.34e-6, 7.5e-7),
      4,
    );
  });
  test('at its reference temperature, with both rows', () => {
    const setup = { ...BENCH_A, sourceTemperature: { value: 31, u: 0.3 } };
    const value = valueIn(resultOf(setup), { setup, specification: SPEC });
    expect((value.valueNm ?? 0) - 635).toBeCloseTo(-1.2, 6);
    expect(rowOf(value.budget, 'unit-temperature')?.contributionNm).toBeCloseTo(0.06, 9);
    expect(rowOf(value.budget, 'temperature-coefficient')?.contributionNm).toBeCloseTo(0.12, 9);
    expect(value.corrections).toEqual(['Carried from 31 °C to 25 °C, where the limits hold.']);
  });
  test('without a temperature it decides nothing and says what is missing', () => {
    const setup = { ...BENCH_A, sourceTemperature: undefined };
    const value = valueIn(resultOf(setup), { setup, specification: SPEC });
    expect(value.judgement?.verdict).toBe('no-verdict');
    expect(value.judgement?.because).toContain('was not entered');
  });
  test('a broad line carries the spectral response, a narrow one does not', () => {
    const broad = { fwhmNm: 18, uFwhmNm: 0.5, limitNm: null };
    const at = (bandwidth: typeof broad | null) =>
      valueIn(resultOf(BENCH_A, { bandwidth }), { setup: BENCH_A, specification: null });
    // σ = 18/2.355 nm, slope 0.5 % per nm: 0.29 nm as a half width.
    expect(rowOf(at(broad).budget, 'response')?.contributionNm).toBeCloseTo(0.292 / Math.sqrt(3), 3);
    expect(rowOf(at(null).budget, 'response')).toBeUndefined();
  });
  test('a fitted tone curve and a bent background are rows, together no more than half their common move', () => {
    const seen = (check: string, sizeNm: number) => ({ check, sizeNm }) as Finding;
    const findings = [seen('tone', 0.4), seen('background', 0.4), seen('dust', 2)];
    const value = valueIn(resultOf(BENCH_A, { findings }), { setup: BENCH_A, specification: null });
    const tone = rowOf(value.budget, 'tone-curve')?.contributionNm ?? 0;
    const background = rowOf(value.budget, 'background-shape')?.contributionNm ?? 0;
    expect(Math.hypot(tone, background)).toBeCloseTo(0.2 / Math.sqrt(3), 9);
  });
  test('a poor bench cannot decide ± 5 nm, yet 656 nm is outside', () => {
    const poor: SetupValues = {
      separationUm: { value: 250, u: 1.9 / Math.sqrt(3) },
      distanceMm: { value: 500, u: 2 / Math.sqrt(3) },
      scaleUmPerPx: { value: 3.45, u: 3.45e-4 },
    };
    const spec = { ...SPEC, atTemperature: null };
    const value = valueIn(resultOf(poor), { setup: poor, specification: spec });
    expect(value.expandedNm).toBeGreaterThan(5);
    expect(value.judgement?.verdict).toBe('no-verdict');
    const far = resultOf(poor);
    const index = 656 / 635;
    const other = { ...far, wavelengthNm: 656, wavelengthVacuumNm: (far.wavelengthVacuumNm ?? 0) * index };
    expect(valueIn(other, { setup: poor, specification: spec }).judgement?.verdict).toBe('outside');
  });
});
