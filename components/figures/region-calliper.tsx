'use client';

import { useRef, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import {
  kept,
  moveBlade,
  moveCentre,
  moveJaw,
  onRegion,
  stepSize,
  TILT_STEP_DEG,
  turn,
  wrapDeg,
  type Picture,
  type StepSize,
} from '@/lib/client/region';
import type { Region } from '@/lib/domain/reading-result';
import { formatNumber } from '@/lib/quantity/format';
import { ArcScale, Blades, Jaws, type Drawn } from './calliper-parts';

type Part = 'centre' | 'left' | 'right' | 'upper' | 'lower' | 'tilt';

interface Props {
  region: Region;
  picture: Picture;
  /** Displayed px per px of the frame, and the displayed size. */
  zoom: number;
  width: number;
  height: number;
  /** Without it the calliper is only shown. */
  onChange?: (region: Region) => void;
}

/** Where a drag began: the region then, and the pointer on the region's own axes, px of the frame. */
interface Drag {
  part: Part;
  region: Region;
  xPx: number;
  yPx: number;
}

/** New region for a pointer now at (x, y) px of the frame. */
function dragged(drag: Drag, xPx: number, yPx: number): Region {
  const from = onRegion(drag.region, drag.xPx, drag.yPx);
  const to = onRegion(drag.region, xPx, yPx);
  switch (drag.part) {
    case 'centre':
      return moveCentre(drag.region, xPx - drag.xPx, yPx - drag.yPx);
    case 'left':
    case 'right':
      return moveJaw(drag.region, drag.part === 'right' ? 1 : -1, to.alongPx - from.alongPx);
    case 'upper':
    case 'lower':
      return moveBlade(drag.region, drag.part === 'lower' ? 1 : -1, to.acrossPx - from.acrossPx);
    case 'tilt': {
      const angle = Math.atan2(to.acrossPx, to.alongPx) - Math.atan2(from.acrossPx, from.alongPx);
      return turn(drag.region, wrapDeg((angle * 180) / Math.PI));
    }
  }
}

/** One press of an arrow key on a part; null for keys that are not its own. */
function nudged(part: Part, region: Region, key: string, px: StepSize): Region | null {
  const dx = key === 'ArrowRight' ? px : key === 'ArrowLeft' ? -px : 0;
  const dy = key === 'ArrowDown' ? px : key === 'ArrowUp' ? -px : 0;
  if (!dx && !dy) return null;
  switch (part) {
    case 'centre':
      return moveCentre(region, dx, dy);
    case 'left':
    case 'right':
      return moveJaw(region, part === 'right' ? 1 : -1, dx || dy);
    case 'upper':
    case 'lower':
      return moveBlade(region, part === 'lower' ? 1 : -1, dy || dx);
    case 'tilt':
      return turn(region, (dx || dy) * TILT_STEP_DEG);
  }
}

/** Two jaws, two blades and an arc scale over the photo. Every part can be dragged, and moved with the arrow keys. */
export function RegionCalliper({ region, picture, zoom, width, height, onChange }: Props) {
  const svg = useRef<SVGSVGElement>(null);
  const drag = useRef<Drag | null>(null);
  const w = (region.lengthPx / 2) * zoom;
  const h = (region.heightPx / 2) * zoom;
  const drawn: Drawn = { w, h, large: width > 480, angleDeg: region.angleDeg };
  const reach = w + (drawn.large ? 28 : 20);

  const at = (event: PointerEvent): [number, number] => {
    const box = svg.current?.getBoundingClientRect();
    return box ? [(event.clientX - box.left) / zoom, (event.clientY - box.top) / zoom] : [0, 0];
  };
  const change = (next: Region | null) => {
    if (next && onChange) onChange(kept(next, picture));
  };
  const down = (part: Part) => (event: PointerEvent<SVGGElement>) => {
    if (!onChange) return;
    event.preventDefault();
    event.currentTarget.setPointerCapture(event.pointerId);
    event.currentTarget.focus({ preventScroll: true });
    const [xPx, yPx] = at(event);
    drag.current = { part, region, xPx, yPx };
  };
  const move = (event: PointerEvent<SVGGElement>) => {
    if (drag.current) change(dragged(drag.current, ...at(event)));
  };
  const up = () => {
    drag.current = null;
  };
  const press = (part: Part) => (event: KeyboardEvent<SVGGElement>) => {
    const next = nudged(part, region, event.key, stepSize(event));
    if (!next) return;
    event.preventDefault();
    change(next);
  };

  const handle = (
    part: Part,
    name: string,
    now: number,
    text: string,
    place: ReactNode,
    className: string,
  ) => (
    <g
      role="slider"
      tabIndex={onChange ? 0 : -1}
      aria-label={name}
      aria-valuenow={Math.round(now * 100) / 100}
      aria-valuetext={text}
      aria-disabled={onChange ? undefined : true}
      className={`calliper-part ${className}`}
      onPointerDown={down(part)}
      onPointerMove={move}
      onPointerUp={up}
      onPointerCancel={up}
      onKeyDown={press(part)}
    >
      {place}
    </g>
  );
  const length = `length ${formatNumber(region.lengthPx, 0)} px`;
  const tall = `height ${formatNumber(region.heightPx, 0)} px`;
  const inner = Math.min(16, w / 3, h);

  return (
    <svg ref={svg} className="fig calliper" width={width} height={height} role="group" aria-label="Region">
      <g transform={`translate(${region.cxPx * zoom} ${region.cyPx * zoom}) rotate(${region.angleDeg})`}>
        <path
          fillRule="evenodd"
          d={`M${-9 * width} ${-9 * width}h${18 * width}v${18 * width}h${-18 * width}ZM${-w} ${-h}v${2 * h}h${2 * w}v${-2 * h}Z`}
          fill="#000"
          opacity=".38"
          pointerEvents="none"
        />
        {handle(
          'centre',
          'Centre of the region',
          region.cxPx,
          `x ${formatNumber(region.cxPx, 1)}, y ${formatNumber(region.cyPx, 1)} px`,
          <rect x={-w} y={-h} width={2 * w} height={2 * h} fill="transparent" />,
          'move',
        )}
        <Blades {...drawn} />
        {handle(
          'upper',
          'Upper blade',
          region.heightPx,
          tall,
          <rect x={-w} y={-h - 48 + inner} width={2 * w} height={48} fill="transparent" />,
          'across',
        )}
        {handle(
          'lower',
          'Lower blade',
          region.heightPx,
          tall,
          <rect x={-w} y={h - inner} width={2 * w} height={48} fill="transparent" />,
          'across',
        )}
        <Jaws {...drawn} reach={reach} />
        {handle(
          'left',
          'Left jaw',
          region.lengthPx,
          length,
          <rect x={-w - 48 + inner} y={-h - 12} width={48} height={2 * h + 24} fill="transparent" />,
          'along',
        )}
        {handle(
          'right',
          'Right jaw',
          region.lengthPx,
          length,
          <rect x={w - inner} y={-h - 12} width={inner + 12} height={2 * h + 24} fill="transparent" />,
          'along',
        )}
      </g>
      <g transform={`translate(${region.cxPx * zoom} ${region.cyPx * zoom})`}>
        <ArcScale {...drawn} reach={reach} topPx={-region.cyPx * zoom} />
        <g transform={`rotate(${region.angleDeg})`}>
          {handle(
            'tilt',
            'Tilt on the arc scale',
            region.angleDeg,
            `${formatNumber(region.angleDeg, 2)} degrees`,
            <rect
              x={w + 12}
              y={-Math.max(24, h)}
              width={48}
              height={Math.max(48, 2 * h)}
              fill="transparent"
            />,
            'turn',
          )}
        </g>
      </g>
    </svg>
  );
}
