import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { FrameDesk } from '@/components/reading/frame-desk';
import { RecordBar } from '@/components/reading/record-bar';
import { buttonClass } from '@/components/ui/button';
import { idParam, type SearchParams } from '@/lib/client/address';
import { subjectName } from '@/lib/client/words';
import { can } from '@/lib/domain/permissions';
import { commentsOf, listNames } from '@/lib/server/queries/comments';
import { findFrame, mayFor } from '@/lib/server/queries/frames';
import { repeatsOf } from '@/lib/server/queries/repeats';
import { requireMe } from '@/lib/server/session';
import { enterFrameConditions } from '../../conditions/actions';
import {
  addComment,
  answerWithdrawal,
  askWithdrawal,
  chooseReading,
  keepFit,
  sendToReview,
} from '../../readings/actions';
import { StillMoving } from './_components/still-moving';

interface Props {
  params: Promise<{ id: string }>;
  searchParams: Promise<SearchParams>;
}

async function frameOf({ params, searchParams }: Props) {
  const id = Number((await params).id);
  if (!Number.isInteger(id) || id < 1) notFound();
  return (await findFrame(id, idParam(await searchParams, 'reading'))) ?? notFound();
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  await requireMe('frames.see');
  return { title: subjectName(await frameOf(props)) };
}

export default async function FramePage(props: Props) {
  const me = await requireMe('frames.see');
  const frame = await frameOf(props);
  const inReview = frame.shown?.status === 'review' && can(me, 'readings.accept');
  return (
    <div className="desk-page">
      <RecordBar
        frame={frame}
        middle={
          <>
            <Link className={buttonClass('quiet')} href="/frames">
              All frames
            </Link>
            {inReview && frame.shown ? (
              <Link className={buttonClass('quiet')} href={`/review/${frame.shown.id}`}>
                Review it
              </Link>
            ) : null}
          </>
        }
      />
      <StillMoving frameId={frame.id} state={frame.state} />
      <FrameDesk
        frame={frame}
        me={{ id: me.id, name: me.name }}
        may={await mayFor(me, frame)}
        keepFit={keepFit}
        sendToReview={sendToReview}
        withdrawal={{ askWithdrawal, answerWithdrawal }}
        repeating={{
          repeats: frame.subject.kind === 'unit' ? await repeatsOf(frame.subject.unitId) : null,
          mayChoose: can(me, 'readings.choose'),
          chooseReading,
        }}
        commenting={{
          comments: await commentsOf(frame.id),
          people: can(me, 'comments.add') ? await listNames() : [],
          addComment,
        }}
        enterConditions={enterFrameConditions}
      />
    </div>
  );
}
