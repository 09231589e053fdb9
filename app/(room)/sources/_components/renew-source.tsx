'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Disclosure } from '@/components/ui/disclosure';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { renewSourceSchema } from '@/lib/domain/source-schemas';
import type { SourceView } from '@/lib/domain/views';
import { CertifiedFields, certifiedInput } from './source-fields';

interface Props {
  source: SourceView;
  renewSource: (input: z.input<typeof renewSourceSchema>) => Promise<ActionAnswer<unknown>>;
}

/** A new certificate of a source; the earlier ones are kept. */
export function RenewSource({ source, renewSource }: Props) {
  return (
    <Disclosure word="Renew the certificate…" title={`A new certificate of ${source.name}`}>
      {(close) => <RenewForm source={source} renewSource={renewSource} close={close} />}
    </Disclosure>
  );
}

function RenewForm({ source, renewSource, close }: Props & { close: () => void }) {
  const router = useRouter();
  const submit = useSubmit<unknown>();
  const [text, setText] = useState({
    vacuum: String(source.vacuumNm),
    u: String(source.uNm),
    certificate: source.certificate,
    file: null as SourceView['file'],
    due: '',
  });
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => renewSource({ sourceId: source.id, afterNumber: source.revision, ...certifiedInput(text) }),
          () => {
            close();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid">
        <CertifiedFields of={source.name} text={text} errors={submit.fields} onChange={setText} />
      </div>
      <FormFoot
        word="Keep the certificate"
        waiting={submit.waiting}
        message={submit.message}
        onBack={close}
      />
    </form>
  );
}
