import { pooledScatter, typeA } from '@/lib/quantity/type-a';

// JCGM 100:2008, 4.4.3 and table 1: twenty temperatures -> mean 100.145, s 1.489, s/√n 0.333, ν 19.
const TABLE_1 = [
  96.9, 98.18, 98.25, 98.61, 99.03, 99.49, 99.56, 99.74, 99.89, 100.07, 100.33, 100.42, 100.68, 100.95,
  101.11, 101.2, 101.57, 101.84, 102.36, 102.72,
];

test('GUM 4.4.3: twenty observations', () => {
  const { mean, s, u, dof } = typeA(TABLE_1);
  expect(mean).toBeCloseTo(100.145, 3);
  expect(Math.abs(s - 1.489)).toBeLessThanOrEqual(0.0005);
  expect(Math.abs(u - 0.333)).toBeLessThanOrEqual(0.0005);
  expect(dof).toBe(19);
});

// NIST/SEMATECH e-Handbook, 2.4.4 gauge study, level 1: five sums of squares with 60 degrees of freedom each -> 0.10290.
test('pooled scatter of the handbook’s gauge study', () => {
  const sums = [0.48115, 0.69209, 0.48483, 1.21752, 0.30076];
  // Groups with these sums of squares about their mean: 61 values of which two lie apart.
  const groups = sums.map((sum) => [...Array<number>(59).fill(0), Math.sqrt(sum / 2), -Math.sqrt(sum / 2)]);
  const pooled = pooledScatter(groups);
  expect(pooled?.dof).toBe(300);
  expect(Math.abs((pooled?.s ?? 0) - 0.1029)).toBeLessThanOrEqual(0.00005);
});

test('one observation has no scatter', () => {
  expect(() => typeA([1])).toThrow(RangeError);
  expect(pooledScatter([[1], [2]])).toBeNull();
});
