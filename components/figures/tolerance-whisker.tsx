import { useId, type ReactNode } from 'react';
import type { Judgement, Specification } from '@/lib/domain/specification';
import { formatEntered, formatQuantity } from '@/lib/quantity/format';
import { MEDIUM_SHORT } from './quantity';

/** Where a limit stands, in per cent of the width from the nominal in the middle. */
const LIMIT_AT = 35;
/** Nearer to an edge than this the value has left the scale. */
const EDGE = 4;

interface Props {
  specification: Specification;
  valueNm: number;
  expandedNm: number;
  judgement: Judgement | null;
  /** With the limits and the nominal written under it. */
  named?: boolean;
}

/** A point at a percentage of the width inside which lengths are plain px. */
function At({ x, children }: { x: number; children: ReactNode }) {
  return (
    <svg x={`${x}%`} overflow="visible">
      {children}
    </svg>
  );
}

const stroke = (px: number) => ({ strokeWidth: `calc(${px}px * var(--g))` });

function BrokenAxis({ x, y }: { x: number; y: number }) {
  return (
    <At x={x}>
      <path d={`M-4 ${y}h8`} stroke="var(--ground)" strokeWidth="5" />
      <path
        d={`M-4.6 ${y + 6}l4 -12M.6 ${y + 6}l4 -12`}
        stroke="var(--ink)"
        fill="none"
        style={stroke(1.75)}
      />
    </At>
  );
}

function Square({ x, y, side, verdict }: { x: number; y: number; side: number; verdict: string | null }) {
  const s = side;
  return (
    <At x={x}>
      <rect x={-s - 1.5} y={y - s - 1.5} width={2 * s + 3} height={2 * s + 3} fill="var(--ground)" />
      {verdict === 'within' ? (
        <rect x={-s} y={y - s} width={2 * s} height={2 * s} fill="var(--ink)" />
      ) : (
        <rect
          x={-s + 1}
          y={y - s + 1}
          width={2 * s - 2}
          height={2 * s - 2}
          fill="none"
          stroke="var(--ink)"
          strokeWidth="2"
        />
      )}
      {verdict === 'undecided' ? <path d={`M${-s} ${y - s}v${2 * s}h${2 * s}Z`} fill="var(--ink)" /> : null}
      {verdict === 'no-verdict' ? (
        <path d={`M${-s} ${y}h${2 * s}`} stroke="var(--ink)" strokeWidth="1.25" />
      ) : null}
    </At>
  );
}

const limit = (nm: number | null) => (nm === null ? '' : formatEntered(nm));

function sentence({ specification, valueNm, expandedNm, judgement }: Props): string {
  const medium = MEDIUM_SHORT[specification.medium];
  const limits =
    specification.lowerNm === null
      ? `at most ${limit(specification.upperNm)} nm`
      : specification.upperNm === null
        ? `at least ${limit(specification.lowerNm)} nm`
        : `${limit(specification.lowerNm)} to ${limit(specification.upperNm)} nm`;
  const { value, uncertainty } = formatQuantity(valueNm, expandedNm);
  return `${value} plus or minus ${uncertainty} nm (${medium}) against ${limits}. ${judgement?.because ?? ''}`;
}

