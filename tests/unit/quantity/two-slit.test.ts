import {
  fringesInCentralLobe,
  highestOrder,
  isMissingOrder,
  orderAngleDeg,
  orderHeight,
  orderPositionMm,
  spacingPx,
  wavelengthFromSpacing,
} from '@/lib/quantity/two-slit';

// Worked examples of OpenStax, University Physics vol. 3 (UP), chapters 3 and 4, and College Physics 2e (CP),
// chapter 27. Tolerance: half a unit of the last printed digit.
describe('two-slit relations', () => {
  test('UP ex. 3.1: d 0.0100 mm, m 3 at 10.95° -> 633 nm', () => {
    const wavelengthNm = (10 * 1000 * Math.sin((10.95 * Math.PI) / 180)) / 3;
    expect(wavelengthNm).toBeCloseTo(633.174, 2);
    expect(orderAngleDeg(3, wavelengthNm, 10)).toBeCloseTo(10.95, 9);
  });
  test('UP ex. 3.2: highest order 15', () => expect(highestOrder(633, 10)).toBe(15));
  test('UP check: orders 1 and 2 at 3.63° and 7.27°', () => {
    expect(orderAngleDeg(1, 633, 10)).toBeCloseTo(3.63, 2);
    expect(orderAngleDeg(2, 633, 10)).toBeCloseTo(7.27, 2);
  });
  test('UP: 633 nm, d 0.0800 mm, 3.00 m -> 2.37 cm; in water 1.78 cm', () => {
    expect(spacingPx(633, 80, 3000, 1000)).toBeCloseTo(23.738, 2); // 1 px is 1 mm here
    expect(spacingPx(633 / 1.33, 80, 3000, 1000)).toBeCloseTo(17.848, 2);
  });
  test('UP / CP: 7.50 mm, 2.00 m, 0.120 mm -> 450 nm', () => {
    expect(
      wavelengthFromSpacing({ spacingPx: 7.5, scaleUmPerPx: 1000, separationUm: 120, distanceMm: 2000 }),
    ).toBeCloseTo(450, 9);
  });
  test('UP: 5th maximum 2.8 cm off axis, 1.5 m, 0.15 mm: 560 nm for small angles, 559.90 exactly', () => {
    const small = (0.15 * 28 * 1e6) / (5 * 1500);
    expect(small).toBeCloseTo(560.0, 1);
    const exact = (0.15e6 * Math.sin(Math.atan(28 / 1500))) / 5;
    expect(exact).toBeCloseTo(559.9, 2);
    expect(orderPositionMm(5, exact, 150, 1500)).toBeCloseTo(28, 9);
  });
  test('UP ex. 4.3: w = 2λ, d = 6λ: I(1) 0.684 I₀, order 3 missing', () => {
    expect(orderHeight(1, 6, 2)).toBeCloseTo(0.684, 3);
    expect(orderHeight(2, 6, 2)).toBeCloseTo(0.17098, 5);
    expect(isMissingOrder(3, 6, 2)).toBe(true);
    expect(isMissingOrder(2, 6, 2)).toBe(false);
  });
  test('UP ex. 4.4: w 0.020 mm, d 0.20 mm: 19 bright fringes, orders 10 and 20 missing, 20 at 2.87°', () => {
    expect(fringesInCentralLobe(200, 20)).toBe(19);
    expect(isMissingOrder(10, 200, 20) && isMissingOrder(-10, 200, 20) && isMissingOrder(20, 200, 20)).toBe(
      true,
    );
    expect(orderAngleDeg(20, 500, 200)).toBeCloseTo(2.87, 2);
  });
  test('UP: w 2.5 µm, d 5.0 µm: 3 fringes; d/w = 5: 9 fringes', () => {
    expect(fringesInCentralLobe(5, 2.5)).toBe(3);
    expect(fringesInCentralLobe(5, 1)).toBe(9);
  });
  test('there is no order beyond 90°', () => expect(orderPositionMm(16, 633, 10, 100)).toBeNaN());
  test('the bench of the documentation: 635 nm, 250 µm, 500 mm, 3.450 µm/px -> 368.1 px', () => {
    expect(spacingPx(635, 250, 500, 3.45)).toBeCloseTo(368.1, 1);
  });
});
