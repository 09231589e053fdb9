'use client';

import { useRouter } from 'next/navigation';
import { signIn } from 'next-auth/react';
import { useState, useTransition } from 'react';
import { PasswordPair, pairProblem } from '@/components/door/password-pair';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  createFirstAdmin: (input: {
    name: string;
    email: string;
    password: string;
  }) => Promise<ActionAnswer<unknown>>;
}

export function FirstAdminForm({ createFirstAdmin }: Props) {
  const router = useRouter();
  const [name, setName] = useState('');
  const [email, setEmail] = useState('');
  const [pair, setPair] = useState({ password: '', again: '' });
  const [wrong, setWrong] = useState<Record<string, string>>({});
  const [waiting, start] = useTransition();
  const submit = () => {
    const password = pairProblem(pair);
    setWrong(password ? { password } : {});
    if (password) return;
    start(async () => {
      const answer = await callAction(() => createFirstAdmin({ name, email, password: pair.password }));
      if (!answer.ok) {
        setWrong(answer.fields ?? { form: answer.message });
        return;
      }
      await signIn('credentials', { redirect: false, email, password: pair.password });
      router.replace('/');
      router.refresh();
    });
  };
  return (
    <form
      className="grid gap-5"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <p className="text-ink-2">
        Nobody is here yet. The first person becomes the admin, who enters the others.
      </p>
      <Field
        label="Your name"
        autoComplete="name"
        required
        value={name}
        error={wrong.name}
        onChange={(event) => setName(event.target.value)}
      />
      <Field
        label="E-mail"
        type="email"
        autoComplete="username"
        required
        value={email}
        error={wrong.email}
        onChange={(event) => setEmail(event.target.value)}
      />
      <PasswordPair pair={pair} onChange={setPair} problem={wrong.password ?? ''} />
      {wrong.form ? (
        <p className="help wrong" role="alert">
          {wrong.form}
        </p>
      ) : null}
      <Button kind="main" big type="submit" busy={waiting} className="mt-1.5 w-full">
        Start
      </Button>
    </form>
  );
}
