import { agreementOf } from '@/lib/domain/repeats';

/**
 * The example of the NIST/SEMATECH e-Handbook, 1.3.5.17.1 (Tietjen and Moore 1972): eight readings of uranium, of which
 * Grubbs' test names the largest; G = 2.4687 is stated there. Values from memory.
 */
const URANIUM = [199.31, 199.53, 200.19, 200.82, 201.92, 201.95, 202.18, 245.57];

test('the published example has its outlier, mean and scatter', () => {
  const found = agreementOf(URANIUM);
  expect(found?.outlier).toBe(7);
  const g = (URANIUM[7] - found!.meanNm) / found!.scatterNm!;
  expect(g).toBeCloseTo(2.4687, 3);
});

test('without it the rest belong together', () => {
  expect(agreementOf(URANIUM.slice(0, 7))?.outlier).toBeNull();
});

test.each([
  [[], null],
  [[635], { meanNm: 635, scatterNm: null, outlier: null }],
  [[635, 635], { meanNm: 635, scatterNm: 0, outlier: null }],
  [[1, 1, 1], { meanNm: 1, scatterNm: 0, outlier: null }],
])('%j gives %j', (values, agreement) => {
  expect(agreementOf(values)).toEqual(agreement);
});

test('two values that differ are never called an outlier: nothing tells which', () => {
  expect(agreementOf([600, 700])?.outlier).toBeNull();
});

test('the order of the values changes nothing but the place', () => {
  const turned = [...URANIUM].reverse();
  expect(agreementOf(turned)?.outlier).toBe(0);
  expect(agreementOf(turned)?.scatterNm).toBeCloseTo(agreementOf(URANIUM)!.scatterNm!, 10);
});
