'use client';

import { useRef, type KeyboardEvent, type PointerEvent } from 'react';
import { lightRgb } from '@/lib/client/light';
import { useLook } from '@/lib/client/look';
import { stepSize } from '@/lib/client/region';
import { moveEdge, placesOf, pressMm } from '@/lib/client/scan-region';
import { useSize } from '@/lib/client/use-size';
import type { ScanDrawing, ScanRegion } from '@/lib/domain/scan-result';
import { formatNumber } from '@/lib/quantity/format';
import { linePath } from './stage/paths';

interface Props {
  /** null while it is loaded. */
  drawing: ScanDrawing | null;
  /** First and last position of the scan. */
  length: ScanRegion;
  region: ScanRegion;
  /** Wavelength in air that colours the light; null before one is known. */
  nm: number | null;
  label: string;
  /** Without it the jaws are only shown. */
  onChange?: (region: ScanRegion) => void;
}

/** Room beside the scan's ends, so that a jaw there can be held; above and below the light, px. */
const SIDE = 24;
const ABOVE = 26;
const BELOW = 38;
/** The bed is dark in both themes, so the jaws are always bone. */
const BONE = '#f4f0e7';

/** The whole scan as measured on the dark bed, a jaw at each end of the region. Both can be dragged, and moved with the arrow keys. */
export function ScanFigure({ drawing, length, region, nm, label, onChange }: Props) {
  const [measure, size] = useSize<HTMLDivElement>();
  return (
    <div className="shot scan" ref={measure}>
      {size ? (
        <Drawn
          drawing={drawing}
          length={length}
          region={region}
          nm={nm}
          label={label}
          onChange={onChange}
          width={size.width}
          height={size.height}
        />
      ) : null}
    </div>
  );
}

function Drawn({
  drawing,
  length,
  region,
  nm,
  label,
  onChange,
  width,
  height,
}: Props & { width: number; height: number }) {
  const { goggles } = useLook();
  const svg = useRef<SVGSVGElement>(null);
  const span = length.toMm - length.fromMm || 1;
  const mmPerPx = span / Math.max(1, width - 2 * SIDE);
  const x = (mm: number) => SIDE + (mm - length.fromMm) / mmPerPx;
  const [from, to] = [x(region.fromMm), x(region.toMm)];
  const [top, bottom] = [ABOVE, height - BELOW];
  const [r, g, b] = lightRgb(nm, goggles).map((v) => Math.round(255 * v));
  return (
    <svg ref={svg} className="fig calliper" width={width} height={height} role="group" aria-label="Region">
      {drawing ? (
        <Light
          drawing={drawing}
          x={x}
          top={top}
          bottom={bottom}
          colour={`rgb(${r} ${g} ${b})`}
          label={label}
        />
      ) : null}
      <path
        d={`M0 0H${from}V${height}H0ZM${to} 0H${width}V${height}H${to}Z`}
        fill="#000"
        opacity=".38"
        pointerEvents="none"
      />
      <text x={SIDE} y={height - 9} style={{ fill: '#c3bcaf' }}>
        {formatNumber(length.fromMm, 1)}
      </text>
      <text x={width - SIDE} y={height - 9} textAnchor="end" style={{ fill: '#c3bcaf' }}>
        {formatNumber(length.toMm, 1)} mm
      </text>
      <Jaw side={-1} at={from} {...{ region, length, mmPerPx, top, bottom, svg, onChange }} />
      <Jaw side={1} at={to} {...{ region, length, mmPerPx, top, bottom, svg, onChange }} />
    </svg>
  );
}

interface LightProps {
  drawing: ScanDrawing;
  x: (mm: number) => number;
  top: number;
  bottom: number;
  colour: string;
  label: string;
}

/** The measured points as one line, from nothing at the bottom. */
function Light({ drawing, x, top, bottom, colour, label }: LightProps) {
  const { light, xMm } = drawing;
  const most = light.reduce((m, v) => Math.max(m, v), 0) || 1;
  const least = Math.min(0, ...light);
  const y = (v: number) => bottom - ((v - least) / (most - least)) * (bottom - top);
  const points = xMm.map((mm, i) => ({ mm, light: light[i] }));
  return (
    <g role="img" aria-label={label} pointerEvents="none">
      <path d={`M0 ${y(0)}H9999`} stroke="#857e72" strokeWidth="1" />
      <path
        d={linePath(
          points,
          (p) => x(p.mm),
          (p) => y(p.light),
        )}
        fill="none"
        stroke={colour}
        strokeLinejoin="round"
        style={{ strokeWidth: 'calc(1.5px * var(--g))' }}
      />
    </g>
  );
}

interface JawProps {
  side: 1 | -1;
  at: number;
  region: ScanRegion;
  length: ScanRegion;
  mmPerPx: number;
  top: number;
  bottom: number;
  svg: React.RefObject<SVGSVGElement | null>;
  onChange?: (region: ScanRegion) => void;
}

/** An upright jaw with its feet turned outwards and three short strokes where one holds it. */
function Jaw({ side, at, region, length, mmPerPx, top, bottom, svg, onChange }: JawProps) {
  const drag = useRef<{ region: ScanRegion; px: number } | null>(null);
  const here = side === 1 ? region.toMm : region.fromMm;
  const pointer = (event: PointerEvent) => event.clientX - (svg.current?.getBoundingClientRect().left ?? 0);
  const down = (event: PointerEvent<SVGGElement>) => {
    if (!onChange) return;
    event.preventDefault();
    event.currentTarget.setPointerCapture(event.pointerId);
    event.currentTarget.focus({ preventScroll: true });
    drag.current = { region, px: pointer(event) };
  };
  const move = (event: PointerEvent<SVGGElement>) => {
    if (drag.current)
      onChange?.(moveEdge(drag.current.region, side, (pointer(event) - drag.current.px) * mmPerPx));
  };
  const up = () => {
    drag.current = null;
  };
  const press = (event: KeyboardEvent<SVGGElement>) => {
    const sign = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (!sign || !onChange) return;
    event.preventDefault();
    onChange(moveEdge(region, side, sign * pressMm(length) * stepSize(event)));
  };
  const foot = 6 * side;
  const middle = (top + bottom) / 2;
  const jaw = `M${at + foot} ${top - 10}H${at}V${bottom + 8}H${at + foot}`;
  const strokes = [-6, 0, 6].map((dy) => `M${at + 4 * side} ${middle + dy}h${7 * side}`).join('');
  return (
    <g
      role="slider"
      tabIndex={onChange ? 0 : -1}
      aria-label={side === 1 ? 'Right jaw' : 'Left jaw'}
      aria-valuenow={here}
      aria-valuetext={`${side === 1 ? 'to' : 'from'} ${formatNumber(here, placesOf(length))} mm`}
      aria-disabled={onChange ? undefined : true}
      className="calliper-part along"
      onPointerDown={down}
      onPointerMove={move}
      onPointerUp={up}
      onPointerCancel={up}
      onKeyDown={press}
    >
      <rect x={at - 24 + 12 * side} y={top - 12} width={48} height={bottom - top + 24} fill="transparent" />
      <path d={jaw} fill="none" stroke="#000" strokeOpacity=".65" strokeWidth="5" />
      <path d={jaw} fill="none" stroke={BONE} style={{ strokeWidth: 'calc(2.5px * var(--g))' }} />
      <path d={strokes} fill="none" stroke={BONE} style={{ strokeWidth: 'calc(1.5px * var(--g))' }} />
    </g>
  );
}
