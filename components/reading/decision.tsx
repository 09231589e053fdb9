'use client';

import { useEffect, useRef, useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import { useRecentPassword } from '@/lib/client/use-recent-password';
import type { ReadingView } from '@/lib/domain/views';
import type { AcceptReading } from './actions';
import type { Refusal } from './keep-change';
import type { Answers } from './look-answers';

interface Props {
  reading: ReadingView;
  answers: Answers;
  /** Why the value was moved, where that is still to be said. */
  moveReason: string;
  /** Why Accept is closed; null when it is open. */
  closed: string | null;
  /** Until when a password typed before still signs. */
  passwordUntil: string | null;
  mayReturn: boolean;
  acceptReading: AcceptReading;
  onReturn: () => void;
  onAccepted: () => void;
  onRefused: (refusal: Refusal | null) => void;
}

/** Return and Accept, apart from each other. Accepting signs, so it asks for the password or a recent one. */
export function Decision(props: Props) {
  const { closed, mayReturn, onReturn, passwordUntil } = props;
  const [signing, setSigning] = useState(false);
  const recent = useRecentPassword(passwordUntil);
  if (signing && closed === null) return <Sign {...props} recent={recent} onBack={() => setSigning(false)} />;
  return (
    <>
      <p className="why-not" aria-live="polite">
        {closed ??
          (recent ? `Accepting signs; ${passwordWords(passwordUntil)}` : 'Accepting asks for your password.')}
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

/** "the password you typed counts until 09:47." */
function passwordWords(until: string | null): string {
  const at = until ? new Date(until).toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit' }) : '';
  return `the password you typed counts until ${at}.`;
}

type SignProps = Props & { recent: boolean; onBack: () => void };

function Sign(props: SignProps) {
  const {
    reading,
    answers,
    moveReason,
    passwordUntil,
    recent,
    acceptReading,
    onAccepted,
    onRefused,
    onBack,
  } = props;
  const [password, setPassword] = useState('');
  const [wrong, setWrong] = useState('');
  const [waiting, start] = useTransition();
  const form = useRef<HTMLFormElement>(null);
  // The service may know better than this page that the time is over.
  const [refused, setRefused] = useState(false);
  const typed = !recent || refused;
  useEffect(() => form.current?.querySelector<HTMLElement>('input, [type=submit]')?.focus(), [typed]);

  const sign = () =>
    start(async () => {
      const given = Object.entries(answers).flatMap(([check, { answer, reason }]) =>
        answer && reading.findings.some((f) => f.check === check && f.word === 'look')
          ? [{ check, answer, reason }]
          : [],
      );
      const answer = await callAction(() =>
        acceptReading({
          readingId: reading.id,
          version: reading.version,
          password,
          answers: given,
          moveReason,
        }),
      );
      if (answer.ok) {
        onAccepted();
        return;
      }
      setPassword('');
      setRefused(true);
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
      {typed ? (
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
      ) : (
        <p className="text-small text-ink-2">
          You sign with your name; {passwordWords(passwordUntil)} The signature says so.
        </p>
      )}
      <div className="decide mt-3">
        <Button onClick={onBack}>Back</Button>
        <Button kind="main" type="submit" busy={waiting} disabled={typed && !password}>
          Sign and accept
        </Button>
      </div>
    </form>
  );
}
