import { judge } from '@/lib/quantity/verdict';
import type { Specification } from '@/lib/domain/specification';

const spec: Specification = {
  name: 'invented',
  nominalNm: 635,
  medium: 'air',
  lowerNm: 630,
  upperNm: 640,
  rule: 'guard-expanded',
  ownGuardNm: null,
  ratio: 1,
  halfToleranceNm: 5,
};

describe('verdict', () => {
  test.each([
    [634.82, 0.357, 'within'],
    [639.29, 0.357, 'undecided'],
    [640.6, 0.357, 'undecided'],
    [640.8, 0.357, 'outside'],
    [629.0, 0.357, 'outside'],
  ])('guard U, %d ± 2·%d', (y, u, verdict) => {
    expect(judge(y, u, null, 2 * u, spec).verdict).toBe(verdict);
  });
  test('a poor bench: no verdict inside, still outside far away', () => {
    // U = 6.9 nm against ± 5 nm: 635 cannot be decided, 656 is outside all the same.
    expect(judge(635, 3.45, null, 6.9, spec).verdict).toBe('no-verdict');
    expect(judge(656, 3.45, null, 6.9, spec).verdict).toBe('outside');
  });
  test('simple acceptance decides up to the limit and wants U at most a third', () => {
    const simple = { ...spec, rule: 'simple' as const, ratio: 1 / 3 };
    expect(judge(639.9, 0.357, null, 0.714, simple).verdict).toBe('within');
    expect(judge(640.1, 0.357, null, 0.714, simple).verdict).toBe('outside');
    expect(judge(635, 0.9, null, 1.8, simple).verdict).toBe('no-verdict');
  });
  test('one limit only', () => {
    const upper = { ...spec, lowerNm: null };
    expect(judge(600, 0.3, null, 0.6, upper).verdict).toBe('within');
    expect(judge(641, 0.3, null, 0.6, upper).verdict).toBe('outside');
    expect(() => judge(1, 1, null, 2, { ...spec, lowerNm: null, upperNm: null })).toThrow(RangeError);
  });
  // JCGM 106:2012: at the acceptance limit T_U − w, one-sided: w = 0 -> 0.5, u -> 0.84134, 1.64485u -> 0.95, 2u -> 0.97725.
  test.each([
    [0, 0.5],
    [1, 0.84134],
    [1.64485, 0.95],
    [2, 0.97725],
  ])('conformity with a guard of %d u', (w, p) => {
    const upper = { ...spec, lowerNm: null, rule: 'simple' as const };
    expect(judge(640 - w * 0.5, 0.5, null, 1, upper).conformity).toBeCloseTo(p, 4);
  });
  // JCGM 106:2012, Zener example (from memory, recomputed): limit −5.40 V, y −5.47, u 0.05 -> 0.92.
  test('conformity below an upper limit of −5.40', () => {
    const zener = { ...spec, lowerNm: null, upperNm: -5.4, rule: 'simple' as const };
    expect(judge(-5.47, 0.05, null, 0.1, zener).conformity).toBeCloseTo(0.91924, 4);
  });
});
