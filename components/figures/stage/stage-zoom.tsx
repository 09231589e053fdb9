'use client';

import type { AxisView } from './stage-layout';

export interface Zoom {
  factor: number;
  middleMm: number;
}

const MOST = 16;

/** The part of the axis a zoom shows; at factor 1 the zero order stands in the middle. */
export function zoomed(halfMm: number, zoom: Zoom): AxisView {
  const half = halfMm / zoom.factor;
  const middle = Math.max(half - halfMm, Math.min(halfMm - half, zoom.middleMm));
  return { fromMm: middle - half, toMm: middle + half };
}

interface Props {
  zoom: Zoom;
  halfMm: number;
  onZoom: (zoom: Zoom) => void;
  top: number;
}

/** Closer, wider and along the axis, as words; the arrows of a keyboard reach them by tab. */
export function StageZoom({ zoom, halfMm, onZoom, top }: Props) {
  const factor = (next: number) => onZoom({ ...zoom, factor: Math.max(1, Math.min(MOST, next)) });
  const move = (share: number) => {
    const view = zoomed(halfMm, zoom);
    onZoom({ ...zoom, middleMm: (view.fromMm + view.toMm) / 2 + (share * halfMm) / zoom.factor });
  };
  const word = (text: string, label: string, act: () => void, off: boolean) => (
    <button type="button" className="stage-word" aria-label={label} onClick={act} disabled={off}>
      {text}
    </button>
  );
  return (
    <div className="stage-zoom" role="group" aria-label="Part of the axis shown" style={{ top }}>
      {zoom.factor > 1 ? word('‹', 'Along the axis to the left', () => move(-0.5), false) : null}
      {zoom.factor > 1 ? word('›', 'Along the axis to the right', () => move(0.5), false) : null}
      {word('−', 'Show more of the axis', () => factor(zoom.factor / 2), zoom.factor <= 1)}
      {word('+', 'Show less of the axis, larger', () => factor(zoom.factor * 2), zoom.factor >= MOST)}
    </div>
  );
}
