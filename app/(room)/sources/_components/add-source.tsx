'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Disclosure } from '@/components/ui/disclosure';
import { Field, Select, Tick } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import { SOURCE_KIND_WORDS, SOURCE_KINDS, type SourceKind } from '@/lib/domain/source';
import type { sourceSchema } from '@/lib/domain/source-schemas';
import { LINE_KINDS, REFERENCE_LINES, type ReferenceLine } from '@/lib/quantity/reference-lines';
import { CertifiedFields, certifiedInput, type CertifiedText } from './source-fields';

interface Props {
  addSource: (input: z.input<typeof sourceSchema>) => Promise<ActionAnswer<unknown>>;
}

export function AddSource({ addSource }: Props) {
  return (
    <Disclosure word="Add a source…" title="Add a source" kind="main">
      {(close) => <SourceForm addSource={addSource} close={close} />}
    </Disclosure>
  );
}

const START: CertifiedText = { vacuum: '', u: '', certificate: '', file: null, due: '' };

type Kind = Exclude<SourceKind, 'unstated'>;

/** A free-running laser that is no He-Ne is known too poorly for a check: it is a product like any other. */
function kindOf({ kind, isReference }: ReferenceLine): Kind {
  if (kind !== 'free-running-laser') return kind;
  return isReference ? 'free-running-he-ne' : 'product';
}

/** What a published line says of a source; a stabilised laser stands on its own certificate, which is to be named. */
function textOf(line: ReferenceLine): CertifiedText {
  return {
    ...START,
    vacuum: String(line.vacuumNm),
    u: String(Number(line.uNm.toPrecision(2))),
    certificate: line.kind === 'stabilised-laser' ? '' : line.source,
  };
}

function SourceForm({ addSource, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [name, setName] = useState('');
  const [note, setNote] = useState('');
  const [kind, setKind] = useState<Kind>('stabilised-laser');
  const [line, setLine] = useState('');
  const [isReference, setIsReference] = useState(true);
  const [text, setText] = useState(START);
  const submit = useSubmit<unknown>();
  const pick = (wanted: string) => {
    setLine(wanted);
    const found = REFERENCE_LINES.find((one) => one.name === wanted);
    if (!found) return;
    setName(found.name);
    setKind(kindOf(found));
    setIsReference(found.isReference);
    setText(textOf(found));
    setNote(found.note);
  };
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () =>
            addSource({
              name,
              kind,
              isReference: kind !== 'product' && isReference,
              note,
              ...certifiedInput(text),
            }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid">
        <Select
          label="Published line"
          help="Fills the fields below with a published wavelength."
          value={line}
          onChange={(event) => pick(event.target.value)}
        >
          <option value="">none: entered by hand</option>
          {Object.entries(LINE_KINDS).map(([one, words]) => (
            <optgroup key={one} label={words}>
              {REFERENCE_LINES.filter((entry) => entry.kind === one).map((entry) => (
                <option key={entry.name} value={entry.name}>
                  {entry.name}
                </option>
              ))}
            </optgroup>
          ))}
        </Select>
        <Field
          label="Name"
          required
          value={name}
          error={submit.fields.name}
          onChange={(event) => setName(event.target.value)}
        />
        <Select
          label="Kind"
          value={kind}
          error={submit.fields.kind}
          onChange={(event) => setKind(SOURCE_KINDS.find((one) => one === event.target.value) ?? kind)}
        >
          {SOURCE_KINDS.map((one) => (
            <option key={one} value={one}>
              {SOURCE_KIND_WORDS[one]}
            </option>
          ))}
        </Select>
        <CertifiedFields of={name || 'the source'} text={text} errors={submit.fields} onChange={setText} />
        <Field
          label="Note"
          value={note}
          error={submit.fields.note}
          onChange={(event) => setNote(event.target.value)}
        />
        <div>
          <Tick
            label="Benches may be checked with it"
            checked={kind !== 'product' && isReference}
            disabled={kind === 'product'}
            onChange={(event) => setIsReference(event.target.checked)}
          />
          {kind === 'product' ? (
            <p className="help">A product’s wavelength is what is to be measured, so it is no reference.</p>
          ) : null}
        </div>
      </div>
      <FormFoot word="Add it" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}
