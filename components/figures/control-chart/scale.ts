import type { ChartFinding, OverTimeView } from '@/lib/domain/views';
import { formatDay, formatNumber } from '@/lib/quantity/format';
import { niceStep } from '../stage/stage-layout';

/** A piece of a figure as the chart library takes it. */
export type Dict = Record<string, unknown>;

export const FACE = '"IBM Plex Sans","Helvetica Neue",Arial,sans-serif';
/** Shares of the height: moving range below, individuals above. */
export const RANGE_DOMAIN = [0, 0.21];
export const VALUE_DOMAIN = [0.32, 0.93];

export interface Extent {
  low: number;
  high: number;
}

export function valueExtent(view: OverTimeView): Extent {
  const all = [
    ...view.points.map((p) => p.valueNm),
    ...view.stretches.flatMap((s) => [s.lowerNm ?? s.meanNm, s.upperNm ?? s.meanNm]),
  ];
  // A nominal far from the runs would flatten them; a reference value near them belongs in the picture.
  const low = Math.min(...all);
  const high = Math.max(...all);
  const span = Math.max(high - low, 1e-6);
  const ref = view.referenceNm;
  const near = ref !== null && ref > low - 0.6 * span && ref < high + 0.6 * span;
  const from = near ? Math.min(low, ref) : low;
  const to = near ? Math.max(high, ref) : high;
  return { low: from - 0.1 * (to - from), high: to + 0.1 * (to - from) };
}

export function rangeTop(view: OverTimeView): number {
  return (
    1.12 *
    Math.max(
      1e-6,
      ...view.points.map((p) => p.movingRangeNm ?? 0),
      ...view.stretches.map((s) => s.upperRangeNm ?? 0),
    )
  );
}

/** Tick texts with a true minus and grouped thousands. */
export function yTicks({ low, high }: Extent): { values: number[]; texts: string[] } {
  const step = niceStep((high - low) / 7);
  const places = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const values: number[] = [];
  for (let i = Math.ceil(low / step); i * step <= high; i += 1) values.push(i * step);
  return { values, texts: values.map((v) => formatNumber(v, places)) };
}

/** Dates of about eight runs, and the year at the end. */
export function xTicks(
  view: OverTimeView,
  timeZone: string,
  plotPx: number,
): { values: number[]; texts: string[] } {
  const n = view.points.length;
  const every = Math.max(1, Math.ceil(n / Math.max(2, Math.floor(plotPx / 90))));
  const values: number[] = [];
  for (let i = 0; i < n; i += every) values.push(i + 1);
  return {
    values,
    texts: values.map((run) => formatDay(view.points[run - 1].takenAt, timeZone).replace(/ \d{4}$/, '')),
  };
}

/** Just clear of the run, on the side of the mean. */
export function bracketAt(
  view: OverTimeView,
  f: ChartFinding,
  extent: Extent,
): { at: number; below: boolean } {
  const values = view.points.slice(f.first, f.last + 1).map((p) => p.valueNm);
  const stretch = view.stretches.find((s) => f.first >= s.first && f.first <= s.last);
  const below = values[0] > (stretch?.meanNm ?? values[0]);
  const room = (extent.high - extent.low) * 0.06;
  return { below, at: below ? Math.min(...values) - room : Math.max(...values) + room };
}
