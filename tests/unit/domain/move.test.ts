import { moveFrom, moveNeedsReason } from '@/lib/domain/move';

const FIRST = { valueNm: 635, uNm: 0.4 };

test('a move is told in nm and in u of the first fit', () => {
  const move = moveFrom(FIRST, 635.1);
  expect(move?.nm).toBeCloseTo(0.1, 12);
  expect(move?.inU).toBeCloseTo(0.25, 12);
});

test.each([
  [635.11, false],
  [635.13, true],
  [634.89, false],
  [634.87, true],
])('to %f nm needs a reason beyond 0.3 u: %s', (valueNm, needs) => {
  expect(moveNeedsReason(moveFrom(FIRST, valueNm))).toBe(needs);
});

test('without a u every move needs one; without a value there is no move', () => {
  const first = { valueNm: 635, uNm: null };
  expect(moveNeedsReason(moveFrom(first, 635.0001))).toBe(true);
  expect(moveNeedsReason(moveFrom(first, 635))).toBe(false);
  expect(moveFrom(null, 635)).toBeNull();
  expect(moveFrom(first, null)).toBeNull();
});
