'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Disclosure } from '@/components/ui/disclosure';
import { Field, Select } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import { nominalText } from '@/lib/client/words';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { SpecificationView } from '@/lib/domain/views';

interface Props {
  specifications: SpecificationView[];
  openLot: (input: {
    number: string;
    specificationId: number;
    supplier: string;
  }) => Promise<ActionAnswer<{ lotId: number }>>;
}

export function OpenLot({ specifications, openLot }: Props) {
  if (!specifications.length) {
    return (
      <p className="lead">
        A lot is made to a specification, and there is none yet. It is added under{' '}
        <Link className="link" href="/specifications">
          Specifications
        </Link>
        .
      </p>
    );
  }
  return (
    <Disclosure word="Open a lot…" title="Open a lot" kind="main">
      {(close) => <LotForm specifications={specifications} openLot={openLot} close={close} />}
    </Disclosure>
  );
}

function LotForm({ specifications, openLot, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [number, setNumber] = useState('');
  const [supplier, setSupplier] = useState('');
  const [specificationId, setSpecificationId] = useState(specifications[0].id);
  const submit = useSubmit<{ lotId: number }>();
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => openLot({ number, supplier, specificationId }),
          ({ lotId }) => router.push(`/lots/${lotId}`),
        );
      }}
    >
      <div className="form-grid">
        <Field
          label="Number"
          required
          value={number}
          error={submit.fields.number}
          onChange={(event) => setNumber(event.target.value)}
        />
        <Field
          label="Supplier, if known"
          value={supplier}
          error={submit.fields.supplier}
          onChange={(event) => setSupplier(event.target.value)}
        />
        <Select
          label="Specification"
          value={specificationId}
          error={submit.fields.specificationId}
          onChange={(event) => setSpecificationId(Number(event.target.value))}
        >
          {specifications.map((spec) => (
            <option key={spec.id} value={spec.id}>
              {spec.name}: {nominalText(spec)}
            </option>
          ))}
        </Select>
      </div>
      <FormFoot word="Open the lot" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}
