import { explain, referenceCheck } from '@/lib/quantity/reference-check';

const check = {
  measuredNm: 632.99,
  uMeasuredNm: 0.35,
  dof: null,
  publishedNm: 632.819,
  uPublishedNm: 0.001,
  ownLimitNm: null,
};

describe('a check of a bench', () => {
  test('is inside while the deviation is no larger than U of both', () => {
    const got = referenceCheck(check);
    expect(got.deviationNm).toBeCloseTo(0.171, 9);
    expect(got.expandedNm).toBeCloseTo(2 * Math.hypot(0.35, 0.001), 9);
    expect(got.inside).toBe(true);
    expect(referenceCheck({ ...check, measuredNm: 632.819 + 0.71 }).inside).toBe(false);
  });
  test('a limit of the bench’s own goes before U, narrower or wider', () => {
    expect(referenceCheck({ ...check, ownLimitNm: 0.1 })).toMatchObject({ inside: false, limitNm: 0.1 });
    expect(referenceCheck({ ...check, measuredNm: 635, ownLimitNm: 3 }).inside).toBe(true);
  });
  // JCGM 100:2008, table G.2: t for 95.45 % with 7 degrees of freedom is 2.43.
  test('few degrees of freedom widen U', () => {
    expect(referenceCheck({ ...check, uPublishedNm: 0, dof: 7 }).expandedNm / 0.35).toBeCloseTo(2.43, 2);
  });
});

/** The invented bench of the documentation: L 500 mm, d 250 µm, 3.45 µm/px. */
const bench = {
  distanceMm: { value: 500, u: 0.173 },
  separationUm: { value: 250, u: 0.1 },
  scaleUmPerPx: { value: 3.45, u: 0.00035 },
};

describe('what would explain a deviation', () => {
  test('+6.4 nm at 635 nm: the distance about 5 mm short, a mount ring', () => {
    const [first] = explain(6.4, 635, bench);
    expect(first).toMatchObject({ what: 'distance', cause: 'mount ring?' });
    expect(first.step).toBeCloseTo(5.04, 2);
  });
  test('22 nm: the camera’s flange', () => {
    expect(explain(22.3, 635, bench)[0].cause).toContain('flange');
  });
  test('each constant moved by its step brings the bench onto the value', () => {
    for (const { what, step } of explain(2.5, 635, bench)) {
      const factor =
        what === 'distance'
          ? 500 / (500 + step)
          : what === 'separation'
            ? (250 + step) / 250
            : (3.45 + step) / 3.45;
      // 637.5 nm with another constant is 635 nm: exact for d and s, to first order for L.
      expect(Math.abs(637.5 * factor - 635)).toBeLessThan(0.011);
    }
  });
  test('without a usual slip the constant that needs the fewest of its uncertainties comes first', () => {
    const loose = { ...bench, separationUm: { value: 250, u: 2 } };
    expect(explain(2.5, 635, loose)[0].what).toBe('separation');
  });
});
