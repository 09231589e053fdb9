import type { Metadata } from 'next';
import Link from 'next/link';
import { redirect } from 'next/navigation';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import { reviewQueue } from '@/lib/server/queries/review-queue';
import { requireMe } from '@/lib/server/session';

export const metadata: Metadata = { title: 'Review' };

/** The first of the queue, or what there is to know when it is empty. */
export default async function Review() {
  await requireMe('readings.accept');
  const [first] = await reviewQueue();
  if (first) redirect(`/review/${first.readingId}`);
  return (
    <div className="page">
      <div className="headline">
        <h1>Review</h1>
      </div>
      <Empty
        title="Nothing waits for review"
        acts={
          <Link className={buttonClass()} href="/frames">
            Go to Frames
          </Link>
        }
      >
        Readings stand here, riskiest first, once a technician has sent them.
      </Empty>
    </div>
  );
}
