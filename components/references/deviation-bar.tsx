interface Props {
  deviationNm: number;
  expandedNm: number;
  limitNm: number;
  /** Half the width of the scale, nm. */
  reachNm: number;
  inside: boolean;
}

/** A deviation with its interval against the limits, about zero in the middle. */
export function DeviationBar({ deviationNm, expandedNm, limitNm, reachNm, inside }: Props) {
  const at = (nm: number) => 50 + Math.max(-48, Math.min(48, (nm / reachNm) * 48));
  const y = 13;
  const bold = { strokeWidth: 'calc(2.25px * var(--g))' };
  return (
    <svg className="fig deviation" aria-hidden="true">
      <line x1={`${at(-limitNm)}%`} x2={`${at(limitNm)}%`} y1={y} y2={y} className="l-edge" />
      {[-limitNm, limitNm].map((limit) => (
        <line
          key={limit}
          x1={`${at(limit)}%`}
          x2={`${at(limit)}%`}
          y1={y - 9}
          y2={y + 9}
          stroke="var(--ink-2)"
          style={{ strokeWidth: 'calc(1.75px * var(--g))' }}
        />
      ))}
      <line x1="50%" x2="50%" y1={y - 5} y2={y + 5} stroke="var(--edge)" style={bold} />
      <line
        x1={`${at(deviationNm - expandedNm)}%`}
        x2={`${at(deviationNm + expandedNm)}%`}
        y1={y}
        y2={y}
        stroke="var(--ink)"
        style={bold}
      />
      <svg x={`${at(deviationNm)}%`} y={y} overflow="visible">
        <path
          d="M0 -6L6 0L0 6L-6 0Z"
          fill={inside ? 'var(--ink)' : 'var(--ground)'}
          stroke="var(--ink)"
          strokeWidth="2"
        />
      </svg>
    </svg>
  );
}
