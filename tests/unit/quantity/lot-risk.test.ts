import type { Specification } from '@/lib/domain/specification';
import { lotRisk } from '@/lib/quantity/lot-risk';

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
const units = (values: number[], uNm = 0.35) =>
  values.map((valueNm) => ({ valueNm, uNm, expandedNm: 2 * uNm }));
const near = (middle: number) => units([-2, -1.5, -1, -0.5, 0, 0, 0.5, 1, 1.5, 2].map((by) => middle + by));

test('a lot in the middle of its tolerance risks next to nothing', () => {
  const risk = lotRisk(near(635), spec);
  expect(risk?.units).toBe(10);
  expect(risk?.consumer).toBeLessThan(1e-4);
  expect(risk?.guardNm).toBeCloseTo(0.7, 12);
});

test('near a limit: a guard band takes the risk from the consumer and gives it to the producer', () => {
  const guarded = lotRisk(near(639), spec);
  const simple = lotRisk(near(639), { ...spec, rule: 'simple' });
  expect(guarded!.consumer).toBeLessThan(simple!.consumer / 5);
  expect(guarded!.producer).toBeGreaterThan(3 * simple!.producer);
  expect(guarded!.nonconforming).toBeCloseTo(simple!.nonconforming, 9);
});

test('one limit only, and too few units to say anything', () => {
  expect(lotRisk(near(639), { ...spec, lowerNm: null })!.consumer).toBeGreaterThan(0);
  expect(lotRisk(near(635).slice(1), spec)).toBeNull();
  expect(lotRisk(units(Array<number>(12).fill(635)), spec)).toBeNull();
});
