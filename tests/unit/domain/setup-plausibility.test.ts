import { oddness } from '@/lib/domain/setup-plausibility';
import { divisorOf, type ValueKey } from '@/lib/domain/setup';
import { setupSchema } from '@/lib/domain/setup-schemas';

/** Values of an invented bench. */
const BEFORE: Record<ValueKey, number> = {
  separationUm: 250,
  widthUm: 50,
  distanceMm: 500,
  scaleUmPerPx: 3.45,
};

describe('what looks odd beside the value before', () => {
  const cases: [what: string, key: ValueKey, value: number, says: RegExp | null][] = [
    ['the same', 'separationUm', 250, null],
    ['0.4 % more', 'distanceMm', 502, null],
    ['0.5 % exactly', 'distanceMm', 502.5, null],
    ['0.6 % more', 'distanceMm', 503, /0\.6 % more than the 500\.000 mm before/],
    ['0.6 % less', 'scaleUmPerPx', 3.4293, /0\.6 % less/],
    ['mm for µm', 'separationUm', 0.25, /a thousandth .* wrong unit/],
    ['µm for mm', 'distanceMm', 500_000, /1000 times .* wrong unit/],
    ['inches', 'distanceMm', 500 / 25.4, /over 25\.4: inches/],
    ['a slipped point', 'widthUm', 5, /a tenth .* slipped point/],
    // 17.526 mm from flange to sensor: common practice for C-mount, no source.
    ['to the flange', 'distanceMm', 482.474, /17\.5 mm less .* flange/],
    ['back from the flange', 'distanceMm', 517.526, /17\.5 mm more .* flange/],
    ['17.5 µm is no flange', 'widthUm', 67.526, /35 % more/],
    ['not a number', 'widthUm', Number.NaN, null],
    ['below zero', 'widthUm', -50, null],
  ];
  test.each(cases)('%s', (_what, key, value, says) => {
    const said = oddness(key, value, BEFORE[key]);
    if (says) expect(said).toMatch(says);
    else expect(said).toBeNull();
  });

  test('the flange is seen on a long bench too, where it is less than 0.5 %', () => {
    expect(oddness('distanceMm', 5000 - 17.5, 5000)).toMatch(/flange/);
    expect(oddness('distanceMm', 5000 - 15, 5000)).toBeNull();
  });

  test('without a value before, only what no bench has', () => {
    expect(oddness('distanceMm', 500, null)).toBeNull();
    expect(oddness('distanceMm', 0.5, null)).toMatch(/wrong unit/);
    expect(oddness('separationUm', 0.25, null)).toMatch(/between 5 and 5\u2009000 µm/);
    expect(oddness('scaleUmPerPx', 0.00345, null)).toMatch(/between 0\.5 and/);
  });
});

describe('what the ± is divided by', () => {
  // JCGM 100:2008, 4.3.7 (limits) and 4.2 (type A).
  test.each([
    ['expanded', 2, 2],
    ['rectangular', 2, Math.sqrt(3)],
    ['type-a', 2, 1],
  ] as const)('%s', (shape, k, divisor) => expect(divisorOf(shape, k)).toBe(divisor));
});

describe('what comes in', () => {
  const value = { value: 250, stated: 0.3 };
  const setup = {
    benchId: 1,
    afterNumber: 0,
    plate: 'P-1',
    scaleUmPerPx: value,
    separationUm: value,
    widthUm: { value: 50, stated: 0.3 },
    distanceMm: value,
    why: 'Invented.',
  };
  const complaint = (change: object) => {
    const answer = setupSchema.safeParse({ ...setup, ...change });
    return answer.success ? null : answer.error.issues.map((issue) => issue.path.join('.'));
  };

  test('k follows from the kind of ±, whatever was typed', () => {
    const parsed = setupSchema.parse({
      ...setup,
      distanceMm: { ...value, shape: 'rectangular', k: 5 },
      scaleUmPerPx: { ...value, shape: 'type-a', k: 5, dof: 7 },
    });
    expect(parsed.distanceMm.k).toBe(Math.sqrt(3));
    expect(parsed.scaleUmPerPx.k).toBe(1);
    expect(parsed.separationUm.k).toBe(2);
  });

  test.each([
    ['a ± as large as the value', { distanceMm: { value: 250, stated: 250 } }, 'distanceMm.stated'],
    ['a scatter without degrees of freedom', { distanceMm: { ...value, shape: 'type-a' } }, 'distanceMm.dof'],
    ['slits wider than they are apart', { widthUm: { value: 260, stated: 1 } }, 'widthUm.value'],
    ['a camera of 24 bits', { camera: { bits: 24 } }, 'camera.bits'],
    ['half a bit', { camera: { bits: 8.5 } }, 'camera.bits'],
  ])('%s is said beside its field', (_what, change, field) => {
    expect(complaint(change)).toEqual([field]);
  });
});
