import type { ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import type { Specification } from '@/lib/domain/specification';
import { airFromVacuum, vacuumFromAir, STANDARD_BENCH_AIR } from '@/lib/quantity/air-index';
import { combineBudget } from '@/lib/quantity/budget';
import { compareWith, type ComparisonFacts, type ReferenceReading } from '@/lib/quantity/comparison';
import { uOfHalfWidth } from '@/lib/quantity/monte-carlo';
import { spacingPx } from '@/lib/quantity/two-slit';
import { valueIn } from '@/lib/quantity/value-in';

/** The invented bench A of the documentation, its constants all off: they must not matter. */
const TRUE_BENCH = { separationUm: 250, distanceMm: 505, scaleUmPerPx: 3.451 };
const STATED: SetupValues = {
  separationUm: { value: 250.3, u: 0.1 },
  distanceMm: { value: 500, u: 0.17 },
  scaleUmPerPx: { value: 3.45, u: 0.0003 },
};
const REFERENCE_VACUUM = 632.9908;
const spacingOf = (airNm: number) =>
  spacingPx(airNm, TRUE_BENCH.separationUm, TRUE_BENCH.distanceMm, TRUE_BENCH.scaleUmPerPx);
const REFERENCE_AIR = airFromVacuum(REFERENCE_VACUUM);

function reference(at: string, change: Partial<ReferenceReading> = {}): ReferenceReading {
  const spacing = spacingOf(REFERENCE_AIR);
  return {
    readingId: 1,
    source: 'HeNe',
    at,
    spacing,
    uSpacing: (0.08 / 635) * spacing,
    dof: 7,
    publishedVacuumNm: REFERENCE_VACUUM,
    uPublishedNm: 0.001,
    ...change,
  };
}
function facts(references: ReferenceReading[]): ComparisonFacts {
  return {
    method: 'comparison',
    at: '2026-11-20T09:00:00.000Z',
    references,
    remount: { uNm: 0.06, dof: 29 },
  };
}
const BEFORE = reference('2026-11-20T08:00:00.000Z');
const AFTER = reference('2026-11-20T10:00:00.000Z');
const own = {
  spacing: spacingOf(635),
  uSpacing: (0.08 / 635) * spacingOf(635),
  dof: 7,
  known: 'type A',
  unit: 'px' as const,
};

describe('compared with a reference', () => {
  test('separation, distance and scale cancel, however wrong they are', () => {
    expect(compareWith(own, facts([BEFORE]), STATED)?.airNm).toBeCloseTo(635, 9);
    expect(compareWith(own, facts([BEFORE, AFTER]), STATED)?.airNm).toBeCloseTo(635, 9);
  });
  test('in thin air as well: both wavelengths are in the air of the bench', () => {
    const air = { ...STANDARD_BENCH_AIR, pressurePa: 80_000 };
    const spacing = spacingOf(airFromVacuum(vacuumFromAir(635), air));
    const there = reference(BEFORE.at, { spacing: spacingOf(airFromVacuum(REFERENCE_VACUUM, air)) });
    const compared = compareWith({ ...own, spacing }, facts([there]), { ...STATED, air });
    expect(compared?.vacuumNm).toBeCloseTo(vacuumFromAir(635), 8);
  });
  test('a drift of the bench is taken out between the two references', () => {
    // Distance grows by 0.1 % between the two references; the unit was taken in the middle.
    const late = reference(AFTER.at, { spacing: 1.001 * spacingOf(REFERENCE_AIR) });
    const unit = { ...own, spacing: 1.0005 * spacingOf(635) };
    expect(compareWith(unit, facts([BEFORE, late]), STATED)?.airNm).toBeCloseTo(635, 9);
    expect((compareWith(unit, facts([BEFORE]), STATED)?.airNm ?? 0) - 635).toBeCloseTo(0.3175, 4);
  });
  test('the uncertainties of two references halve as two of one kind do; one published value does not', () => {
    const rows = (references: ReferenceReading[]) =>
      combineBudget(compareWith(own, facts(references), STATED)?.rows ?? []).rows;
    const sum = (keys: RegExp, references: ReferenceReading[]) =>
      Math.hypot(...rows(references).flatMap((row) => (keys.test(row.key) ? row.contributionNm : [])));
    const fits = /reference-fit/;
    expect(sum(fits, [BEFORE, AFTER])).toBeCloseTo(sum(fits, [BEFORE]) / Math.SQRT2, 6);
    expect(sum(/published/, [BEFORE, AFTER])).toBeCloseTo(sum(/published/, [BEFORE]), 9);
    expect(rows([BEFORE, AFTER]).filter(({ key }) => key.startsWith('published'))).toHaveLength(1);
  });
  test('a stated difference in yaw is a row, none is none', () => {
    const keys = (setup: SetupValues) => compareWith(own, facts([BEFORE]), setup)?.rows.map(({ key }) => key);
    expect(keys({ ...STATED, yawDifferenceDeg: 0.5 })).toContain('yaw-difference');
    expect(keys(STATED)).not.toContain('yaw-difference');
  });
  test('nothing to compare with, or nothing known of mounting again, gives none', () => {
    expect(compareWith(own, facts([]), STATED)).toBeNull();
    expect(compareWith(own, { ...facts([BEFORE]), remount: null }, STATED)).toBeNull();
    const setup = { ...STATED, remountNm: { u: 0.05, dof: 12 } };
    expect(compareWith(own, { ...facts([BEFORE]), remount: null }, setup)?.rows).toContainEqual(
      expect.objectContaining({ key: 'remount', u: 0.05 }),
    );
  });
});

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
  atTemperature: { temperatureC: 25, nmPerK: 0.2, uNmPerK: 0 },
};
const RESULT = {
  spacingPx: own.spacing,
  uSpacingPx: own.uSpacing,
  dofSpacing: 7,
  wavelengthNm: 641.3,
  wavelengthVacuumNm: vacuumFromAir(641.3),
  uWavelengthNm: 0.37,
  expandedNm: 0.74,
  k: 2,
  dofWavelength: null,
  budget: [],
  findings: [],
} as unknown as ReadingResult;

