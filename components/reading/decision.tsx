'use client';

import { useEffect, useRef, useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import type { ReadingView } from '@/lib/domain/views';
import type { AcceptReading } from './actions';
import type { Refusal } from './keep-change';
import type { Answers } from './look-answers';

interface Props {
  reading: ReadingView;
  answers: Answers;
  /** Why Accept is closed; null when it is open. */
  closed: string | null;
  mayReturn: boolean;
  acceptReading: AcceptReading;
  onReturn: () => void;
  onAccepted: () => void;
  onRefused: (refusal: Refusal | null) => void;
}

/** Return and Accept, apart from each other. Accepting signs, so it asks for the password. */
export function Decision(props: Props) {
  const { closed, mayReturn, onReturn } = props;
  const [signing, setSigning] = useState(false);
  if (signing && closed === null) return <Sign {...props} onBack={() => setSigning(false)} />;
  return (
    <>
      <p className="why-not" aria-live="polite">
        {closed ?? 'Accepting asks for your password.'}
      </p>
      <div className="decide">
        <Button disabled={!mayReturn} onClick={onReturn}>
          Return…
        </Button>
        <Button
          kind={closed === null ? 'main' : 'plain'}
          disabled={closed !== null}
          onClick={() => setSigning(true)}
        >
          Accept
        </Button>
      </div>
    </>
  );
}

function Sign({
  reading,
  answers,
  acceptReading,
  onAccepted,
  onRefused,
  onBack,
}: Props & { onBack: () => void }) {
  const [password, setPassword] = useState('');
  const [wrong, setWrong] = useState('');
  const [waiting, start] = useTransition();
  const form = useRef<HTMLFormElement>(null);
  useEffect(() => form.current?.querySelector('input')?.focus(), []);

  const sign = () =>
    start(async () => {
      const given = Object.entries(answers).flatMap(([check, { answer, reason }]) =>
        answer && reading.findings.some((f) => f.check === check && f.word === 'look')
          ? [{ check, answer, reason }]
          : [],
      );
      const answer = await callAction(() =>
        acceptReading({ readingId: reading.id, version: reading.version, password, answers: given }),
      );
      if (answer.ok) {
        onAccepted();
        return;
      }
      setPassword('');
      if (answer.code === 'WRONG_PASSWORD' || answer.code === 'TOO_MANY' || answer.fields?.password) {
        setWrong(answer.fields?.password ?? answer.message);
      } else onRefused({ code: answer.code, message: answer.message });
    });

  return (
    <form
      ref={form}
      className="mt-3"
      onSubmit={(event) => {
        event.preventDefault();
        sign();
      }}
      onKeyDown={(event) => event.key === 'Escape' && onBack()}
    >
      <Field
        label="Your password signs it"
        type="password"
        autoComplete="current-password"
        value={password}
        error={wrong || undefined}
        onChange={(event) => {
          setPassword(event.target.value);
          setWrong('');
        }}
      />
      <div className="decide mt-3">
        <Button onClick={onBack}>Back</Button>
        <Button kind="main" type="submit" busy={waiting} disabled={!password}>
          Sign and accept
        </Button>
      </div>
    </form>
  );
}
