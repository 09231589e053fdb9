import { layoutOf, ModelPoint, placeOfOrder, orderAt } from '@/lib/fit/two-slit-model';

const FULL = layoutOf({
  background: 4,
  curve: true,
  chirp: true,
  tone: true,
  fade: true,
  unequal: true,
});
const FIXED = { curve: 0, centre: 0.3, half: 6 };
/** spacing, zero, ratio, middle, A, B, four backgrounds, curve, chirp, tone, fade, unequal */
const VALUES = Float64Array.from([
  1.02, 0.1, 0.21, 0.15, 0.9, 0.8, 0.06, 0.01, -0.004, 0.003, 0.01, 0.002, 0.93, 0.05, 0.12,
]);

/** Light of two slits of width a and separation d at an angle, by the model: m = d sin/lambda, ratio = a/d. */
function light(m: number, ratio: number, visibility = 1): number {
  const layout = layoutOf({
    background: 1,
    curve: false,
    chirp: false,
    tone: false,
    fade: false,
    unequal: false,
  });
  const point = new ModelPoint(layout, { curve: 0, centre: 0, half: 1 });
  const p = Float64Array.from([1, 0, ratio, 0, 1, visibility, 0]);
  expect(point.evaluate(p, m, false)).toBe(true);
  return point.light;
}

describe('two-slit model', () => {
  it('its derivatives are those of its value', () => {
    const point = new ModelPoint(FULL, FIXED);
    const other = new ModelPoint(FULL, FIXED);
    for (const x of [-4.7, -1.1, 0.1, 0.35, 2.9, 5.2]) {
      expect(point.evaluate(VALUES, x, true)).toBe(true);
      const gradient = Float64Array.from(point.gradient);
      const slope = point.slope;
      const h = 1e-6;
      for (let k = 0; k < VALUES.length; k++) {
        const up = Float64Array.from(VALUES);
        const down = Float64Array.from(VALUES);
        up[k] += h;
        down[k] -= h;
        other.evaluate(up, x, false);
        const a = other.light;
        other.evaluate(down, x, false);
        // Central differences of a smooth function of order one: error near 1e-9.
        expect(gradient[k]).toBeCloseTo((a - other.light) / (2 * h), 6);
      }
      other.evaluate(VALUES, x + h, false);
      const a = other.light;
      other.evaluate(VALUES, x - h, false);
      expect(slope).toBeCloseTo((a - other.light) / (2 * h), 6);
    }
  });

  it('places and orders undo each other', () => {
    for (let m = -5; m <= 5; m += 0.5)
      expect(orderAt(FULL, FIXED, VALUES, placeOfOrder(FULL, FIXED, VALUES, m))).toBeCloseTo(m, 10);
  });

  // OpenStax University Physics vol. 3, ch. 4, double-slit diffraction, example with a = 2 lambda, d = 6 lambda: I(1) = 0.684 I0.
  it('height of order 1 for d/a = 3 and its missing order 3', () => {
    expect(light(1, 1 / 3)).toBeCloseTo(0.684, 3);
    expect(light(2, 1 / 3)).toBeCloseTo(0.17098, 4);
    expect(light(3, 1 / 3)).toBeLessThan(1e-30);
  });

  // Same chapter: a 0.020 mm, d 0.20 mm: orders 10 and 20 missing, 19 fringes in the central maximum.
  it('d/a = 10: orders 10 and 20 are missing, 19 bright fringes between', () => {
    expect(light(10, 0.1)).toBeLessThan(1e-30);
    expect(light(20, 0.1)).toBeLessThan(1e-30);
    const bright = Array.from({ length: 19 }, (_, i) => light(i - 9, 0.1));
    expect(bright.every((v) => v > 0.005)).toBe(true);
  });

  // Same chapter: a 2.5 um, d 5 um: three fringes.
  it('d/a = 2: three bright fringes in the central maximum', () => {
    expect(light(1, 0.5)).toBeGreaterThan(0.3);
    expect(light(2, 0.5)).toBeLessThan(1e-30);
  });

  // OpenStax University Physics vol. 3, ch. 4, single-slit intensity: 550 nm, a 2.00 um: 0.044 at 24.7 degrees, 0.0083 at the third side maximum's midpoint.
  it('single slit intensities through the envelope', () => {
    const at = (degrees: number) => (2000 / 550) * Math.sin((degrees * Math.PI) / 180);
    expect(2 * light(at(24.67), 1, 0)).toBeCloseTo(0.044, 3);
    expect(2 * light(3.5, 1, 0)).toBeCloseTo(1 / (3.5 * Math.PI) ** 2, 10);
  });
});
