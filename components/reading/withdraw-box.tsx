'use client';

import { useRouter } from 'next/navigation';
import { useState, type FormEvent, type ReactNode } from 'react';
import { Mark } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import { Field, TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import { LIMITS } from '@/lib/domain/limits';
import type { PersonRef, ReadingView } from '@/lib/domain/views';
import type { WithdrawalActions } from './actions';

interface Props extends WithdrawalActions {
  reading: ReadingView;
  me: PersonRef;
  mayWithdraw: boolean;
}

type Mode = 'rest' | 'ask' | 'confirmed' | 'declined';

/** Withdrawing an accepted reading, in two halves by two people; and what became of it. */
export function WithdrawBox(props: Props) {
  const { reading, mayWithdraw } = props;
  const { withdrawal } = reading;
  const [mode, setMode] = useState<Mode>('rest');
  const rest = () => setMode('rest');
  if (!withdrawal || (withdrawal.answer && mayWithdraw)) {
    if (!mayWithdraw) return null;
    return (
      <div className="mb-3">
        {withdrawal ? <Told {...props} /> : null}
        {mode === 'ask' ? (
          <AskForm {...props} onBack={rest} />
        ) : (
          <Button kind="quiet" onClick={() => setMode('ask')}>
            Withdraw…
          </Button>
        )}
      </div>
    );
  }
  if (withdrawal.answer) return <Told {...props} />;
  const isMine = withdrawal.askedBy.id === props.me.id;
  return (
    <Box title={`${withdrawal.askedBy.name} asks to withdraw this reading`} text={withdrawal.reason}>
      <p className="mt-1 text-small text-ink-2">
        <When at={withdrawal.askedAt} />.{' '}
        {isMine
          ? 'Another reviewer or QA confirms it; until then it stays accepted.'
          : 'It stays accepted until a second person confirms.'}
      </p>
      {mayWithdraw && mode === 'rest' ? (
        <div className="two-words">
          <Button onClick={() => setMode('declined')}>{isMine ? 'Take it back…' : 'It stays…'}</Button>
          <Button disabled={isMine} onClick={() => setMode('confirmed')}>
            Confirm…
          </Button>
        </div>
      ) : null}
      {mode === 'confirmed' || mode === 'declined' ? (
        <AnswerForm {...props} answer={mode} proposalId={withdrawal.id} onBack={rest} />
      ) : null}
    </Box>
  );
}

function Box({ title, text, children }: { title: string; text: string; children?: ReactNode }) {
  return (
    <div className="ask mb-3">
      <div className="finding">
        <Mark kind="reading-withdrawn" />
        <p>
          <b>{title}.</b> {text}
        </p>
      </div>
      {children}
    </div>
  );
}

/** An answered question. */
function Told({ reading }: Props) {
  const { withdrawal } = reading;
  if (!withdrawal?.answer) return null;
  const { askedBy, reason, answer } = withdrawal;
  return answer.word === 'confirmed' ? (
    <Box title={`Withdrawn by ${askedBy.name} and ${answer.by.name}`} text={reason}>
      <p className="mt-1 text-small text-ink-2">
        <When at={answer.at} />. What was measured and signed stays as it was.
      </p>
    </Box>
  ) : (
    <p className="mb-2 text-small text-ink-2">
      {askedBy.name} asked to withdraw it: {reason} {answer.by.name} left it: {answer.words}
    </p>
  );
}

interface FormProps extends Props {
  onBack: () => void;
}

function AskForm({ reading, askWithdrawal, onBack }: FormProps) {
  const router = useRouter();
  const [reason, setReason] = useState('');
  const [password, setPassword] = useState('');
  const submit = useSubmit<unknown>();
  const ask = (event: FormEvent) => {
    event.preventDefault();
    submit.run(
      () => askWithdrawal({ readingId: reading.id, version: reading.version, reason, password }),
      () => {
        onBack();
        router.refresh();
      },
    );
  };
  return (
    <form className="ask" onSubmit={ask}>
      <TextArea
        label="Why it is to be withdrawn"
        value={reason}
        maxLength={LIMITS.wordsLength}
        error={submit.fields.reason}
        onChange={(event) => setReason(event.target.value)}
      />
      <PasswordField value={password} error={submit.fields.password} onChange={setPassword} />
      <FormFoot
        word="Ask to withdraw it"
        waiting={submit.waiting}
        message={submit.message}
        disabled={!reason.trim() || !password}
        onBack={onBack}
      />
    </form>
  );
}

interface AnswerProps extends FormProps {
  answer: 'confirmed' | 'declined';
  proposalId: number;
}

function AnswerForm({ answer, proposalId, answerWithdrawal, onBack }: AnswerProps) {
  const router = useRouter();
  const [words, setWords] = useState('');
  const [password, setPassword] = useState('');
  const submit = useSubmit<unknown>();
  const confirms = answer === 'confirmed';
  const send = (event: FormEvent) => {
    event.preventDefault();
    submit.run(
      () => answerWithdrawal({ proposalId, answer, words, password }),
      () => {
        onBack();
        router.refresh();
      },
    );
  };
  return (
    <form className="mt-2" onSubmit={send}>
      {confirms ? (
        <PasswordField value={password} error={submit.fields.password} onChange={setPassword} />
      ) : (
        <TextArea
          label="Why it stays"
          value={words}
          maxLength={LIMITS.wordsLength}
          error={submit.fields.words}
          onChange={(event) => setWords(event.target.value)}
        />
      )}
      <FormFoot
        word={confirms ? 'Withdraw it' : 'It stays accepted'}
        waiting={submit.waiting}
        message={submit.message}
        disabled={confirms ? !password : !words.trim()}
        onBack={onBack}
      />
    </form>
  );
}

function PasswordField(props: { value: string; error?: string; onChange: (value: string) => void }) {
  return (
    <Field
      label="Your password signs it"
      type="password"
      autoComplete="current-password"
      value={props.value}
      error={props.error}
      onChange={(event) => props.onChange(event.target.value)}
    />
  );
}
