import Link from 'next/link';
import { FringeStrip } from '@/components/figures/fringe-strip';
import { Mark, SaidVerdict, type MarkKind } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { spanForMm } from '@/components/figures/strip-scale';
import { ageText, queueHref } from '@/lib/client/queue-address';
import { subjectLine } from '@/lib/client/words';
import { RISK_WORDS, type QueueFilter, type QueueRow, type Risk } from '@/lib/domain/review-queue';

const MARKS: Partial<Record<Risk, MarkKind>> = {
  stop: 'check-stop',
  look: 'check-look',
  moved: 'check-look',
};

interface Props {
  rows: QueueRow[];
  filter: QueueFilter;
  nowMs: number;
}

/** The waiting readings, strips on one scale. */
export function QueueRows({ rows, filter, nowMs }: Props) {
  const spanMm = spanForMm(rows.map(({ reading }) => reading));
  return (
    <div className="rows queue-rows" role="list" aria-label="To review">
      {rows.map((row) => (
        <div role="listitem" key={row.readingId}>
          <Link className="row" href={queueHref(`/review/${row.readingId}`, filter)} prefetch={false}>
            <div className="a">
              <Mark kind={MARKS[row.risk] ?? 'reading-review'} />
              <div>
                <div className="name">{row.name}</div>
                <div className="sub">{subjectLine(row.subject)}</div>
              </div>
              <div>
                <div className="state">{RISK_WORDS[row.risk]}</div>
                <div className="sub">
                  {ageText(row.sentAt, nowMs)}, {row.bench}
                </div>
              </div>
            </div>
            <FringeStrip
              strip={row.reading.strip}
              spanMm={spanMm}
              nm={row.reading.wavelengthNm}
              label={`Fringe strip of ${row.name}`}
            />
            <div className="c">
              {row.reading.wavelengthNm === null ? (
                <span />
              ) : (
                <Quantity
                  value={row.reading.wavelengthNm}
                  expanded={row.reading.expandedNm}
                  medium={row.reading.medium}
                />
              )}
              <span className="because">{row.because}</span>
              <span className="v">
                {row.reading.judgement ? <SaidVerdict verdict={row.reading.judgement.verdict} /> : null}
              </span>
            </div>
          </Link>
        </div>
      ))}
    </div>
  );
}
