'use client';

import { useState } from 'react';
import { Field } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { parseNumber, useSubmit } from '@/lib/client/use-submit';
import type { Conditions, ReadOff } from '@/lib/domain/conditions';
import type { ActionAnswer } from '@/lib/domain/errors';

interface Part {
  key: keyof Conditions;
  name: string;
  unit: string;
  /** What one of this unit is in the unit the engine takes. */
  per: number;
  usualHalf: string;
  help?: string;
}

const PARTS: readonly Part[] = [
  { key: 'airTemperatureC', name: 'Air temperature', unit: '°C', per: 1, usualHalf: '0.5' },
  {
    key: 'pressurePa',
    name: 'Pressure here',
    unit: 'hPa',
    per: 100,
    usualHalf: '1',
    help: 'As the barometer in the room reads, not reduced to sea level.',
  },
  {
    key: 'humidityPercent',
    name: 'Humidity',
    unit: '%',
    per: 1,
    usualHalf: '5',
    help: 'Empty: any room’s, 50 ± 45 %.',
  },
  { key: 'co2Ppm', name: 'CO₂', unit: 'ppm', per: 1, usualHalf: '50', help: 'Empty: 450 ± 300 ppm.' },
  {
    key: 'sourceTemperatureC',
    name: 'Temperature of the unit',
    unit: '°C',
    per: 1,
    usualHalf: '0.5',
    help: 'At its mount or case. Needed where the specification names one.',
  },
];

interface Props {
  start: Conditions | null;
  word: string;
  enter: (entered: Conditions) => Promise<ActionAnswer<unknown>>;
  onDone: () => void;
  onBack: () => void;
}

type Texts = Record<string, { value: string; half: string }>;

function textsOf(start: Conditions | null): Texts {
  return Object.fromEntries(
    PARTS.map(({ key, per, usualHalf }) => {
      const read = start?.[key];
      return [
        key,
        read
          ? { value: String(read.value / per), half: String(read.half / per) }
          : { value: '', half: usualHalf },
      ];
    }),
  );
}

/** Air and temperature as read off, each with what its instrument may be off by. */
export function ConditionsForm({ start, word, enter, onDone, onBack }: Props) {
  const [text, setText] = useState(() => textsOf(start));
  const submit = useSubmit<unknown>();
  const readOff = ({ key, per }: Part): ReadOff | null =>
    text[key].value.trim() === ''
      ? null
      : { value: parseNumber(text[key].value) * per, half: parseNumber(text[key].half) * per };
  const entered = () =>
    Object.fromEntries(PARTS.map((part) => [part.key, readOff(part)])) as unknown as Conditions;
  return (
    <form
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(() => enter(entered()), onDone);
      }}
    >
      <div className="condition-grid">
        {PARTS.map(({ key, name, unit, help }) => (
          <div key={key} className="condition">
            <Field
              label={`${name}, ${unit}`}
              inputMode="decimal"
              autoComplete="off"
              help={help}
              error={submit.fields[`${key}.value`] ?? submit.fields[key]}
              value={text[key].value}
              onChange={(event) => setText({ ...text, [key]: { ...text[key], value: event.target.value } })}
            />
            <Field
              label="±"
              aria-label={`${name} within ±, ${unit}`}
              inputMode="decimal"
              autoComplete="off"
              error={submit.fields[`${key}.half`]}
              value={text[key].half}
              onChange={(event) => setText({ ...text, [key]: { ...text[key], half: event.target.value } })}
            />
          </div>
        ))}
      </div>
      <FormFoot word={word} waiting={submit.waiting} message={submit.message} onBack={onBack} />
    </form>
  );
}
