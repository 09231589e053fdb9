import { Mark, stateOf } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { OUTCOME_WORDS, RETURN_WORDS, type FrameView } from '@/lib/domain/views';

/** State of the shown reading, who did what, and why it came back. */
export function FrameStory({ frame }: { frame: FrameView }) {
  const { shown } = frame;
  const state = stateOf({ state: frame.state, reading: shown });
  return (
    <div className="mb-3">
      <p className="flex items-center gap-2.5">
        <Mark kind={state.kind} />
        <b>{state.word}</b>
        {shown ? <span className="text-small text-ink-2">reading {shown.number}</span> : null}
      </p>
      {shown?.returned ? (
        <div className="ask mt-2">
          <p className="text-small leading-snug">
            <b>{RETURN_WORDS[shown.returned.reason]}.</b>{' '}
            <span className="text-ink-2">{shown.returned.words}</span>
          </p>
          <p className="mt-1 text-small text-ink-2">
            {shown.returned.by.name}, <When at={shown.returned.at} />
          </p>
        </div>
      ) : null}
      {shown?.signature ? (
        <p className="mt-1 text-small text-ink-2">
          Signed by {shown.signature.personName}, <When at={shown.signature.at} />
          {shown.signature.passwordAt && shown.signature.passwordAt < shown.signature.at ? (
            <>
              , with the password typed <When at={shown.signature.passwordAt} />
            </>
          ) : null}
        </p>
      ) : null}
      {shown?.sentBy && shown.sentAt && !shown.signature ? (
        <p className="mt-1 text-small text-ink-2">
          Sent by {shown.sentBy.name}, <When at={shown.sentAt} />
        </p>
      ) : null}
      {frame.outcome ? (
        <p className="mt-1 text-small text-ink-2">
          Unit: {OUTCOME_WORDS[frame.outcome.outcome].toLowerCase()}, {frame.outcome.by.name}
          {frame.outcome.reason ? `: ${frame.outcome.reason}` : ''}
        </p>
      ) : null}
    </div>
  );
}
