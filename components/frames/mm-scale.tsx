import { formatSigned } from '@/lib/quantity/format';

/** The one scale of a list's strips, in mm about the zero order. */
export function MmScale({ spanMm }: { spanMm: number }) {
  const half = spanMm / 2;
  const step = half > 60 ? 40 : half > 24 ? 10 : half > 12 ? 5 : half > 5 ? 2 : 1;
  const marks: number[] = [];
  for (let mm = -Math.floor(half / (step / 2)) * (step / 2); mm <= half + 1e-9; mm += step / 2)
    marks.push(mm);
  const at = (mm: number) => `${50 + (100 * mm) / spanMm}%`;
  return (
    <svg className="fig mm" width="100%" height="40" aria-hidden="true">
      {marks.map((mm) => {
        const named = Math.abs(mm / step - Math.round(mm / step)) < 1e-6;
        return (
          <g key={mm}>
            <line x1={at(mm)} x2={at(mm)} y1={named ? 31 : 35} y2="40" className="l-edge" />
            {named ? (
              <text x={at(mm)} y="25" textAnchor="middle" className={mm === 0 ? 't-ink t-500' : undefined}>
                {formatSigned(mm, 0)}
              </text>
            ) : null}
          </g>
        );
      })}
      <text x="-14" y="25" textAnchor="end" className="mm-word">
        mm
      </text>
    </svg>
  );
}
