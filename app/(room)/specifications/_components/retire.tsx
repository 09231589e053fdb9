'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  id: number;
  name: string;
  retireSpecification: (input: { id: number }) => Promise<ActionAnswer<unknown>>;
}

export function Retire({ id, name, retireSpecification }: Props) {
  const router = useRouter();
  const [open, setOpen] = useState(false);
  const submit = useSubmit<unknown>();
  return (
    <>
      <Button kind="quiet" onClick={() => setOpen(true)} aria-label={`Retire ${name}`}>
        Retire…
      </Button>
      <Dialog open={open} onClose={() => setOpen(false)} title={`Retire ${name}`}>
        <form
          onSubmit={(event) => {
            event.preventDefault();
            submit.run(
              () => retireSpecification({ id }),
              () => {
                setOpen(false);
                router.refresh();
              },
            );
          }}
        >
          <p className="text-ink-2">
            No new lot can be opened with it. Lots that have it keep it. This cannot be taken back.
          </p>
          <FormFoot
            word="Retire it"
            waiting={submit.waiting}
            message={submit.message}
            onBack={() => setOpen(false)}
          />
        </form>
      </Dialog>
    </>
  );
}
