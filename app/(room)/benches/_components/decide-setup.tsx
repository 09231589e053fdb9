'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { TextArea } from '@/components/ui/field';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';

export type Decide = (input: {
  setupId: number;
  decision: 'approved' | 'declined';
  reason: string;
}) => Promise<ActionAnswer<unknown>>;
export type TakeBack = (input: { setupId: number }) => Promise<ActionAnswer<unknown>>;

interface Props {
  setupId: number;
  number: number;
  decideSetup: Decide;
}

/** QA's two answers. Declining needs a reason; it goes to whoever entered the setup. */
export function DecideSetup({ setupId, number, decideSetup }: Props) {
  const router = useRouter();
  const [reason, setReason] = useState('');
  const submit = useSubmit<unknown>();
  const decide = (decision: 'approved' | 'declined') =>
    submit.run(
      () => decideSetup({ setupId, decision, reason }),
      () => router.refresh(),
    );
  return (
    <div className="mt-4 max-w-[80ch]">
      <TextArea
        label={`Your word on setup ${number}`}
        rows={2}
        value={reason}
        error={submit.fields.reason}
        help="Needed to decline it; goes by mail to whoever entered it."
        onChange={(event) => setReason(event.target.value)}
      />
      {submit.message ? (
        <p className="help wrong" role="alert">
          {submit.message}
        </p>
      ) : null}
      <div className="form-foot gap-x-8">
        <Button busy={submit.waiting} onClick={() => decide('approved')}>
          Approve setup {number}
        </Button>
        <Button kind="quiet" busy={submit.waiting} onClick={() => decide('declined')}>
          Decline it
        </Button>
      </div>
    </div>
  );
}

/** Whoever entered it has second thoughts before anybody has decided. */
export function TakeBackSetup({
  setupId,
  number,
  takeBackSetup,
}: {
  setupId: number;
  number: number;
  takeBackSetup: TakeBack;
}) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  return (
    <div className="form-foot">
      <Button
        busy={submit.waiting}
        onClick={() =>
          submit.run(
            () => takeBackSetup({ setupId }),
            () => router.refresh(),
          )
        }
      >
        Take setup {number} back
      </Button>
      <p className="text-small text-ink-2" role={submit.message ? 'alert' : undefined}>
        {submit.message || 'It is kept in the list and never comes into force.'}
      </p>
    </div>
  );
}
