import { differences, differenceText } from '@/lib/domain/same-digits';

const RESULT = { spacingPx: 110.4, orders: [{ m: 0, xPx: 402.25 }], ms: { total: 40 }, k: null };

test('the same digits are the same, however long the fit took', () => {
  expect(differences(RESULT, { ...RESULT, ms: { total: 99 } })).toEqual([]);
});

test('the last digit of any number is a difference, and says where', () => {
  const next = 402.25 + 2 ** -44;
  const found = differences(RESULT, { ...RESULT, orders: [{ m: 0, xPx: next }] });
  expect(found).toEqual([{ path: 'orders.0.xPx', was: 402.25, is: next }]);
  expect(differenceText(found)).toMatch(/^orders\.0\.xPx 402\.25 became 402\.2500.* \(by 1\.4e-16 of it\)$/);
});

test('what is missing, new or of another kind is a difference', () => {
  expect(differences(RESULT, { ...RESULT, orders: [] }).map(({ path }) => path)).toEqual(['orders.0']);
  expect(differences(RESULT, { ...RESULT, k: 2 }).map(({ path }) => path)).toEqual(['k']);
  expect(differences(RESULT, { ...RESULT, more: 1 }).map(({ path }) => path)).toEqual(['more']);
});
