import { formatNumber } from '@/lib/quantity/format';

/** What is drawn, in displayed px: half length, half height, and whether there is room for larger strokes. */
export interface Drawn {
  w: number;
  h: number;
  large: boolean;
  angleDeg: number;
}

/** The calliper lies on a dark picture in both themes, so it is always bone. */
const BONE = '#f4f0e7';

function Both({ d, width }: { d: string; width: number }) {
  return (
    <>
      <path d={d} fill="none" stroke="#000" strokeOpacity=".65" strokeWidth={width + 2.5} />
      <path d={d} fill="none" stroke={BONE} style={{ strokeWidth: `calc(${width}px * var(--g))` }} />
    </>
  );
}

/** Two blades between the jaws, three short strokes on each part where one holds it. */
export function Blades({ w, h, large }: Drawn) {
  const gap = large ? 10 : 7;
  const length = large ? 10 : 7;
  const strokes = [-6, 0, 6]
    .map((x) => `M${x} ${-h - 3}v${-length}M${x} ${h + 3}v${length}M${-w - 4} ${x}h${-length}`)
    .join('');
  return (
    <g pointerEvents="none">
      <Both d={`M${-w + gap} ${-h}H${w - gap}M${-w + gap} ${h}H${w - gap}${strokes}`} width={1.5} />
    </g>
  );
}

/** Upright jaws, longer than the region, feet turned outwards; the right one carries the tilt's pointer. */
export function Jaws({ w, h, large, reach }: Drawn & { reach: number }) {
  const over = large ? 16 : 11;
  return (
    <g pointerEvents="none">
      <Both
        d={`M${-w - 6} ${-h - over}H${-w}V${h + over}H${-w - 6}M${w + 6} ${-h - over}H${w}V${h + over}H${w + 6}`}
        width={2.5}
      />
      <Both d={`M${w + 4} 0h${reach - w - 6}`} width={2} />
    </g>
  );
}

const ARC_DEG = 12;

/** Arc scale fixed to the picture: a mark each 2°, longer at each 10°, about the nearest whole 20°. `topPx`: the picture's upper edge. */
export function ArcScale({ w, angleDeg, reach, topPx }: Drawn & { reach: number; topPx: number }) {
  const base = Math.round(angleDeg / 20) * 20;
  const point = (r: number, deg: number) => {
    const q = (deg * Math.PI) / 180;
    return `${(r * Math.cos(q)).toFixed(1)} ${(r * Math.sin(q)).toFixed(1)}`;
  };
  const marks = [];
  for (let deg = base - ARC_DEG; deg <= base + ARC_DEG; deg += 2) {
    marks.push(`M${point(reach, deg)}L${point(reach + (deg % 10 ? 4 : 9), deg)}`);
  }
  const top = ((base - ARC_DEG) * Math.PI) / 180;
  return (
    <g pointerEvents="none">
      <Both
        d={`M${point(reach, base - ARC_DEG)}A${reach} ${reach} 0 0 1 ${point(reach, base + ARC_DEG)}${marks.join('')}`}
        width={1.25}
      />
      <text
        x={(w + 13) * Math.cos(top) - 6}
        y={Math.max(topPx + 14, reach * Math.sin(top) - 9)}
        style={{ fill: BONE, paintOrder: 'stroke', stroke: '#000', strokeWidth: 3 }}
      >
        {formatNumber(angleDeg, 2)}°
      </text>
    </g>
  );
}
