'use client';

import Link from 'next/link';
import { useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import type { ActionAnswer } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';

interface Props {
  askReset: (input: { email: string }) => Promise<ActionAnswer<unknown>>;
}

export function ForgottenForm({ askReset }: Props) {
  const [email, setEmail] = useState('');
  const [problem, setProblem] = useState('');
  const [sent, setSent] = useState(false);
  const [waiting, start] = useTransition();
  const submit = () =>
    start(async () => {
      const answer = await callAction(() => askReset({ email }));
      if (answer.ok) setSent(true);
      else setProblem(answer.fields?.email ?? answer.message);
    });
  return (
    <form
      className="grid gap-5"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <Field
        label="E-mail"
        type="email"
        autoComplete="username"
        required
        value={email}
        error={problem || undefined}
        help={`A link goes to this address if we know it. It works once, for ${LIMITS.resetMinutes} minutes.`}
        onChange={(event) => {
          setEmail(event.target.value);
          setProblem('');
          setSent(false);
        }}
      />
      <Button kind="main" big type="submit" busy={waiting} disabled={sent} className="mt-1.5 w-full">
        {sent ? 'The link is on its way' : 'Mail me a link'}
      </Button>
      <p className="text-small text-ink-2 empty:hidden" role="status">
        {sent
          ? 'If the address is known here, the mail arrives within a few minutes. Another link can be asked for then.'
          : ''}
      </p>
      <Link className="link py-3 text-center text-small text-ink-2" href="/sign-in">
        Back to signing in
      </Link>
    </form>
  );
}
