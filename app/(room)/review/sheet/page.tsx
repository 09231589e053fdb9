import type { Metadata } from 'next';
import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import type { SearchParams } from '@/lib/client/address';
import { queueHref, readQueueFilter } from '@/lib/client/queue-address';
import { count } from '@/lib/client/words';
import { contactSheet } from '@/lib/server/queries/contact-sheet';
import { passwordCountsUntil } from '@/lib/server/password-proofs';
import { getSessionId, requireMe } from '@/lib/server/session';
import { acceptSheet } from '../../readings/actions';
import { Sheet } from './_components/sheet';

export const metadata: Metadata = { title: 'Contact sheet' };

/** The clean readings side by side, to be looked through and signed together. */
export default async function ContactSheetPage({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const me = await requireMe('readings.accept');
  const filter = readQueueFilter(await searchParams);
  const sheet = await contactSheet(me, filter);
  const until = await passwordCountsUntil(me.id, await getSessionId(), new Date());
  const back = queueHref('/review/queue', filter);
  return (
    <div className="page pb-4">
      <div className="headline">
        <div className="l">
          <h1>Contact sheet</h1>
          <span className="text-ink-2">
            {count(sheet.rows.length, 'clean reading')} within the limits, no look and no stop
            {sheet.barred ? `; ${sheet.barred} more you had a hand in` : ''}
            {sheet.left ? `; ${sheet.left} more on the next sheet` : ''}
          </span>
        </div>
        <div className="acts">
          <Link className={buttonClass()} href={back}>
            The queue
          </Link>
        </div>
      </div>
      {sheet.rows.length ? (
        <Sheet
          key={sheet.rows.map(({ readingId }) => readingId).join()}
          rows={sheet.rows}
          passwordUntil={until?.toISOString() ?? null}
          acceptSheet={acceptSheet}
        />
      ) : (
        <Empty
          title="No clean reading waits for you"
          acts={
            <Link className={buttonClass()} href={back}>
              Show the queue
            </Link>
          }
        >
          What has a look, a stop or a value near a limit is looked at on its own page.
        </Empty>
      )}
    </div>
  );
}
