import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound, redirect } from 'next/navigation';
import { cache } from 'react';
import { RecordBar } from '@/components/reading/record-bar';
import { ReviewDesk } from '@/components/reading/review-desk';
import { PreloadNext } from '@/components/reading/preload-next';
import { buttonClass } from '@/components/ui/button';
import type { SearchParams } from '@/lib/client/address';
import { queueHref, readQueueFilter } from '@/lib/client/queue-address';
import { subjectName } from '@/lib/client/words';
import { RISK_WORDS, type QueueFilter } from '@/lib/domain/review-queue';
import type { Me, ReviewView } from '@/lib/domain/views';
import { can } from '@/lib/domain/permissions';
import { commentsOf, listNames } from '@/lib/server/queries/comments';
import { findReview } from '@/lib/server/queries/review';
import { repeatsOf } from '@/lib/server/queries/repeats';
import { requireMe } from '@/lib/server/session';
import {
  acceptReading,
  addComment,
  answerWithdrawal,
  askWithdrawal,
  chooseReading,
  keepFit,
  returnReading,
  setOutcome,
} from '../../readings/actions';

interface Props {
  params: Promise<{ readingId: string }>;
  searchParams: Promise<SearchParams>;
}

/** The filter comes as the text it has in the address, so that one request looks the reading up once. */
const reviewOf = cache(async (me: Me, id: number, filterText: string): Promise<ReviewView> => {
  if (!Number.isInteger(id) || id < 1) notFound();
  return (await findReview(me, id, JSON.parse(filterText) as QueueFilter)) ?? notFound();
});

export async function generateMetadata({ params, searchParams }: Props): Promise<Metadata> {
  const me = await requireMe('readings.accept');
  const filter = JSON.stringify(readQueueFilter(await searchParams));
  const { frame } = await reviewOf(me, Number((await params).readingId), filter);
  return { title: `Review ${subjectName(frame)}` };
}

export default async function ReviewPage({ params, searchParams }: Props) {
  const me = await requireMe('readings.accept');
  const filter = readQueueFilter(await searchParams);
  const view = await reviewOf(me, Number((await params).readingId), JSON.stringify(filter));
  const hrefOf = (id: number | null) => (id === null ? null : queueHref(`/review/${id}`, filter));
  const reading = view.frame.shown;
  if (!reading) redirect(`/frames/${view.frame.id}`);
  const { queue } = view;
  return (
    <div className="desk-page">
      <RecordBar
        frame={view.frame}
        middle={
          <>
            <Step word="Previous" href={hrefOf(queue.previousId)} />
            <Link className="link px-1 text-ink-2" href={queueHref('/review/queue', filter)} prefetch={false}>
              {queue.at > 0 ? `${queue.at} of ${queue.of} to review` : `${queue.of} to review`}
              <span className="long">
                {filter.risk ? `, ${RISK_WORDS[filter.risk].toLowerCase()}` : ', riskiest first'}
              </span>
            </Link>
            <Step word="Next" href={hrefOf(queue.nextId)} />
          </>
        }
      />
      {queue.nextFrameId && queue.nextId ? (
        <PreloadNext href={queueHref(`/review/${queue.nextId}`, filter)} frameId={queue.nextFrameId} />
      ) : null}
      <ReviewDesk
        key={reading.id}
        view={view}
        nextHref={hrefOf(queue.nextId)}
        previousHref={hrefOf(queue.previousId)}
        reading={reading}
        keepFit={keepFit}
        acceptReading={acceptReading}
        returnReading={returnReading}
        setOutcome={setOutcome}
        withdrawal={{ askWithdrawal, answerWithdrawal }}
        me={{ id: me.id, name: me.name }}
        repeating={{
          repeats: view.frame.subject.kind === 'unit' ? await repeatsOf(view.frame.subject.unitId) : null,
          mayChoose: can(me, 'readings.choose'),
          chooseReading,
        }}
        commenting={{
          comments: await commentsOf(view.frame.id),
          people: can(me, 'comments.add') ? await listNames() : [],
          addComment,
        }}
      />
    </div>
  );
}

function Step({ word, href }: { word: string; href: string | null }) {
  if (href === null) {
    return (
      <span className={buttonClass('quiet')} aria-disabled="true">
        {word}
      </span>
    );
  }
  return (
    <Link className={buttonClass('quiet')} href={href}>
      {word}
    </Link>
  );
}
