'use client';

import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import type { ReadingView } from '@/lib/domain/views';
import type { SendToReview } from './actions';

interface Props {
  reading: ReadingView;
  /** An unkept change of the region is on the desk. */
  changed: boolean;
  sendToReview: SendToReview;
}

/** Sends the reading to review; a look goes with a note for the reviewer. */
export function SendBox({ reading, changed, sendToReview }: Props) {
  const router = useRouter();
  const [note, setNote] = useState('');
  const [problem, setProblem] = useState('');
  const [waiting, start] = useTransition();
  const look = reading.word === 'look';
  const stop = reading.word === 'stop';
  const why = changed
    ? 'Keep or drop the change of the region first.'
    : stop
      ? 'A stop cannot be accepted. It can still be sent, so that a reviewer sees it.'
      : look
        ? 'A look goes with a note for the reviewer.'
        : 'A reviewer decides next.';
  const send = () =>
    start(async () => {
      const answer = await callAction(() =>
        sendToReview({ readings: [{ readingId: reading.id, version: reading.version, note }] }),
      );
      if (!answer.ok) setProblem(answer.message);
      else if (answer.value.problems.length) setProblem(answer.value.problems.join(' '));
      else setProblem('');
      router.refresh();
    });
  return (
    <div className="closing">
      {look || stop ? (
        <Field
          label="Note for the reviewer"
          value={note}
          onChange={(event) => setNote(event.target.value)}
          maxLength={1000}
        />
      ) : null}
      <p className="why-not" aria-live="polite">
        {problem ? <b className="text-ink">{problem}</b> : why}
      </p>
      <div className="decide one">
        <Button
          kind={changed ? 'plain' : 'main'}
          busy={waiting}
          disabled={changed || (look && !note.trim())}
          onClick={send}
        >
          Send to review
        </Button>
      </div>
    </div>
  );
}
