'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Field, TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { parseMaybe, useSubmit } from '@/lib/client/use-submit';
import type { ReferencesView } from '@/lib/domain/references';
import { formatNumber, placesFor } from '@/lib/quantity/format';
import type { SetBenchRule } from './actions';

interface Props {
  benchId: number;
  rule: ReferencesView['rule'];
  setBenchRule: SetBenchRule;
  onClose: () => void;
}

export function ruleText({ limitNm, why, by }: ReferencesView['rule']): string {
  const limit =
    limitNm === null
      ? 'A check is inside while its deviation is at most U of both values together.'
      : `A check is inside up to ± ${formatNumber(limitNm, placesFor(limitNm))} nm, a limit of the bench’s own.`;
  return by ? `${limit} ${by.name}: ${why}` : limit;
}

/** The limit of a check, kept with who set it and why. */
export function RuleForm({ benchId, rule, setBenchRule, onClose }: Props) {
  const router = useRouter();
  const [limit, setLimit] = useState(rule.limitNm === null ? '' : String(rule.limitNm));
  const [why, setWhy] = useState('');
  const submit = useSubmit<unknown>();
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => setBenchRule({ benchId, limitNm: parseMaybe(limit), method: rule.method, why }),
          () => {
            onClose();
            router.refresh();
          },
        );
      }}
    >
      <div className="form-grid">
        <Field
          label="Largest deviation of a check, nm"
          inputMode="decimal"
          placeholder="U of both"
          help="Empty: the expanded uncertainty of the deviation itself."
          value={limit}
          error={submit.fields.limitNm}
          onChange={(event) => setLimit(event.target.value)}
        />
        <TextArea
          label="Why"
          value={why}
          error={submit.fields.why}
          onChange={(event) => setWhy(event.target.value)}
        />
      </div>
      <FormFoot
        word="Use it from now on"
        waiting={submit.waiting}
        message={submit.message}
        onBack={onClose}
      />
    </form>
  );
}
