import type { ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import { wavelengthOf } from '@/lib/measure/wavelength';
import { airFromVacuum } from '@/lib/quantity/air-index';
import { slitPlate } from '@/lib/quantity/slit-mode';
import { spacingPx } from '@/lib/quantity/two-slit';

/** An invented bench whose plate is not the one its setup states: 252.4 µm and 51 µm instead of 250 and 50. */
const TRUE_UM = 252.4;
const SETUP: SetupValues = {
  separationUm: { value: 250, u: 0.1 },
  widthUm: { value: 50, u: 0.3 },
  distanceMm: { value: 500, u: 0.15 },
  scaleUmPerPx: { value: 3.45, u: 0.0003 },
  remountNm: { u: 0.06, dof: 29 },
};
const SOURCE = { vacuumNm: 632.9908, uNm: 0.00095 };
const AIR_NM = airFromVacuum(SOURCE.vacuumNm);

function resultOf(trueUm: number, change: Partial<ReadingResult> = {}): ReadingResult {
  const spacing = spacingPx(AIR_NM, trueUm, 500, 3.45);
  const fit = { spacingPx: spacing, uSpacingPx: spacing * 2e-5, dof: 12, known: 'type A' };
  const w = wavelengthOf(fit, SETUP, []);
  return {
    wavelengthNm: w.airNm,
    wavelengthVacuumNm: w.vacuumNm,
    uWavelengthNm: w.uNm,
    expandedNm: w.expandedNm,
    budget: w.budget,
    findings: [],
    slit: { ratio: 51 / TRUE_UM, uRatio: 0.0004, dof: 12 },
    words: { wavelength: 'clear', width: 'clear', visibility: 'clear' },
    ...change,
  } as unknown as ReadingResult;
}

// OpenStax, University Physics vol. 3, chapter 3 end problems: spacing 1.27 cm at 2.13 m with 500 nm -> d 0.0839 mm.
test('d = λL/Λ of a textbook', () => {
  const setup: SetupValues = {
    separationUm: { value: 100, u: 1 },
    distanceMm: { value: 2130, u: 1 },
    scaleUmPerPx: { value: 1000, u: 1 },
  };
  const w = wavelengthOf({ spacingPx: 12.7, uSpacingPx: 0.01, dof: null, known: '' }, setup, []);
  const result = {
    wavelengthNm: w.airNm,
    wavelengthVacuumNm: w.vacuumNm,
    uWavelengthNm: w.uNm,
    expandedNm: w.expandedNm,
    budget: w.budget,
    findings: [],
  } as unknown as ReadingResult;
  // 500 nm in the air of the bench.
  const plate = slitPlate(result, setup, { vacuumNm: 500 / (airFromVacuum(500) / 500), uNm: 0.1 });
  expect((plate?.separation.valueUm ?? 0) / 1000).toBeCloseTo(0.0839, 4);
});

describe('a plate under a known light', () => {
  const plate = slitPlate(resultOf(TRUE_UM), SETUP, SOURCE);
  test('its separation comes out whatever the setup states of it', () => {
    expect(plate?.separation.valueUm).toBeCloseTo(TRUE_UM, 6);
    expect(plate?.separationAgainst).toMatchObject({ inside: false });
    expect(plate?.separationAgainst?.deviationUm).toBeCloseTo(2.4, 6);
  });
  test('all four relative uncertainties add in quadrature, that of the stated separation is not among them', () => {
    const relative = Math.hypot(0.15 / 500, 0.0003 / 3.45, 2e-5, 0.06 / 626.8, 0.00095 / 632.99);
    expect((plate?.separation.uUm ?? 0) / TRUE_UM).toBeCloseTo(relative, 6);
    expect(plate?.separation.budget.map(({ key }) => key)).not.toContain('separation');
    expect(plate?.separation.budget.map(({ key }) => key)).toContain('published');
  });
  test('its width carries the separation’s uncertainty and that of the envelope', () => {
    expect(plate?.width?.valueUm).toBeCloseTo(51, 6);
    const u = Math.hypot((51 * (plate?.separation.uUm ?? 0)) / TRUE_UM, 0.0004 * TRUE_UM);
    expect(plate?.width?.uUm).toBeCloseTo(u, 6);
    // 1 µm off with a certificate of u = 0.3 µm is outside U of both.
    expect(plate?.widthAgainst?.inside).toBe(false);
  });
  test('the plate the setup states is inside', () => {
    const right = slitPlate(resultOf(250.05), SETUP, SOURCE);
    expect(right?.separationAgainst?.inside).toBe(true);
  });
});

test('no width where a check stops it, nothing at all where the setup states no uncertainty', () => {
  const stopped = resultOf(TRUE_UM, { words: { wavelength: 'clear', width: 'stop', visibility: 'clear' } });
  expect(slitPlate(stopped, SETUP, SOURCE)?.width).toBeNull();
  expect(slitPlate(resultOf(TRUE_UM, { budget: [] }), SETUP, SOURCE)).toBeNull();
});
