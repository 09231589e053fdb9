'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Disclosure } from '@/components/ui/disclosure';
import { Field } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { parseNumber, useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { sourceSchema } from '@/lib/domain/schemas';

interface Props {
  addSource: (input: z.input<typeof sourceSchema>) => Promise<ActionAnswer<unknown>>;
}

export function AddSource({ addSource }: Props) {
  return (
    <Disclosure word="Add a source…" title="Add a reference source" kind="main">
      {(close) => <SourceForm addSource={addSource} close={close} />}
    </Disclosure>
  );
}

const START = { name: '', vacuum: '', u: '', note: '' };

function SourceForm({ addSource, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [text, setText] = useState(START);
  const submit = useSubmit<unknown>();
  const field = (key: keyof typeof START, error: string) => ({
    value: text[key],
    error: submit.fields[error],
    onChange: (event: React.ChangeEvent<HTMLInputElement>) => setText({ ...text, [key]: event.target.value }),
  });
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () =>
            addSource({
              name: text.name,
              vacuumNm: parseNumber(text.vacuum),
              uNm: parseNumber(text.u),
              note: text.note,
            }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid">
        <Field label="Name" required {...field('name', 'name')} />
        <Field
          label="Wavelength in vacuum, nm"
          inputMode="decimal"
          required
          {...field('vacuum', 'vacuumNm')}
        />
        <Field label="Standard uncertainty, nm (k = 1)" inputMode="decimal" required {...field('u', 'uNm')} />
        <Field
          label="Where the value comes from"
          help="Certificate or publication."
          {...field('note', 'note')}
        />
      </div>
      <FormFoot word="Add it" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}
