import type { Metadata } from 'next';
import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Empty } from '@/components/states/empty';
import type { WithdrawalRow } from '@/lib/domain/withdrawal';
import { listWithdrawals } from '@/lib/server/queries/withdrawals';
import { requireMe } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Withdrawals' };

/** What was asked to be withdrawn and waits for a second person, and what became of the rest. */
export default async function Withdrawals() {
  await requireMe('withdrawals.see');
  const rows = await listWithdrawals();
  return (
    <div className="page pb-10">
      <div className="headline">
        <div className="l">
          <h1>Withdrawals</h1>
          <span className="text-ink-2">of accepted readings; what waits stands first</span>
        </div>
      </div>
      {rows.length ? (
        <div className="plain-list" role="list" aria-label="Withdrawals">
          {rows.map((row) => (
            <Row key={row.id} row={row} />
          ))}
        </div>
      ) : (
        <Empty title="Nothing was withdrawn">
          An accepted reading is withdrawn from its own page: one person asks, a second one confirms.
        </Empty>
      )}
    </div>
  );
}

function Row({ row }: { row: WithdrawalRow }) {
  const confirmed = row.answer?.word === 'confirmed';
  return (
    <div className="list-row withdrawal-row" role="listitem">
      <Mark kind={confirmed ? 'reading-withdrawn' : 'reading-accepted'} />
      <div>
        <Link className="name" href={`/frames/${row.frameId}?reading=${row.readingId}`} prefetch={false}>
          {row.name}
        </Link>
        <div className="sub">reading {row.readingNumber}</div>
      </div>
      <div>
        <div>{row.reason}</div>
        <div className="sub">
          {row.askedBy.name}, <When at={row.askedAt} />
        </div>
      </div>
      <div>
        {row.answer ? (
          <>
            <div>
              {confirmed ? 'Withdrawn' : 'It stays'}
              {row.answer.words ? `: ${row.answer.words}` : ''}
            </div>
            <div className="sub">
              {row.answer.by.name}, <When at={row.answer.at} />
            </div>
          </>
        ) : (
          <b>waits for a second person</b>
        )}
      </div>
    </div>
  );
}
