'use client';

import { useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { ShortChoice } from '@/components/ui/choice';
import { TextArea } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import { RETURN_REASONS, RETURN_WORDS, type ReadingView, type ReturnReason } from '@/lib/domain/views';
import type { ReturnReading } from './actions';
import type { Refusal } from './keep-change';

interface Props {
  reading: ReadingView;
  name: string;
  returnReading: ReturnReading;
  onDone: () => void;
  onBack: () => void;
  onRefused: (refusal: Refusal | null) => void;
}

/** Why the reading goes back; stands in the place of the checks, the stage stays in sight. */
export function ReturnForm({ reading, name, returnReading, onDone, onBack, onRefused }: Props) {
  const [reason, setReason] = useState<ReturnReason | null>(null);
  const [words, setWords] = useState('');
  const [waiting, start] = useTransition();
  const needsWords = reason === 'another' && !words.trim();
  const send = () =>
    start(async () => {
      if (!reason) return;
      const answer = await callAction(() =>
        returnReading({ readingId: reading.id, version: reading.version, reason, words }),
      );
      if (answer.ok) onDone();
      else onRefused({ code: answer.code, message: answer.message });
    });
  return (
    <div className="sec">
      <div className="cap">
        <h2>Why it goes back</h2>
      </div>
      <div className="two-words" role="group" aria-label="Reason" style={{ marginTop: 0 }}>
        {RETURN_REASONS.map((key) => (
          <ShortChoice key={key} chosen={reason === key} onChoose={() => setReason(key)}>
            {RETURN_WORDS[key]}
          </ShortChoice>
        ))}
      </div>
      <div className="mt-3">
        <TextArea
          label="For the technician"
          rows={3}
          maxLength={1000}
          value={words}
          onChange={(event) => setWords(event.target.value)}
          help={needsWords ? 'Another reason needs words.' : undefined}
        />
      </div>
      <div className="mt-3 grid gap-2">
        <Button kind="main" busy={waiting} disabled={!reason || needsWords} onClick={send}>
          Return {name}
        </Button>
        <Button kind="quiet" onClick={onBack}>
          Back to the reading
        </Button>
      </div>
    </div>
  );
}