// Bench A of the documentation beside a reference: fit 0.08 (ν 7) twice, re-mount 0.06 (ν 29), unit temperature ± 0.5 K at
// 0.2 nm/K -> u = 0.14, U = 0.29 nm, k = 2.08.
test('bench A compared: u = 0.14, U = 0.29 nm, k = 2.08', () => {
  const setup = {
    ...STATED,
    sourceTemperature: {
      value: 25,
      u: uOfHalfWidth(0.5, 'rectangular'),
      shape: 'rectangular' as const,
    },
  };
  const value = valueIn(RESULT, { setup, specification: SPEC, comparison: facts([BEFORE]) });
  expect(value.method).toBe('comparison');
  expect(value.valueNm).toBeCloseTo(635, 6);
  expect(value.uNm).toBeCloseTo(0.14, 2);
  expect(value.expandedNm).toBeCloseTo(0.29, 2);
  expect(value.k).toBeCloseTo(2.08, 2);
  expect(value.other).toMatchObject({ method: 'absolute', valueNm: 641.3, expandedNm: 0.74 });
});

test('where the bench’s constants count, the comparison stands beside; where there is none, it says so', () => {
  const setup = { ...STATED };
  const specification = { ...SPEC, atTemperature: null };
  const absolute = valueIn(RESULT, {
    setup,
    specification,
    comparison: { ...facts([BEFORE]), method: 'absolute' },
  });
  expect(absolute).toMatchObject({ method: 'absolute', valueNm: 641.3, other: { method: 'comparison' } });
  expect(absolute.other?.valueNm).toBeCloseTo(635, 6);
  const alone = valueIn(RESULT, { setup, specification, comparison: facts([]) });
  expect(alone).toMatchObject({ method: 'absolute', other: null });
  expect(alone.corrections.join(' ')).toContain('No accepted reference reading');
});