/** The measured interval against the tolerance. Drawn in per cent, so it needs no measuring and no script. */
export function ToleranceWhisker(props: Props) {
  const { specification: spec, valueNm, expandedNm, judgement, named = false } = props;
  const hatch = useId();
  const nominal = spec.nominalNm;
  const half = Math.max(
    spec.upperNm === null ? 0 : Math.abs(spec.upperNm - nominal),
    spec.lowerNm === null ? 0 : Math.abs(nominal - spec.lowerNm),
  );
  const at = (nm: number) => 50 + ((nm - nominal) / half) * LIMIT_AT;
  const y = named ? 24 : 15;
  const lower = spec.lowerNm === null ? null : at(spec.lowerNm);
  const upper = spec.upperNm === null ? null : at(spec.upperNm);
  const verdict = judgement?.verdict ?? null;
  const guard = judgement && verdict !== 'no-verdict' ? (judgement.guardNm / half) * LIMIT_AT : 0;
  const from = at(valueNm - expandedNm);
  const to = at(valueNm + expandedNm);
  const side = at(valueNm) > 100 - EDGE ? 1 : at(valueNm) < EDGE ? -1 : 0;
  const limitNear = side > 0 ? (upper ?? 85) : (lower ?? 15);
  const x = side > 0 ? 100 - EDGE : side < 0 ? EDGE : at(valueNm);

  return (
    <svg className={`fig whisker ${named ? 'named' : ''}`} role="img" aria-label={sentence(props)}>
      <defs>
        <pattern id={hatch} width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
          <path d="M0 0V4" stroke="var(--edge)" strokeWidth="1.6" />
        </pattern>
      </defs>
      <line x1={`${lower ?? 0}%`} x2={`${upper ?? 100}%`} y1={y} y2={y} className="l-edge" />
      {guard > 0 && lower !== null ? (
        <rect
          x={`${lower}%`}
          y={y - 6}
          width={`${Math.min(guard, 2 * LIMIT_AT)}%`}
          height="12"
          fill={`url(#${hatch})`}
        />
      ) : null}
      {guard > 0 && upper !== null ? (
        <rect
          x={`${Math.max(upper - guard, 50 - LIMIT_AT)}%`}
          y={y - 6}
          width={`${Math.min(guard, 2 * LIMIT_AT)}%`}
          height="12"
          fill={`url(#${hatch})`}
        />
      ) : null}
      {[lower, upper].map((limit, i) =>
        limit === null ? null : (
          <line
            key={i}
            x1={`${limit}%`}
            x2={`${limit}%`}
            y1={y - 10}
            y2={y + 10}
            stroke="var(--ink-2)"
            style={stroke(1.75)}
          />
        ),
      )}
      <line x1="50%" x2="50%" y1={y - 5} y2={y + 5} stroke="var(--edge)" style={stroke(1.5)} />
      {side !== 0 ? (
        <>
          <line x1={`${limitNear}%`} x2={`${x}%`} y1={y} y2={y} className="l-edge" />
          <BrokenAxis x={(limitNear + x) / 2} y={y} />
        </>
      ) : (
        <Interval from={from} to={to} y={y} lower={lower ?? 15} upper={upper ?? 85} />
      )}
      <Square x={x} y={y} side={named ? 5 : 4.25} verdict={verdict} />
      {named ? <Names spec={spec} lower={lower} upper={upper} /> : null}
    </svg>
  );
}

interface IntervalProps {
  from: number;
  to: number;
  y: number;
  lower: number;
  upper: number;
}

function Interval({ from, to, y, lower, upper }: IntervalProps) {
  const cutLeft = from <= 0.5;
  const cutRight = to >= 99.5;
  const a = cutLeft ? 0.5 : from;
  const b = cutRight ? 99.5 : to;
  return (
    <>
      <line x1={`${a}%`} x2={`${b}%`} y1={y} y2={y} stroke="var(--ground)" strokeWidth="7" />
      <line x1={`${a}%`} x2={`${b}%`} y1={y} y2={y} stroke="var(--ink)" style={stroke(2.25)} />
      {cutLeft ? (
        <BrokenAxis x={lower / 2} y={y} />
      ) : (
        <line x1={`${a}%`} x2={`${a}%`} y1={y - 4} y2={y + 4} stroke="var(--ink)" style={stroke(2.25)} />
      )}
      {cutRight ? (
        <BrokenAxis x={(100 + upper) / 2} y={y} />
      ) : (
        <line x1={`${b}%`} x2={`${b}%`} y1={y - 4} y2={y + 4} stroke="var(--ink)" style={stroke(2.25)} />
      )}
    </>
  );
}

function Names({ spec, lower, upper }: { spec: Specification; lower: number | null; upper: number | null }) {
  return (
    <g textAnchor="middle">
      {lower === null || spec.lowerNm === null ? null : (
        <text x={`${lower}%`} y="56">
          {limit(spec.lowerNm)}
        </text>
      )}
      <text x="50%" y="56">
        {limit(spec.nominalNm)} nm ({MEDIUM_SHORT[spec.medium]})
      </text>
      {upper === null || spec.upperNm === null ? null : (
        <text x={`${upper}%`} y="56">
          {limit(spec.upperNm)}
        </text>
      )}
    </g>
  );
}
