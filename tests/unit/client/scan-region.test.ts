import { keptInScan, moveEdge, placesOf, pressMm, roundedInScan } from '@/lib/client/scan-region';
import { placeStrip } from '@/lib/domain/placed-strip';

const SCAN = { fromMm: -10, toMm: 9.97 };

test('an edge moves alone and stops at the ends of the scan and before the other edge', () => {
  const region = { fromMm: -4, toMm: 5 };
  expect(moveEdge(region, 1, 0.5)).toEqual({ fromMm: -4, toMm: 5.5 });
  expect(moveEdge(region, -1, 0.5)).toEqual({ fromMm: -3.5, toMm: 5 });
  expect(keptInScan({ fromMm: -40, toMm: 5 }, SCAN, region)).toEqual({ fromMm: -10, toMm: 5 });
  const crossed = keptInScan({ fromMm: 8, toMm: 5 }, SCAN, region);
  expect(crossed.toMm).toBe(5);
  expect(crossed.fromMm).toBeLessThan(5);
  const closed = keptInScan({ fromMm: -4, toMm: -9 }, SCAN, region);
  expect(closed.fromMm).toBe(-4);
  expect(closed.toMm).toBeGreaterThan(-4);
});

test('numbers are as fine as a tenth of one press, but an end of the scan stays what it is', () => {
  expect([pressMm(SCAN), placesOf(SCAN)]).toEqual([0.1, 1]);
  expect(pressMm({ fromMm: 0, toMm: 0.5 })).toBeCloseTo(0.001, 12);
  expect(roundedInScan({ fromMm: -3.1415, toMm: 9.99 }, SCAN)).toEqual({ fromMm: -3.14, toMm: 9.97 });
});

test('strips of frames and of scans come to lie on one scale about the zero order', () => {
  const light = [0, 1, 0, 1];
  expect(placeStrip({ fromPx: -20, stepPx: 10, light }, 5, 100)).toEqual({ fromMm: -2.5, toMm: 1.5, light });
  expect(placeStrip({ fromMm: -2, stepMm: 1, light }, 0.5, 0)).toEqual({ fromMm: -2.5, toMm: 1.5, light });
});
