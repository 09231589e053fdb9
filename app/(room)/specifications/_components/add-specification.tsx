'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Disclosure } from '@/components/ui/disclosure';
import { Field, Select } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { MEDIUM_WORDS, METHOD_WORDS } from '@/lib/client/words';
import { parseMaybe, parseNumber, useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { specificationSchema } from '@/lib/domain/schemas';
import { METHODS, type DecisionRule, type Medium, type Method } from '@/lib/domain/specification';

interface Props {
  addSpecification: (input: z.input<typeof specificationSchema>) => Promise<ActionAnswer<unknown>>;
}

const RULES: readonly [DecisionRule, string, string][] = [
  [
    'guard-expanded',
    'Guard band U',
    'Within only when the whole interval y ± U lies inside the limits. Wrongly passed: at most about 2.5 %.',
  ],
  [
    'guard-one-sided',
    'Guard band 1.645 u',
    'Within when a wrong pass is at most 5 % likely. A narrower band than U.',
  ],
  ['guard-own', 'A guard band of its own', 'The width is agreed with the customer and stated here.'],
  [
    'simple',
    'No guard band',
    'Within when the value itself lies inside the limits. At a limit every second pass may be wrong.',
  ],
];

export function AddSpecification({ addSpecification }: Props) {
  return (
    <Disclosure word="Add a specification…" title="Add a specification" kind="main">
      {(close) => <SpecificationForm addSpecification={addSpecification} close={close} />}
    </Disclosure>
  );
}

const START = {
  name: '',
  nominal: '',
  lower: '',
  upper: '',
  ownGuard: '',
  ratio: '',
  half: '',
  temperature: '',
  nmPerK: '',
  uNmPerK: '',
};

function SpecificationForm({ addSpecification, close }: Props & { close: () => void }) {
  const router = useRouter();
  const [text, setText] = useState(START);
  const [medium, setMedium] = useState<Medium>('air');
  const [method, setMethod] = useState<Method | null>(null);
  const [rule, setRule] = useState<DecisionRule>('guard-expanded');
  const submit = useSubmit<unknown>();
  const field = (key: keyof typeof START, error: string) => ({
    value: text[key],
    error: submit.fields[error],
    onChange: (event: React.ChangeEvent<HTMLInputElement>) => setText({ ...text, [key]: event.target.value }),
  });
  const oneSided = (text.lower.trim() === '') !== (text.upper.trim() === '');
  const inMedium = MEDIUM_WORDS[medium];
  const warm = text.temperature.trim() !== '';
  const send = () =>
    submit.run(
      () =>
        addSpecification({
          name: text.name,
          nominalNm: parseNumber(text.nominal),
          medium,
          lowerNm: parseMaybe(text.lower),
          upperNm: parseMaybe(text.upper),
          rule,
          ownGuardNm: rule === 'guard-own' ? parseMaybe(text.ownGuard) : null,
          ratio: parseMaybe(text.ratio),
          halfToleranceNm: oneSided ? parseMaybe(text.half) : null,
          method,
          atTemperature: warm
            ? {
                temperatureC: parseNumber(text.temperature),
                nmPerK: parseNumber(text.nmPerK),
                uNmPerK: parseMaybe(text.uNmPerK) ?? 0,
              }
            : null,
        }),
      () => {
        close();
        router.refresh();
      },
    );
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <div className="form-grid">
        <Field label="Name" required {...field('name', 'name')} />
        <Field
          label={`Nominal, nm (${inMedium})`}
          inputMode="decimal"
          required
          {...field('nominal', 'nominalNm')}
        />
        <Select
          label="Stated in"
          value={medium}
          onChange={(event) => setMedium(event.target.value === 'vacuum' ? 'vacuum' : 'air')}
        >
          <option value="air">air</option>
          <option value="vacuum">vacuum</option>
        </Select>
        <Field
          label={`Lower limit, nm (${inMedium})`}
          inputMode="decimal"
          help="Empty when there is none."
          {...field('lower', 'lowerNm')}
        />
        <Field
          label={`Upper limit, nm (${inMedium})`}
          inputMode="decimal"
          help="Empty when there is none."
          {...field('upper', 'upperNm')}
        />
        {oneSided ? (
          <Field
            label="Half the tolerance, nm"
            inputMode="decimal"
            help="With one limit only: what U is compared with."
            {...field('half', 'halfToleranceNm')}
          />
        ) : null}
        <Select
          label="Decision rule"
          value={rule}
          help={RULES.find(([key]) => key === rule)?.[2]}
          onChange={(event) =>
            setRule(RULES.find(([key]) => key === event.target.value)?.[0] ?? 'guard-expanded')
          }
        >
          {RULES.map(([key, name]) => (
            <option key={key} value={key}>
              {name}
            </option>
          ))}
        </Select>
        {rule === 'guard-own' ? (
          <Field label="Guard band, nm" inputMode="decimal" {...field('ownGuard', 'ownGuardNm')} />
        ) : null}
        <Field
          label="No verdict when U is above this share of half the tolerance"
          inputMode="decimal"
          placeholder="usual value"
          help="Empty takes the usual value for the rule."
          {...field('ratio', 'ratio')}
        />
        <Select
          label="Method"
          value={method ?? ''}
          help="Beside a reference is much surer, and needs reference readings of the same setup."
          onChange={(event) => setMethod(METHODS.find((known) => known === event.target.value) ?? null)}
        >
          <option value="">As the bench is used</option>
          {METHODS.map((known) => (
            <option key={known} value={known}>
              {METHOD_WORDS[known]}
            </option>
          ))}
        </Select>
        <Field
          label="The limits hold at, °C"
          inputMode="decimal"
          placeholder="any temperature"
          help="Of the unit. Its temperature is then entered with each frame or for the bench."
          {...field('temperature', 'atTemperature.temperatureC')}
        />
        {warm ? (
          <>
            <Field
              label="The wavelength moves by, nm per K"
              inputMode="decimal"
              {...field('nmPerK', 'atTemperature.nmPerK')}
            />
            <Field
              label="Standard uncertainty of it, nm per K"
              inputMode="decimal"
              help="Empty: known exactly."
              {...field('uNmPerK', 'atTemperature.uNmPerK')}
            />
          </>
        ) : null}
      </div>
      <FormFoot word="Add it" waiting={submit.waiting} message={submit.message} onBack={close} />
    </form>
  );
}
