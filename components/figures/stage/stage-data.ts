/** Turns a reading's curves and orders into mm about the zero order, once for every band of the stage. */
import { onRegion } from '@/lib/client/region';
import { placeStrip, type PlacedStrip } from '@/lib/domain/placed-strip';
import type { ReadingResult } from '@/lib/domain/reading-result';
import { isScanResult, type FitResult, type ScanResult } from '@/lib/domain/scan-result';

export interface StagePoint {
  mm: number;
  data: number;
  fit: number;
  envelope: number;
  misfit: number;
  left: boolean;
}

/** `at`, `u` and `pull` are in the fit's own unit: px of a frame, mm of a scan. */
export interface StageOrder {
  m: number;
  kind: 'bright' | 'dark';
  used: boolean;
  mm: number;
  pullMm: number | null;
  at: number[];
  u: number;
  pull: number | null;
}

export interface StageData {
  points: StagePoint[];
  orders: StageOrder[];
  /** Longest side of the region about the zero order, mm. */
  halfMm: number;
  strip: PlacedStrip;
  unit: 'px' | 'mm';
  /** The largest of data, fit and envelope: the top of the profile. */
  top: number;
}

/** Position of the zero order on the region's long axis, px. */
function zeroAlongPx(result: ReadingResult): number {
  return onRegion(result.region, result.zeroOrder.xPx, result.zeroOrder.yPx).alongPx;
}

export function stageData(result: FitResult, scaleUmPerPx: number): StageData {
  return isScanResult(result) ? scanData(result) : frameData(result, scaleUmPerPx);
}

function frameData(result: ReadingResult, scaleUmPerPx: number): StageData {
  const zero = zeroAlongPx(result);
  const mm = (px: number) => ((px - zero) * scaleUmPerPx) / 1000;
  const points = pointsOf(result.curves, result.curves.alongPx.map(mm));
  const half = result.region.lengthPx / 2;
  return {
    points,
    orders: result.orders.map(({ m, kind, used, xPx, yPx, uPx, pullPx, alongPx }) => ({
      m,
      kind,
      used,
      mm: mm(alongPx),
      pullMm: pullPx === null ? null : (pullPx * scaleUmPerPx) / 1000,
      at: [xPx, yPx],
      u: uPx,
      pull: pullPx,
    })),
    halfMm: Math.max(Math.abs(mm(-half)), Math.abs(mm(half))),
    strip: placeStrip(result.strip, zero, scaleUmPerPx),
    unit: 'px',
    top: topOf(points),
  };
}

function scanData(result: ScanResult): StageData {
  const zero = result.zeroOrder.xMm;
  const points = pointsOf(
    result.curves,
    result.curves.xMm.map((x) => x - zero),
  );
  const { fromMm, toMm } = result.region;
  return {
    points,
    orders: result.orders.map(({ m, kind, used, xMm, uMm, pullMm }) => ({
      m,
      kind,
      used,
      mm: xMm - zero,
      pullMm,
      at: [xMm],
      u: uMm,
      pull: pullMm,
    })),
    halfMm: Math.max(Math.abs(fromMm - zero), Math.abs(toMm - zero)),
    strip: placeStrip(result.strip, zero, 0),
    unit: 'mm',
    top: topOf(points),
  };
}

type CurveValues = Pick<ReadingResult['curves'], 'data' | 'uData' | 'fit' | 'envelope' | 'misfit' | 'left'>;

function pointsOf(curves: CurveValues, places: readonly number[]): StagePoint[] {
  return places.map((mm, i) => ({
    mm,
    data: curves.data[i],
    fit: curves.fit[i],
    envelope: curves.envelope[i],
    // A point left out has no part in the fit, but how far it lies from it is what one wants to see.
    misfit: curves.left[i] === 1 ? (curves.data[i] - curves.fit[i]) / curves.uData[i] : curves.misfit[i],
    left: curves.left[i] === 1,
  }));
}

function topOf(points: readonly StagePoint[]): number {
  return points.reduce((top, p) => Math.max(top, p.data, p.fit, p.envelope), 1e-9);
}
