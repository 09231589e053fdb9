'use client';

import { useRouter } from 'next/navigation';
import { useRef, useState } from 'react';
import { Button } from '@/components/ui/button';
import { Disclosure } from '@/components/ui/disclosure';
import { TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { serialsOf } from '@/lib/client/serials';
import { useSubmit } from '@/lib/client/use-submit';
import { count } from '@/lib/client/words';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Props {
  lotId: number;
  addUnits: (input: {
    lotId: number;
    serials: string[];
  }) => Promise<ActionAnswer<{ added: number; already: number }>>;
}

export function AddUnits(props: Props) {
  const [said, setSaid] = useState('');
  return (
    <div className="mt-3">
      <Disclosure word="Add units…" title="Add units">
        {(close) => (
          <UnitsForm
            {...props}
            close={close}
            onDone={(text) => {
              setSaid(text);
              close();
            }}
          />
        )}
      </Disclosure>
      <p className="mt-2 text-small text-ink-2 empty:hidden" role="status">
        {said}
      </p>
    </div>
  );
}

function UnitsForm({
  lotId,
  addUnits,
  close,
  onDone,
}: Props & { close: () => void; onDone: (text: string) => void }) {
  const router = useRouter();
  const [text, setText] = useState('');
  const file = useRef<HTMLInputElement>(null);
  const submit = useSubmit<{ added: number; already: number }>();
  const serials = serialsOf(text);
  const wrong = submit.fields.serials ?? Object.values(submit.fields)[0];
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addUnits({ lotId, serials }),
          ({ added, already }) => {
            onDone(`${count(added, 'unit')} added${already ? `, ${already} were there already` : ''}.`);
            router.refresh();
          },
        );
      }}
    >
      <TextArea
        label="Serials"
        rows={6}
        value={text}
        error={wrong}
        help="One a line, or parted by commas, semicolons or tabs. From a table the first column is taken; a first line that says “serial” is left out."
        onChange={(event) => setText(event.target.value)}
      />
      <div className="mt-3 flex flex-wrap items-center gap-4">
        <Button onClick={() => file.current?.click()}>Take them from a CSV file</Button>
        <span className="text-small text-ink-2" aria-live="polite">
          {count(serials.length, 'serial')}
          {serials.length ? `: ${serials.slice(0, 4).join(', ')}${serials.length > 4 ? ', …' : ''}` : ''}
        </span>
        <input
          ref={file}
          type="file"
          hidden
          accept=".csv,.txt,text/csv,text/plain"
          onChange={async (event) => {
            const chosen = event.target.files?.[0];
            event.target.value = '';
            if (chosen) setText(await chosen.text());
          }}
        />
      </div>
      <FormFoot
        word={`Add ${count(serials.length, 'unit')}`}
        disabled={!serials.length}
        waiting={submit.waiting}
        message={submit.message}
        onBack={close}
      />
    </form>
  );
}
