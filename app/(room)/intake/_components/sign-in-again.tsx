'use client';

import { signIn } from 'next-auth/react';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { Field } from '@/components/ui/field';

interface Props {
  open: boolean;
  email: string;
  onClose: () => void;
  onSignedIn: () => void;
}

/** The session ended while frames were on their way: sign in here, so that the list is not lost. */
export function SignInAgain({ open, email, onClose, onSignedIn }: Props) {
  const [password, setPassword] = useState('');
  const [problem, setProblem] = useState('');
  const [waiting, setWaiting] = useState(false);
  const submit = async () => {
    setWaiting(true);
    const answer = await signIn('credentials', { redirect: false, email, password });
    setWaiting(false);
    setPassword('');
    if (answer?.ok && !answer.error) {
      setProblem('');
      onSignedIn();
    } else
      setProblem(answer?.error ?? 'The service could not be reached. Try again when the network is back.');
  };
  return (
    <Dialog open={open} onClose={onClose} title="Sign in again">
      <form
        className="grid gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          void submit();
        }}
      >
        <p className="text-ink-2">
          The session of {email} has ended. The list is kept; the frames go on once you have signed in.
        </p>
        <input type="email" autoComplete="username" value={email} readOnly hidden />
        <Field
          label="Password"
          type="password"
          autoComplete="current-password"
          value={password}
          error={problem || undefined}
          onChange={(event) => setPassword(event.target.value)}
        />
        <div className="flex gap-3">
          <Button kind="main" type="submit" busy={waiting} disabled={!password}>
            Sign in and go on
          </Button>
          <Button kind="quiet" onClick={onClose}>
            Later
          </Button>
        </div>
      </form>
    </Dialog>
  );
}
