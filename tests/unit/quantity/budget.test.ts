import { combineBudget, type BudgetInput } from '@/lib/quantity/budget';

const row = (key: string, u: number, sensitivity: number, dof: number | null = null): BudgetInput => ({
  key,
  name: key,
  symbol: '',
  value: null,
  unit: '',
  u,
  known: '',
  dof,
  sensitivity,
});

describe('combining a budget', () => {
  // JCGM 100:2008, H.1 (end gauge): contributions 25, 9.7, 2.9, 16.6 nm -> u 32 nm, ν_eff 16.7, t₉₉(16) 2.92.
  test('GUM H.1', () => {
    const combined = combineBudget([
      row('l_S', 25, 1, 18),
      row('d', 9.66, 1, 25.6),
      row('δα', 0.58e-6, 2.887 / 0.58e-6, 50),
      row('δθ', 0.029, 16.599 / 0.029, 2),
    ]);
    expect(combined.uNm).toBeCloseTo(31.66, 1);
    expect(Math.abs((combined.dof ?? 0) - 16.7)).toBeLessThan(0.1);
  });
  // JCGM 100:2008, G.4.1: 0.25, 0.57, 0.82 % with n = 10, 5, 15 -> 1.03 %, ν_eff 19.0, U₉₅ 2.2 %.
  test('GUM G.4.1', () => {
    const combined = combineBudget([row('a', 0.25, 1, 9), row('b', 0.57, 1, 4), row('c', 0.82, 1, 14)]);
    expect(combined.uNm).toBeCloseTo(1.03, 2);
    expect(combined.dof).toBeCloseTo(18.9987, 3);
  });
  // EA-4/02 S2 (10 kg mass): 22.5, 8.66, 14.4, 5.77, 5.77 mg -> 29.2 to 29.3 mg, k = 2: 58 mg.
  test('EA-4/02 S2, all infinite', () => {
    const combined = combineBudget([22.5, 8.66, 14.4, 5.77, 5.77].map((u, i) => row(String(i), u, 1)));
    expect(combined.uNm).toBeCloseTo(29.244, 2);
    expect(combined.dof).toBeNull();
    expect(combined.k).toBeCloseTo(2, 9);
    expect(combined.rows.reduce((sum, r) => sum + r.share, 0)).toBeCloseTo(1, 12);
  });
  test('rows of one input become one row, with their signs and the smallest degrees of freedom', () => {
    const shared = [
      { ...row('near', 0.3, 2, 8), input: 'thermometer' },
      { ...row('far', 0.3, -1, 5), input: 'thermometer' },
      row('fit', 0.4, 1, 12),
    ];
    const { rows, uNm, dof } = combineBudget(shared);
    expect(rows.map(({ key }) => key)).toEqual(['near+far', 'fit']);
    expect(rows[0]).toMatchObject({ dof: 5, unit: 'nm' });
    expect(rows[0].contributionNm).toBeCloseTo(0.3, 12);
    expect(uNm).toBeCloseTo(0.5, 12);
    expect(dof).toBeCloseTo(0.5 ** 4 / (0.3 ** 4 / 5 + 0.4 ** 4 / 12), 9);
  });
  test('a sensitivity scales and its sign does not matter', () => {
    expect(combineBudget([row('L', 0.3, -1.27)]).uNm).toBeCloseTo(0.381, 12);
  });
  test('a missing number is refused, never carried on', () => {
    expect(() => combineBudget([row('d', Number.NaN, 1)])).toThrow(/d is not a number/);
  });
});
