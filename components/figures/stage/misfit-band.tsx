import { memo } from 'react';
import { formatSigned } from '@/lib/quantity/format';
import { dotsPath, type Scale } from './paths';
import type { StagePoint } from './stage-data';

interface Props {
  points: readonly StagePoint[];
  every: number;
  x: Scale;
  width: number;
  from: number;
  to: number;
  goggles: boolean;
}

/** Half the height of the band, in uncertainties. */
const REACH = 4.2;

/** Misfit over its uncertainty: lines at 0 and ±3, a bed at ±2; what lies beyond is drawn at the edge. */
export const MisfitBand = memo(function MisfitBand({ points, every, x, width, from, to, goggles }: Props) {
  const middle = (from + to) / 2;
  const y: Scale = (v) => middle - (Math.max(-REACH, Math.min(REACH, v)) / REACH) * ((to - from) / 2);
  const tone = goggles ? 'var(--edge)' : 'var(--ink)';
  const shown = points.filter((p, i) => p.left || i % every === 0);
  return (
    <g>
      <rect x="0" y={y(2)} width={width} height={y(-2) - y(2)} fill="var(--bed)" />
      {[-3, 0, 3].map((level) => (
        <g key={level}>
          <path
            d={`M0 ${y(level)}H${width}`}
            className={level ? 'l-line' : 'l-edge'}
            strokeDasharray={level ? '2 4' : undefined}
          />
          <text x={width < 640 ? -3 : -8} y={y(level) + 4} textAnchor="end">
            {formatSigned(level, 0)}
          </text>
        </g>
      ))}
      <path
        d={dotsPath(
          shown.filter((p) => !p.left),
          (p) => x(p.mm),
          (p) => y(p.misfit),
        )}
        stroke={tone}
        strokeLinecap="round"
        strokeWidth={goggles ? 4 : 3}
        fill="none"
      />
      {shown
        .filter((p) => p.left)
        .map((p) => (
          <circle
            key={p.mm}
            cx={x(p.mm)}
            cy={y(p.misfit)}
            r="2.2"
            fill="none"
            stroke={tone}
            strokeWidth="1.3"
          />
        ))}
    </g>
  );
});
