'use client';

import { Field } from '@/components/ui/field';
import { LIMITS } from '@/lib/domain/limits';

export interface Pair {
  password: string;
  again: string;
}

/** What is wrong with the two, or ''. */
export function pairProblem({ password, again }: Pair): string {
  if (password.length < LIMITS.passwordShortest)
    return `A password has at least ${LIMITS.passwordShortest} characters.`;
  return password === again ? '' : 'The two are not the same.';
}

interface Props {
  pair: Pair;
  onChange: (pair: Pair) => void;
  /** Shown once the person has tried. */
  problem: string;
}

/** A new password, typed twice. */
export function PasswordPair({ pair, onChange, problem }: Props) {
  const differs = problem === 'The two are not the same.';
  return (
    <>
      <Field
        label="New password"
        type="password"
        autoComplete="new-password"
        required
        value={pair.password}
        error={problem && !differs ? problem : undefined}
        help={`At least ${LIMITS.passwordShortest} characters. A few words in a row are easy to keep.`}
        onChange={(event) => onChange({ ...pair, password: event.target.value })}
      />
      <Field
        label="The same again"
        type="password"
        autoComplete="new-password"
        required
        value={pair.again}
        error={differs ? problem : undefined}
        onChange={(event) => onChange({ ...pair, again: event.target.value })}
      />
    </>
  );
}
