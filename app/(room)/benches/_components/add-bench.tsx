'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Disclosure } from '@/components/ui/disclosure';
import { Field, TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  addBench: (input: { name: string; note: string }) => Promise<ActionAnswer<{ benchId: number }>>;
}

export function AddBench({ addBench }: Props) {
  return (
    <Disclosure word="Add a bench…" title="Add a bench" kind="main">
      {(close) => <BenchForm addBench={addBench} close={close} />}
    </Disclosure>
  );
}

function BenchForm({ addBench, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [name, setName] = useState('');
  const [note, setNote] = useState('');
  const submit = useSubmit<{ benchId: number }>();
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addBench({ name, note }),
          ({ benchId }) => router.push(`/benches/${benchId}/new-setup`),
        );
      }}
    >
      <div className="grid max-w-[560px] gap-4">
        <Field
          label="Name"
          required
          value={name}
          error={submit.fields.name}
          onChange={(event) => setName(event.target.value)}
        />
        <TextArea
          label="Note: place, camera, mount"
          rows={2}
          value={note}
          error={submit.fields.note}
          onChange={(event) => setNote(event.target.value)}
        />
      </div>
      <FormFoot
        word="Add it, then enter its first setup"
        waiting={submit.waiting}
        message={submit.message}
        onBack={close}
      />
    </form>
  );
}
