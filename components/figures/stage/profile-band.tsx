import { memo } from 'react';
import type { StagePoint } from './stage-data';
import { dotsPath, linePath, type Scale } from './paths';

interface Props {
  points: readonly StagePoint[];
  /** Every how many-th point is drawn as a dot. */
  every: number;
  top: number;
  /** How high the brightest fringe stands, in words. */
  peak: string;
  x: Scale;
  width: number;
  from: number;
  to: number;
  goggles: boolean;
}

/** Data as dots, the fit as a solid line in the light's colour, the envelope dashed. */
export const ProfileBand = memo(function ProfileBand({
  points,
  every,
  top,
  peak,
  x,
  width,
  from,
  to,
  goggles,
}: Props) {
  const head = from + 6;
  const y: Scale = (v) => to - (v / top) * (to - head);
  const tone = goggles ? 'var(--edge)' : 'var(--ink)';
  const shown = points.filter((p, i) => p.left || i % every === 0);
  return (
    <g>
      {[0.25, 0.5, 0.75].map((share) => (
        <path key={share} d={`M0 ${y(share * top)}H${width}`} className="l-line" />
      ))}
      <path d={`M0 ${to}H${width}`} className="l-edge" />
      <text x="0" y={head + 10} className="s14">
        {peak}
      </text>
      <path
        d={linePath(
          points,
          (p) => x(p.mm),
          (p) => y(p.envelope),
        )}
        fill="none"
        stroke="var(--ink-2)"
        strokeDasharray="5 4"
        style={{ strokeWidth: 'calc(1.25px * var(--g))' }}
      />
      <path
        d={linePath(
          points,
          (p) => x(p.mm),
          (p) => y(p.fit),
        )}
        fill="none"
        stroke="var(--light-line)"
        strokeLinejoin="round"
        style={{ strokeWidth: 'calc(2.25px * var(--g))' }}
      />
      <path
        d={dotsPath(
          shown.filter((p) => !p.left),
          (p) => x(p.mm),
          (p) => y(p.data),
        )}
        stroke={tone}
        strokeLinecap="round"
        strokeWidth={goggles ? 4.2 : 3.4}
        fill="none"
      />
      {shown
        .filter((p) => p.left)
        .map((p) => (
          <circle
            key={p.mm}
            cx={x(p.mm)}
            cy={y(p.data)}
            r="2"
            fill="var(--ground)"
            stroke={tone}
            strokeWidth="1.3"
          />
        ))}
    </g>
  );
});
