'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { CertificateFields } from '@/components/setups/certificate-fields';
import { nameOfValue, OddValue, StatedFields } from '@/components/setups/stated-fields';
import {
  certificateInput,
  confirmedInput,
  NO_CERTIFICATE,
  NO_VALUE,
  statedInput,
  textOfStated,
  type CertificateText,
  type StatedText,
} from '@/components/setups/stated-text';
import { Disclosure } from '@/components/ui/disclosure';
import { Field } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { parseNumber, useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import { oddness } from '@/lib/domain/setup-plausibility';
import type { plateSchema, renewPlateSchema } from '@/lib/domain/setup-schemas';
import type { PlateCertificateView, PlateView } from '@/lib/domain/views';

const SLITS = ['separationUm', 'widthUm'] as const;

interface PlateText extends Record<(typeof SLITS)[number], StatedText> {
  certificate: CertificateText;
}

interface AddProps {
  addPlate: (input: z.input<typeof plateSchema>) => Promise<ActionAnswer<unknown>>;
}

export function AddPlate({ addPlate }: AddProps) {
  return (
    <Disclosure word="Add a plate…" title="Add a slit plate" kind="main">
      {(close) => <AddForm addPlate={addPlate} close={close} />}
    </Disclosure>
  );
}

function AddForm({ addPlate, close }: AddProps & { close: () => void }) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  const [name, setName] = useState('');
  const [note, setNote] = useState('');
  const [text, setText] = useState<PlateText>({
    separationUm: NO_VALUE,
    widthUm: NO_VALUE,
    certificate: NO_CERTIFICATE,
  });
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addPlate({ name, note, ...plateInput(text) }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid pb-4">
        <Field
          label="Name"
          value={name}
          error={submit.fields.name}
          onChange={(event) => setName(event.target.value)}
        />
        <Field
          label="Note"
          value={note}
          error={submit.fields.note}
          onChange={(event) => setNote(event.target.value)}
        />
      </div>
      <PlateFields text={text} before={null} errors={submit.fields} onChange={setText} />
      <FormFoot word="Add it" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}

interface RenewProps {
  plate: PlateView;
  renewPlate: (input: z.input<typeof renewPlateSchema>) => Promise<ActionAnswer<unknown>>;
}

/** A new certificate of a plate; the earlier ones are kept. */
export function RenewPlate({ plate, renewPlate }: RenewProps) {
  return (
    <Disclosure word="New certificate…" title={`A new certificate of plate ${plate.name}`}>
      {(close) => <RenewForm plate={plate} renewPlate={renewPlate} close={close} />}
    </Disclosure>
  );
}

function RenewForm({ plate, renewPlate, close }: RenewProps & { close: () => void }) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  const [newest] = plate.certificates;
  const [text, setText] = useState<PlateText>({
    separationUm: textOfStated(newest.separationUm),
    widthUm: textOfStated(newest.widthUm),
    certificate: NO_CERTIFICATE,
  });
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => renewPlate({ plateId: plate.id, afterNumber: newest.number, ...plateInput(text) }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <PlateFields text={text} before={newest} errors={submit.fields} onChange={setText} />
      <p className="help">Setups keep the values they took; a new setup takes the new ones.</p>
      <FormFoot
        word="Keep the certificate"
        waiting={submit.waiting}
        message={submit.message}
        onBack={close}
      />
    </form>
  );
}

function plateInput(text: PlateText) {
  return {
    separationUm: statedInput(text.separationUm),
    widthUm: statedInput(text.widthUm),
    ...certificateInput(text.certificate),
    confirmed: {
      separationUm: confirmedInput(text.separationUm),
      widthUm: confirmedInput(text.widthUm),
    },
  };
}

interface FieldsProps {
  text: PlateText;
  before: PlateCertificateView | null;
  errors: Record<string, string>;
  onChange: (text: PlateText) => void;
}

function PlateFields({ text, before, errors, onChange }: FieldsProps) {
  return (
    <>
      {SLITS.map((key) => {
        const { name, symbol } = nameOfValue(key);
        const stated = {
          valueKey: key,
          text: text[key],
          errors,
          onChange: (value: StatedText) => onChange({ ...text, [key]: value }),
        };
        return (
          <fieldset key={key} className="value-block">
            <legend className="only-heard">
              {name} {symbol}
            </legend>
            <StatedFields {...stated} />
            <OddValue
              {...stated}
              hint={oddness(key, parseNumber(text[key].value), before?.[key].value ?? null)}
            />
          </fieldset>
        );
      })}
      <div className="value-block">
        <CertificateFields
          of="slit plate"
          at=""
          text={text.certificate}
          errors={errors}
          onChange={(certificate) => onChange({ ...text, certificate })}
        />
      </div>
    </>
  );
}
