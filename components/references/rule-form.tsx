'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Field, Select, TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { METHOD_WORDS } from '@/lib/client/words';
import { parseMaybe, useSubmit } from '@/lib/client/use-submit';
import type { ReferencesView } from '@/lib/domain/references';
import { METHODS } from '@/lib/domain/specification';
import { formatNumber, placesFor } from '@/lib/quantity/format';
import type { SetBenchRule } from './actions';

interface Props {
  benchId: number;
  rule: ReferencesView['rule'];
  setBenchRule: SetBenchRule;
  onClose: () => void;
}

export function ruleText({ limitNm, method, why, by }: ReferencesView['rule']): string {
  const limit =
    limitNm === null
      ? 'A check is inside while its deviation is at most U of both values together.'
      : `A check is inside up to ± ${formatNumber(limitNm, placesFor(limitNm))} nm, a limit of the bench’s own.`;
  const found = `Wavelengths of units: ${METHOD_WORDS[method].toLowerCase()}, unless the specification asks otherwise.`;
  return by ? `${limit} ${found} ${by.name}: ${why}` : `${limit} ${found}`;
}

/** The limit of a check and the method, kept with who set it and why. */
export function RuleForm({ benchId, rule, setBenchRule, onClose }: Props) {
  const router = useRouter();
  const [limit, setLimit] = useState(rule.limitNm === null ? '' : String(rule.limitNm));
  const [method, setMethod] = useState(rule.method);
  const [why, setWhy] = useState('');
  const submit = useSubmit<unknown>();
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => setBenchRule({ benchId, limitNm: parseMaybe(limit), method, why }),
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
        <Select
          label="Wavelengths of units are found"
          value={method}
          help="Beside a reference: from accepted reference readings of the same setup, nearest before and after. Separation, distance and scale then cancel. A specification may ask for either."
          onChange={(event) => setMethod(METHODS.find((known) => known === event.target.value) ?? 'absolute')}
        >
          {METHODS.map((known) => (
            <option key={known} value={known}>
              {METHOD_WORDS[known]}
            </option>
          ))}
        </Select>
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
