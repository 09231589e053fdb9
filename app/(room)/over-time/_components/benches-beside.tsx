import type { OverTimeView } from '@/lib/domain/views';
import { count } from '@/lib/client/words';
import { formatQuantity, formatSigned, placesFor } from '@/lib/quantity/format';
import { niceStep } from '@/components/figures/stage/stage-layout';

const MIDDLE = 50;

/** Mean of each bench less the reference value: a filled dot, or a ring where the interval misses it. */
export function BenchesBeside({ view }: { view: OverTimeView }) {
  if (!view.benches.length) return null;
  const reach = Math.max(...view.benches.map((b) => Math.abs(b.differenceNm) + (b.expandedNm ?? 0)), 0.01);
  const step = niceStep(reach / 1.6);
  const half = Math.max(reach * 1.08, step * 1.15);
  const x = (nm: number) => `${MIDDLE + (nm / half) * 46}%`;
  const places = Math.max(0, -Math.floor(Math.log10(step)));
  return (
    <section aria-labelledby="beside">
      <h2 id="beside">Benches beside each other</h2>
      <p className="mt-1 mb-3 text-small text-ink-2">
        Mean of the accepted readings, less the {view.referenceIsNominal ? 'nominal' : 'reference value'}; k =
        2, with the setup
      </p>
      <div className="bench-rows">
        {view.benches.map((bench) => (
          <Line key={bench.bench.id} bench={bench} x={x} />
        ))}
      </div>
      <div className="bench-line" style={{ borderBottom: 0, minHeight: 26 }} aria-hidden="true">
        <span />
        <svg className="fig" width="100%" height="26">
          {[-step, 0, step].map((nm) => (
            <text key={nm} x={x(nm)} y="18" textAnchor="middle">
              {nm === 0 ? '0' : formatSigned(nm, places)}
            </text>
          ))}
        </svg>
        <span className="text-right text-axis text-ink-3">nm</span>
      </div>
    </section>
  );
}

function Line({ bench, x }: { bench: OverTimeView['benches'][number]; x: (nm: number) => string }) {
  const u = bench.expandedNm;
  const off = u !== null && Math.abs(bench.differenceNm) > u;
  const places = u === null ? 2 : placesFor(u);
  const text = formatSigned(bench.differenceNm, places);
  const heard = `${bench.bench.name}: ${text} nm${u === null ? '' : ` plus or minus ${formatQuantity(0, u).uncertainty} nm`}${off ? ', off the reference' : ''}`;
  return (
    <div className="bench-line">
      <span>
        <b>{bench.bench.name}</b>
        <small>
          {count(bench.runs, 'run')}
          {off ? ', off' : ''}
        </small>
      </span>
      <svg className="fig" width="100%" height="54" role="img" aria-label={heard}>
        <line x1={x(0)} x2={x(0)} y1="0" y2="54" className="l-edge" />
        {u === null ? null : (
          <g stroke="var(--ink)" style={{ strokeWidth: 'calc(2.25px * var(--g))' }}>
            <line x1={x(bench.differenceNm - u)} x2={x(bench.differenceNm + u)} y1="27" y2="27" />
            <line x1={x(bench.differenceNm - u)} x2={x(bench.differenceNm - u)} y1="21" y2="33" />
            <line x1={x(bench.differenceNm + u)} x2={x(bench.differenceNm + u)} y1="21" y2="33" />
          </g>
        )}
        <circle
          cx={x(bench.differenceNm)}
          cy="27"
          r="6"
          fill={off ? 'var(--ground)' : 'var(--ink)'}
          stroke={off ? 'var(--ink)' : 'var(--ground)'}
          strokeWidth={off ? 2.25 : 1.5}
        />
      </svg>
      <span className="amount">{text}</span>
    </div>
  );
}
