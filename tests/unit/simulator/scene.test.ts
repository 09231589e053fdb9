import { median, medianInterval, rmsInterval, wilson } from '@/scripts/bench/statistics';
import { parasiticFringes } from '@/scripts/simulator/paintings';
import { random } from '@/scripts/simulator/random';
import {
  lightAt,
  PLAIN_SCENE,
  renderMean,
  spacingAtPx,
  trueSpacingPx,
  type Scene,
} from '@/scripts/simulator/scene';

/** Contrast between order m and the dark place half an order further out, the envelope taken out: d/w is large. */
function contrastNear(scene: Scene, m: number): number {
  const spacing = trueSpacingPx(scene);
  const bright = lightAt(scene, m * spacing);
  const dark = 0.5 * (lightAt(scene, (m - 0.5) * spacing) + lightAt(scene, (m + 0.5) * spacing));
  return (bright - dark) / (bright + dark);
}

describe('physics of the simulated scenes', () => {
  test.each([
    // The documentation's table of pitfalls, number 25: contrast by order at 635 nm for lines 10 and 20 nm wide.
    [20, 5, 0.92],
    [20, 10, 0.7],
    [20, 20, 0.24],
    [10, 10, 0.92],
    [10, 20, 0.7],
  ])(
    'a line %i nm wide leaves the contrast at order %i at %d of its middle value',
    (lineWidthNm, m, expected) => {
      const scene = {
        ...PLAIN_SCENE,
        widthUm: 0.5,
        visibility: 1,
        lineWidthNm,
        distanceMm: 5e5,
        scaleUmPerPx: 15875,
      };
      // Two places are given in the table, and the contrast changes between neighbouring half orders.
      expect(Math.abs(contrastNear(scene, m) - expected)).toBeLessThan(0.01);
    },
  );

  test('unequal slits: contrast 2√(I₁I₂)/(I₁ + I₂) in the middle, light in the missing order', () => {
    // Two-beam interference with amplitudes in the ratio of the widths; for a ratio r the contrast is 2r/(1 + r²).
    const scene = { ...PLAIN_SCENE, widthUm: 50, secondWidthUm: 60, visibility: 1 };
    const r = 60 / 50;
    // Slits a tenth as wide have an envelope that is 1 to a part in 10^3 there.
    const narrow = { ...scene, widthUm: 5, secondWidthUm: 6 };
    const dark = lightAt(narrow, 0.5 * trueSpacingPx(narrow));
    const equal = { ...scene, secondWidthUm: 50 };
    expect(lightAt(equal, 0.5 * trueSpacingPx(equal))).toBeLessThan(1e-6);
    expect(dark).toBeCloseTo(((r - 1) / (r + 1)) ** 2, 4);
    expect(lightAt(equal, 5 * trueSpacingPx(equal))).toBeLessThan(1e-6);
    expect(lightAt(scene, 5 * trueSpacingPx(scene))).toBeGreaterThan(1e-3);
  });

  test('keystone: the spacing changes along the fringes by 1 − k·v, and the lines of the orders stay straight', () => {
    const scene = {
      ...PLAIN_SCENE,
      heightPx: 301,
      zeroXPx: 500.5,
      zeroYPx: 150.5,
      visibility: 1,
      widthUm: 2,
      keystonePerPx: 2e-4,
    };
    const mean = renderMean(scene);
    const place = (row: number, m: number): number => {
      const around = Math.round(scene.zeroXPx + m * spacingAtPx(scene, row + 0.5 - scene.zeroYPx) - 0.5);
      const [a, b, c] = [-1, 0, 1].map((k) => mean[row * scene.widthPx + around + k]);
      return around + 0.5 + (a - c) / (2 * (a - 2 * b + c)) - scene.zeroXPx;
    };
    const [top, middle, bottom] = [0, 150, 300].map((row) => place(row, 5));
    expect(middle / 5).toBeCloseTo(trueSpacingPx(scene), 1);
    // v is -150 and +150 px at the first and last row.
    expect(top / bottom).toBeCloseTo((1 + 0.03) / (1 - 0.03), 3);
    expect(top + bottom).toBeCloseTo(2 * middle, 1);
  });

  test('parasitic fringes are weak and have the period they were asked for', () => {
    const scene = { ...PLAIN_SCENE, tiltDeg: 0 };
    const light = new Float32Array(scene.widthPx * scene.heightPx).fill(1);
    parasiticFringes(random(5), 64)(light, scene);
    let [re, im, most] = [0, 0, 0];
    for (let i = 0; i < light.length; i += 1) {
      const x = (i % scene.widthPx) + 0.5;
      re += (light[i] - 1) * Math.cos((2 * Math.PI * x) / 64);
      im += (light[i] - 1) * Math.sin((2 * Math.PI * x) / 64);
      most = Math.max(most, Math.abs(light[i] - 1));
    }
    expect(most).toBeLessThanOrEqual(0.05);
    expect(most).toBeGreaterThan(0.009);
    // They lean by at most 4°, so that most of their amplitude is still found along x.
    expect((2 * Math.hypot(re, im)) / light.length).toBeGreaterThan(0.5 * most);
  });
});

describe("the benchmark's intervals", () => {
  test('of a share: Wilson 1927, as for 8 of 10 in E. B. Wilson, J. Am. Stat. Assoc. 22, 209', () => {
    // Closed form with z = 1.96: (0.8 + 0.19208 ± 1.96·√(0.016 + 0.009604))/1.38416.
    const [low, high] = wilson(8, 10);
    expect(low).toBeCloseTo(0.4902, 3);
    expect(high).toBeCloseTo(0.9433, 3);
  });

  test('of a median: order statistics of the binomial distribution with p = ½', () => {
    // Two-sided tail of the extremes: 2/2^n, 6.25 % for five; for 15 the 4th and 12th hold 96.5 %.
    expect(medianInterval([5, 1, 4, 2, 3])).toEqual([1, 5]);
    const fifteen = Array.from({ length: 15 }, (_, i) => i + 1);
    expect(medianInterval(fifteen)).toEqual([4, 12]);
    expect(median(fifteen)).toBe(8);
  });

  test('of a root mean square holds 1 for standard normal values, and narrows with their number', () => {
    const rnd = random(3);
    const values = Array.from({ length: 4000 }, () => rnd.normal());
    const [low, high] = rmsInterval(values);
    expect(low).toBeLessThan(1);
    expect(high).toBeGreaterThan(1);
    expect(high - low).toBeLessThan(0.06);
  });
});
