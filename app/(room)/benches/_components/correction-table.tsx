import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { When } from '@/components/figures/when';
import { count } from '@/lib/client/words';
import { READING_WORDS } from '@/lib/domain/life-cycle';
import { VERDICT_WORDS } from '@/lib/domain/specification';
import type { CorrectionView } from '@/lib/domain/views';

import { StillMeasuring } from './still-measuring';

type Row = CorrectionView['rows'][number];

/** What a correction would do: every reading of its time with the old and the new value. */
export function CorrectionTable({ correction }: { correction: CorrectionView }) {
  const { total, measured, flips, withoutAnswer, rows } = correction;
  return (
    <div className="mt-4">
      <div className="cap">
        <h3>What it corrects</h3>
        <span>verdicts that change first</span>
      </div>
      <p role="status">
        {count(total, 'reading')} from <When at={correction.from} />{' '}
        {correction.until ? (
          <>
            to <When at={correction.until} />
          </>
        ) : (
          'until now'
        )}
        : {count(flips, 'verdict changes', 'verdicts change')}.
        {measured < total ? ` ${measured} of ${total} have been measured with the new values.` : ''}
        {withoutAnswer ? ` ${withoutAnswer} give no answer with them and stay as they are.` : ''}
      </p>
      {measured < total ? <StillMeasuring /> : null}
      {rows.length ? (
        <div className="correction-rows">
          <table className="figures vals mt-2">
            <thead>
              <tr>
                <th scope="col">Reading</th>
                <th scope="col">State</th>
                <th scope="col" className="num">
                  Now
                </th>
                <th scope="col" className="num">
                  With the new values
                </th>
                <th scope="col">Verdict</th>
              </tr>
            </thead>
            <tbody>
              {rows.map((row) => (
                <CorrectionRow key={row.readingId} row={row} />
              ))}
            </tbody>
          </table>
        </div>
      ) : null}
      {rows.length < total ? (
        <p className="help">
          {rows.length} of {total} are shown.
        </p>
      ) : null}
    </div>
  );
}

function CorrectionRow({ row }: { row: Row }) {
  return (
    <tr>
      <td>
        <Link className="link" href={`/frames/${row.frameId}?reading=${row.readingId}`} prefetch={false}>
          {row.name}
        </Link>
      </td>
      <td className="due">{READING_WORDS[row.status]}</td>
      <td className="num" data-head="now">
        <Value value={row.was} medium={row.medium} />
      </td>
      <td className={row.flips ? 'num moved' : 'num'} data-head="new">
        {row.becomes ? (
          <Value value={row.becomes} medium={row.medium} />
        ) : row.message ? (
          'no answer'
        ) : (
          'to come'
        )}
      </td>
      <td className="due">
        {row.flips ? (
          <span className="flex items-center gap-2">
            <Mark kind={`verdict-${row.becomes?.verdict ?? 'none'}`} />
            {VERDICT_WORDS[row.was.verdict ?? 'none']} becomes{' '}
            {VERDICT_WORDS[row.becomes?.verdict ?? 'none'].toLowerCase()}
          </span>
        ) : (
          (row.message ?? (row.was.verdict ? VERDICT_WORDS[row.was.verdict] : 'none: a reference'))
        )}
      </td>
    </tr>
  );
}

function Value({ value, medium }: { value: Row['was']; medium: Row['medium'] }) {
  if (value.valueNm === null) return 'no value';
  return <Quantity value={value.valueNm} expanded={value.expandedNm} medium={medium} size="cell" />;
}
