'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { signIn } from 'next-auth/react';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';

interface Props {
  next: string;
  /** A new password was just set. */
  reset: boolean;
  /** A page was asked for that needs a session. */
  asked: boolean;
}

export function SignInForm({ next, reset, asked }: Props) {
  const router = useRouter();
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [problem, setProblem] = useState('');
  const [waiting, setWaiting] = useState(false);

  const submit = async () => {
    setWaiting(true);
    const answer = await signIn('credentials', { redirect: false, email, password });
    if (answer?.ok && !answer.error) {
      router.replace(next);
      router.refresh();
      return;
    }
    setWaiting(false);
    setPassword('');
    setProblem(answer?.error ?? 'The service could not be reached. Try again when the network is back.');
  };
  return (
    <form
      className="grid gap-5"
      onSubmit={(event) => {
        event.preventDefault();
        void submit();
      }}
    >
      <p className="text-small text-ink-2 empty:hidden" role="status">
        {reset
          ? 'The new password is set. Sign in with it.'
          : asked
            ? 'Sign in to go on to the page you asked for.'
            : ''}
      </p>
      <Field
        label="E-mail"
        type="email"
        name="email"
        autoComplete="username"
        required
        value={email}
        onChange={(event) => setEmail(event.target.value)}
      />
      <Field
        label="Password"
        type="password"
        name="password"
        autoComplete="current-password"
        required
        value={password}
        error={problem || undefined}
        onChange={(event) => {
          setPassword(event.target.value);
          setProblem('');
        }}
      />
      <p className="only-heard" role="alert">
        {problem}
      </p>
      <Button kind="main" big type="submit" busy={waiting} className="mt-1.5 w-full">
        Sign in
      </Button>
      <Link className="link py-3 text-center text-small text-ink-2" href="/forgotten">
        Forgotten your password?
      </Link>
    </form>
  );
}
