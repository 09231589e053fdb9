import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { MEDIUM_SHORT } from '@/components/figures/quantity';
import { buttonClass } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { count, subjectName } from '@/lib/client/words';
import { OUTCOME_WORDS, type FrameView } from '@/lib/domain/views';
import { valueText } from './readings-of-frame';

interface Props {
  frame: FrameView;
  done: 'accepted' | 'returned';
  left: number;
  nextHref: string | null;
}

/** What was decided, what became of the unit, and where the queue goes on. */
export function AfterDecision({ frame, done, left, nextHref }: Props) {
  const reading = frame.shown;
  const medium = reading ? MEDIUM_SHORT[reading.medium] : 'air';
  const value = reading && reading.wavelengthNm !== null ? ` at ${valueText(reading)} nm (${medium})` : '';
  const unit = frame.outcome ? `Unit ${OUTCOME_WORDS[frame.outcome.outcome].toLowerCase()}. ` : '';
  const needsOutcome =
    done === 'accepted' &&
    !frame.outcome &&
    reading?.judgement != null &&
    reading.judgement.verdict !== 'within';
  return (
    <Notice
      live
      mark={<Mark kind={done === 'accepted' ? 'reading-accepted' : 'reading-returned'} />}
      title={
        done === 'accepted' ? `${subjectName(frame)} accepted${value}` : `${subjectName(frame)} returned`
      }
      act={
        nextHref ? (
          <div className="flex flex-wrap gap-3">
            {done === 'accepted' ? <WithdrawLink frame={frame} /> : null}
            <Link className={buttonClass('main')} href={nextHref}>
              Next
            </Link>
          </div>
        ) : done === 'accepted' ? (
          <WithdrawLink frame={frame} />
        ) : (
          <Link className={buttonClass()} href="/frames">
            Go to Frames
          </Link>
        )
      }
    >
      {unit}
      {needsOutcome ? 'The unit needs an outcome before the lot is closed. ' : ''}
      {left === 0
        ? 'Nothing is left to review.'
        : `${count(left, 'reading is', 'readings are')} left to review.`}
    </Notice>
  );
}

/** There is no way back but this one. */
function WithdrawLink({ frame }: { frame: FrameView }) {
  return (
    <Link className={buttonClass()} href={`/frames/${frame.id}?reading=${frame.shown?.id ?? ''}`}>
      Withdraw…
    </Link>
  );
}
