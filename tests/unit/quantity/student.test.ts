import { coverageFactor, normalCdf, studentCdf, studentQuantile } from '@/lib/quantity/student';

describe("Student's t", () => {
  // JCGM 100:2008, table G.2 (ν 16 and ∞ seen in print, the rest recomputed with an independent library).
  const table: [number | null, number, number, number][] = [
    [1, 12.71, 13.97, 63.66],
    [2, 4.3, 4.53, 9.92],
    [5, 2.57, 2.65, 4.03],
    [7, 2.36, 2.43, 3.5],
    [10, 2.23, 2.28, 3.17],
    [16, 2.12, 2.17, 2.92],
    [30, 2.04, 2.09, 2.75],
    [50, 2.01, 2.05, 2.68],
    [null, 1.96, 2.0, 2.576],
  ];
  test.each(table)('ν = %p', (dof, t95, t9545, t99) => {
    expect(Math.abs(studentQuantile(0.975, dof) - t95)).toBeLessThanOrEqual(0.0051);
    expect(Math.abs(coverageFactor(dof) - t9545)).toBeLessThanOrEqual(0.0051);
    expect(Math.abs(studentQuantile(0.995, dof) - t99)).toBeLessThanOrEqual(0.0051);
  });
  test('exact values', () => {
    expect(coverageFactor(null)).toBeCloseTo(2, 10);
    expect(normalCdf(1)).toBeCloseTo(0.841344746068543, 13);
    expect(normalCdf(-6)).toBeCloseTo(9.865876450377e-10, 18);
    // ν = 1 is the Cauchy distribution: F(t) = ½ + atan(t)/π.
    for (const t of [-3, -0.2, 0, 0.7, 12])
      expect(studentCdf(t, 1)).toBeCloseTo(0.5 + Math.atan(t) / Math.PI, 12);
    // ν = 2: F(t) = ½ + t / (2√(2 + t²)).
    for (const t of [-3, 0.7, 12])
      expect(studentCdf(t, 2)).toBeCloseTo(0.5 + t / (2 * Math.sqrt(2 + t * t)), 12);
  });
  test('quantile and cumulative function undo each other, also for fractional ν', () => {
    for (const dof of [0.8, 3.7, 19.2, 400.5]) {
      for (const p of [0.01, 0.3, 0.5, 0.9, 0.9999])
        expect(studentCdf(studentQuantile(p, dof), dof)).toBeCloseTo(p, 10);
    }
  });
  test('refuses what is no probability and no degrees of freedom', () => {
    expect(() => studentQuantile(1, 5)).toThrow(RangeError);
    expect(() => studentCdf(1, 0)).toThrow(RangeError);
  });
});
