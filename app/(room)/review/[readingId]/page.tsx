import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound, redirect } from 'next/navigation';
import { cache } from 'react';
import { RecordBar } from '@/components/reading/record-bar';
import { ReviewDesk } from '@/components/reading/review-desk';
import { buttonClass } from '@/components/ui/button';
import { subjectName } from '@/lib/client/words';
import type { Me, ReviewView } from '@/lib/domain/views';
import { can } from '@/lib/domain/permissions';
import { commentsOf, listNames } from '@/lib/server/queries/comments';
import { findReview } from '@/lib/server/queries/review';
import { requireMe } from '@/lib/server/session';
import {
  acceptReading,
  addComment,
  answerWithdrawal,
  askWithdrawal,
  keepFit,
  returnReading,
  setOutcome,
} from '../../readings/actions';

interface Props {
  params: Promise<{ readingId: string }>;
}

const reviewOf = cache(async (me: Me, id: number): Promise<ReviewView> => {
  if (!Number.isInteger(id) || id < 1) notFound();
  return (await findReview(me, id)) ?? notFound();
});

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  const me = await requireMe('readings.accept');
  return { title: `Review ${subjectName((await reviewOf(me, Number((await params).readingId))).frame)}` };
}

export default async function ReviewPage({ params }: Props) {
  const me = await requireMe('readings.accept');
  const view = await reviewOf(me, Number((await params).readingId));
  const reading = view.frame.shown;
  if (!reading) redirect(`/frames/${view.frame.id}`);
  const { queue } = view;
  return (
    <div className="desk-page">
      <RecordBar
        frame={view.frame}
        middle={
          <>
            <Step word="Previous" id={queue.previousId} />
            <span className="text-ink-2">
              {queue.at > 0 ? `${queue.at} of ${queue.of} to review` : `${queue.of} to review`}
              <span className="long">, riskiest first</span>
            </span>
            <Step word="Next" id={queue.nextId} />
          </>
        }
      />
      <ReviewDesk
        key={reading.id}
        view={view}
        reading={reading}
        keepFit={keepFit}
        acceptReading={acceptReading}
        returnReading={returnReading}
        setOutcome={setOutcome}
        withdrawal={{ askWithdrawal, answerWithdrawal }}
        me={{ id: me.id, name: me.name }}
        commenting={{
          comments: await commentsOf(view.frame.id),
          people: can(me, 'comments.add') ? await listNames() : [],
          addComment,
        }}
      />
    </div>
  );
}

function Step({ word, id }: { word: string; id: number | null }) {
  if (id === null) {
    return (
      <span className={buttonClass('quiet')} aria-disabled="true">
        {word}
      </span>
    );
  }
  return (
    <Link className={buttonClass('quiet')} href={`/review/${id}`}>
      {word}
    </Link>
  );
}
