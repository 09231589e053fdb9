'use client';

import { useRouter } from 'next/navigation';
import { Choice } from '@/components/ui/choice';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  daily: boolean;
  setMailTiming: (input: { daily: boolean }) => Promise<ActionAnswer<unknown>>;
}

/** At once, or together. The choice is kept as it is pressed. */
export function MailTiming({ daily, setMailTiming }: Props) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  const choose = (next: boolean) =>
    submit.run(
      () => setMailTiming({ daily: next }),
      () => router.refresh(),
    );
  return (
    <>
      <div
        className="choices grid max-w-[640px] gap-4 sm:grid-cols-2"
        role="group"
        aria-label="When notices are sent"
        aria-busy={submit.waiting}
      >
        <Choice
          chosen={!daily}
          onChoose={() => choose(false)}
          title="At once"
          lines={['one mail for each notice']}
        />
        <Choice
          chosen={daily}
          onChoose={() => choose(true)}
          title="Once a day"
          lines={['all of them in one mail, in the morning']}
        />
      </div>
      {submit.message ? (
        <p className="help wrong mt-2" role="alert">
          {submit.message}
        </p>
      ) : null}
    </>
  );
}
