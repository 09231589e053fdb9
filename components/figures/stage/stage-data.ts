/** Turns a reading's curves and orders into mm about the zero order, once for every band of the stage. */
import { onRegion } from '@/lib/client/region';
import type { OrderCentre, ReadingResult } from '@/lib/domain/reading-result';

export interface StagePoint {
  mm: number;
  data: number;
  fit: number;
  envelope: number;
  misfit: number;
  left: boolean;
}

export interface StageOrder extends OrderCentre {
  mm: number;
  pullMm: number | null;
}

export interface StageData {
  points: StagePoint[];
  orders: StageOrder[];
  /** Longest side of the region about the zero order, mm. */
  halfMm: number;
  /** The largest of data, fit and envelope: the top of the profile. */
  top: number;
}

/** Position of the zero order on the region's long axis, px. */
export function zeroAlongPx(result: ReadingResult): number {
  return onRegion(result.region, result.zeroOrder.xPx, result.zeroOrder.yPx).alongPx;
}

export function stageData(result: ReadingResult, scaleUmPerPx: number): StageData {
  const zero = zeroAlongPx(result);
  const mm = (px: number) => ((px - zero) * scaleUmPerPx) / 1000;
  const { curves } = result;
  const points = curves.alongPx.map((px, i) => ({
    mm: mm(px),
    data: curves.data[i],
    fit: curves.fit[i],
    envelope: curves.envelope[i],
    // A point left out has no part in the fit, but how far it lies from it is what one wants to see.
    misfit: curves.left[i] === 1 ? (curves.data[i] - curves.fit[i]) / curves.uData[i] : curves.misfit[i],
    left: curves.left[i] === 1,
  }));
  const half = result.region.lengthPx / 2;
  return {
    points,
    orders: result.orders.map((order) => ({
      ...order,
      mm: mm(order.alongPx),
      pullMm: order.pullPx === null ? null : (order.pullPx * scaleUmPerPx) / 1000,
    })),
    halfMm: Math.max(Math.abs(mm(-half)), Math.abs(mm(half))),
    top: points.reduce((top, p) => Math.max(top, p.data, p.fit, p.envelope), 1e-9),
  };
}
