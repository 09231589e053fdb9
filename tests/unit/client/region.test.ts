import {
  kept,
  moveBlade,
  moveJaw,
  onRegion,
  rounded,
  sameRegion,
  STEPS,
  stepSize,
  TILT_STEP_DEG,
  turn,
  wrapDeg,
} from '@/lib/client/region';
import type { Region } from '@/lib/domain/reading-result';

const REGION: Region = { cxPx: 500, cyPx: 300, lengthPx: 400, heightPx: 100, angleDeg: 30 };

/** A point of the region's own axes back in px of the frame. */
function frameOf(region: Region, alongPx: number, acrossPx: number): [number, number] {
  const t = (region.angleDeg * Math.PI) / 180;
  return [
    region.cxPx + alongPx * Math.cos(t) - acrossPx * Math.sin(t),
    region.cyPx + alongPx * Math.sin(t) + acrossPx * Math.cos(t),
  ];
}

describe('moving the calliper', () => {
  test('a jaw moves and the other stays', () => {
    const moved = moveJaw(REGION, 1, 50);
    expect(moved.lengthPx).toBe(450);
    const before = frameOf(REGION, -200, 0);
    const after = frameOf(moved, -225, 0);
    expect(after[0]).toBeCloseTo(before[0], 9);
    expect(after[1]).toBeCloseTo(before[1], 9);
  });

  test('a blade moves and the other stays', () => {
    const moved = moveBlade(REGION, -1, -20);
    expect(moved.heightPx).toBe(120);
    const before = frameOf(REGION, 0, 50);
    const after = frameOf(moved, 0, 60);
    expect(after[0]).toBeCloseTo(before[0], 9);
    expect(after[1]).toBeCloseTo(before[1], 9);
  });

  test('a jaw pushed past the other stops at the shortest length', () => {
    expect(moveJaw(REGION, 1, -1000).lengthPx).toBeGreaterThan(0);
  });

  test('a point keeps its place on the axes of the region', () => {
    const [x, y] = frameOf(REGION, 70, -15);
    const back = onRegion(REGION, x, y);
    expect(back.alongPx).toBeCloseTo(70, 9);
    expect(back.acrossPx).toBeCloseTo(-15, 9);
  });

  test('tilt wraps and the centre stays in the picture', () => {
    expect(wrapDeg(190)).toBe(-170);
    expect(wrapDeg(-180)).toBe(180);
    expect(turn(REGION, 340).angleDeg).toBeCloseTo(10, 9);
    const out = kept({ ...REGION, cxPx: -5, cyPx: 9999 }, { widthPx: 1000, heightPx: 600 });
    expect([out.cxPx, out.cyPx]).toEqual([0, 600]);
  });

  test('regions that read the same are the same', () => {
    expect(sameRegion(REGION, { ...REGION, cxPx: 500.004 })).toBe(true);
    expect(sameRegion(REGION, { ...REGION, angleDeg: 30.02 })).toBe(false);
  });

  test('the finest step of each part is a change', () => {
    const fine = STEPS[0];
    expect(sameRegion(REGION, rounded({ ...REGION, cxPx: REGION.cxPx + fine }))).toBe(false);
    expect(sameRegion(REGION, rounded(turn(REGION, fine * TILT_STEP_DEG)))).toBe(false);
    expect(stepSize({ shiftKey: false, altKey: true })).toBe(fine);
    expect(stepSize({ shiftKey: true, altKey: false })).toBe(10);
  });
});
