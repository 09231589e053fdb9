'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { PasswordPair, pairProblem } from '@/components/door/password-pair';
import { Mark } from '@/components/figures/marks';
import { Button, buttonClass } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { callAction } from '@/lib/client/call-action';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  token: string;
  resetPassword: (input: { token: string; password: string }) => Promise<ActionAnswer<unknown>>;
}

export function ResetForm({ token, resetPassword }: Props) {
  const router = useRouter();
  const [pair, setPair] = useState({ password: '', again: '' });
  const [problem, setProblem] = useState('');
  const [refused, setRefused] = useState('');
  const [waiting, start] = useTransition();
  const submit = () => {
    const wrong = pairProblem(pair);
    setProblem(wrong);
    if (wrong) return;
    start(async () => {
      const answer = await callAction(() => resetPassword({ token, password: pair.password }));
      if (answer.ok) router.replace('/sign-in?reset=1');
      else if (answer.fields?.password) setProblem(answer.fields.password);
      else setRefused(answer.message);
    });
  };
  if (refused) {
    return (
      <Notice
        stop
        live
        mark={<Mark kind="check-stop" />}
        title="The password is not changed"
        act={
          <Link className={buttonClass()} href="/forgotten">
            New link
          </Link>
        }
      >
        {refused}
      </Notice>
    );
  }
  return (
    <form
      className="grid gap-5"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <PasswordPair pair={pair} onChange={setPair} problem={problem} />
      <Button kind="main" big type="submit" busy={waiting} className="mt-1.5 w-full">
        Set the password
      </Button>
    </form>
  );
}
