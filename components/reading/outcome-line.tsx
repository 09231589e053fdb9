'use client';

import { useRouter } from 'next/navigation';
import { useId, useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { callAction } from '@/lib/client/call-action';
import { OUTCOME_WORDS, OUTCOMES, type Outcome, type UnitRow } from '@/lib/domain/views';
import type { SetOutcome } from './actions';

interface Props {
  unitId: number;
  outcome: UnitRow['outcome'];
  mayChange: boolean;
  setOutcome: SetOutcome;
  /** In a list: the word stands once over the column, so each row only says it aloud. */
  compactFor?: string;
}

function isOutcome(word: string): word is Outcome {
  return (OUTCOMES as readonly string[]).includes(word);
}

/** What becomes of the unit: its own line, apart from the decision about the fit. */
export function OutcomeLine({ unitId, outcome, mayChange, setOutcome, compactFor }: Props) {
  const router = useRouter();
  const id = useId();
  const kept = outcome?.outcome ?? '';
  const [chosen, setChosen] = useState<string>(kept);
  const [from, setFrom] = useState<string>(kept);
  const [reason, setReason] = useState('');
  const [said, setSaid] = useState('');
  const [waiting, start] = useTransition();
  if (from !== kept) {
    setFrom(kept);
    setChosen(kept);
  }
  if (!mayChange) return <Shown outcome={outcome} compact={compactFor !== undefined} />;
  const changed = chosen !== kept && isOutcome(chosen);
  const save = () =>
    start(async () => {
      if (!isOutcome(chosen)) return;
      const answer = await callAction(() => setOutcome({ unitId, outcome: chosen, reason }));
      setSaid(answer.ok ? `The unit is ${OUTCOME_WORDS[chosen].toLowerCase()}.` : answer.message);
      if (answer.ok) {
        setReason('');
        router.refresh();
      }
    });
  return (
    <div>
      <div className={compactFor ? undefined : 'outcome'}>
        <label htmlFor={id} className={compactFor ? 'only-heard' : undefined}>
          {compactFor ? (
            `Outcome of ${compactFor}`
          ) : (
            <>
              Outcome<small>of the unit</small>
            </>
          )}
        </label>
        <select
          id={id}
          className="field"
          value={chosen}
          disabled={waiting}
          onChange={(event) => setChosen(event.target.value)}
        >
          {kept ? null : <option value="">Not set</option>}
          {OUTCOMES.map((word) => (
            <option key={word} value={word}>
              {OUTCOME_WORDS[word]}
            </option>
          ))}
        </select>
      </div>
      {changed ? (
        <div className="mt-2 grid grid-cols-[minmax(0,1fr)_auto] gap-2">
          <input
            className="field text-small"
            aria-label="Reason for the outcome"
            placeholder="Reason, if any"
            maxLength={1000}
            value={reason}
            onChange={(event) => setReason(event.target.value)}
          />
          <Button busy={waiting} onClick={save}>
            Set
          </Button>
        </div>
      ) : null}
      <p className="only-heard" role="status">
        {said}
      </p>
    </div>
  );
}

/** The outcome as text, for those who do not set it. */
function Shown({ outcome, compact }: { outcome: UnitRow['outcome']; compact: boolean }) {
  const word = outcome ? OUTCOME_WORDS[outcome.outcome] : 'Not set';
  const by = outcome ? `${outcome.by.name}${outcome.reason ? `: ${outcome.reason}` : ''}` : '';
  return (
    <div className={compact ? undefined : 'outcome'}>
      {compact ? null : (
        <span className="label-like">
          Outcome<small>of the unit</small>
        </span>
      )}
      <span className={outcome ? undefined : 'text-ink-3'}>
        {word}
        {by ? <small className="block text-small text-ink-2">{by}</small> : null}
      </span>
    </div>
  );
}
