import {
  exposureFor,
  farFieldErrorNm,
  farFieldNumber,
  orderPx,
  viewOf,
  visibilityBehindSlit,
  widestSourceSlit,
  type Plan,
} from '@/lib/quantity/bench-helpers';

/** An invented bench: 635 nm, bare sensor of 4096 pixels of 3.45 µm, half a metre behind the plate. */
const BENCH: Plan = {
  wavelengthNm: 635,
  separationUm: 250,
  widthUm: 50,
  distanceMm: 500,
  scaleUmPerPx: 3.45,
  pictureWidthPx: 4096,
};

describe('what a picture will hold', () => {
  test('a fringe has λL/(d·s) pixels', () => {
    // OpenStax University Physics vol. 3, ch. 3: spacing λL/d = 1.27 mm here.
    expect(viewOf(BENCH)?.pxPerFringe).toBeCloseTo(1270 / 3.45, 9);
  });

  test('the orders counted are those that stand on it, and the next one does not', () => {
    for (const pictureWidthPx of [900, 2448, 4096, 6000]) {
      const plan = { ...BENCH, pictureWidthPx };
      const last = ((viewOf(plan)?.fringes ?? 0) - 1) / 2;
      expect(orderPx(last, plan)).toBeLessThanOrEqual(pictureWidthPx / 2);
      expect(orderPx(last + 1, plan)).toBeGreaterThan(pictureWidthPx / 2);
    }
  });

  test('far off the axis too, where the angle is no longer small', () => {
    const plan = {
      ...BENCH,
      separationUm: 5,
      widthUm: 1,
      distanceMm: 10,
      scaleUmPerPx: 20,
      pictureWidthPx: 2000,
    };
    // sin 63.4 degrees = 0.894; 0.894 * 5000/635 = 7.04: seven orders a side.
    expect(viewOf(plan)?.fringes).toBe(15);
  });

  test('the central lobe ends at the missing order d/w', () => {
    // OpenStax University Physics vol. 3, ch. 4: d/w = 5 leaves 9 bright fringes in the central maximum.
    expect(viewOf({ ...BENCH, pictureWidthPx: 40_000 })?.fringesInLobe).toBe(9);
  });

  test('nonsense has no view', () => {
    expect(viewOf({ ...BENCH, widthUm: 250 })).toBeNull();
    expect(viewOf({ ...BENCH, distanceMm: 0 })).toBeNull();
    expect(viewOf({ ...BENCH, scaleUmPerPx: Number.NaN })).toBeNull();
  });
});

describe('exposure', () => {
  test('goes with the peak', () => {
    expect(exposureFor(12, 0.3)).toEqual({ from: 20, to: 34 });
    expect(exposureFor(4, 0.5)).toEqual({ from: 4, to: 6.8 });
  });
  test('a clipped or missing peak gives none', () => {
    for (const peak of [1, 1.2, 0, -1, Number.NaN]) expect(exposureFor(4, peak)).toBeNull();
  });
});

describe('the source slit', () => {
  // V = |sinc(e d/(λR))|, van Cittert and Zernike; two figures worked out by hand at R = 200 mm.
  test.each([
    [0.1, 0.94],
    [0.2, 0.76],
  ])('%d mm wide leaves a visibility of %d', (slitMm, visibility) => {
    expect(visibilityBehindSlit(slitMm, 200, 250, 635)).toBeCloseTo(visibility, 2);
  });

  test('the widest slit for a visibility leaves just that', () => {
    for (const visibility of [0.2, 0.5, 0.9, 0.99]) {
      const slit = widestSourceSlit(visibility, 200, 250, 635) ?? 0;
      expect(visibilityBehindSlit(slit, 200, 250, 635)).toBeCloseTo(visibility, 10);
    }
    // e = λR/(4d) leaves sinc(1/4) = 2 sqrt 2/π = 0.9003.
    expect(widestSourceSlit((2 * Math.SQRT2) / Math.PI, 200, 250, 635)).toBeCloseTo(0.127, 9);
  });

  test('no slit gives all or nothing', () => {
    for (const visibility of [0, 1, 1.1, -0.1, Number.NaN])
      expect(widestSourceSlit(visibility, 200, 250, 635)).toBeNull();
    expect(widestSourceSlit(0.9, 0, 250, 635)).toBeNull();
  });
});

describe('too near', () => {
  // Widths and distances with the error that Fresnel integrals gave for them (the project's own simulation), to the
  // figures that were written down then.
  test.each([
    [50, 500, 0.007, 0.0005],
    [50, 200, 0.04, 0.005],
    [80, 200, 0.28, 0.02],
    [50, 100, 0.18, 0.005],
    [80, 100, 1.2, 0.05],
  ])('slits of %d µm at %d mm: %d nm', (widthUm, distanceMm, errorNm, slackNm) => {
    expect(Math.abs(farFieldErrorNm(widthUm, 635, distanceMm) - errorNm)).toBeLessThanOrEqual(slackNm);
  });
  test('the number is w²/(λL)', () => {
    expect(farFieldNumber(50, 635, 500)).toBeCloseTo(0.007874, 6);
  });
});
