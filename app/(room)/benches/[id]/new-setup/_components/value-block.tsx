'use client';

import { Mark } from '@/components/figures/marks';
import { Field } from '@/components/ui/field';
import type { StatedValue } from '@/lib/domain/views';
import type { ValueKey } from '../../../_components/setup-values';
import { hintOf, type ValueText } from './setup-text';

interface Props {
  valueKey: ValueKey;
  name: string;
  symbol: string;
  unit: string;
  text: ValueText;
  before: StatedValue | null;
  errors: Record<string, string>;
  onChange: (text: ValueText) => void;
}

/** One value of a setup: value, ±, k, certificate, due date, and a hint where it looks odd. */
export function ValueBlock({ name, symbol, unit, text, before, errors, valueKey, onChange }: Props) {
  const hint = hintOf(unit, text, before);
  const field = (part: keyof ValueText) => ({
    value: text[part],
    error: errors[`${valueKey}.${part}`],
    onChange: (event: React.ChangeEvent<HTMLInputElement>) =>
      onChange({ ...text, [part]: event.target.value }),
  });
  return (
    <fieldset className="value-block">
      <legend className="only-heard">
        {name} {symbol}
      </legend>
      <Field label={`${name} ${symbol}, ${unit}`} inputMode="decimal" {...field('value')} />
      <Field label={`± as stated, ${unit}`} inputMode="decimal" {...field('stated')} />
      <Field label="at k =" inputMode="decimal" {...field('k')} />
      <Field label="Certificate" {...field('certificate')} />
      <Field label="Due" type="date" {...field('due')} />
      {hint ? (
        <p className="hint flex items-center gap-2.5 text-small" role="status">
          <Mark kind="check-look" /> {hint}
        </p>
      ) : null}
    </fieldset>
  );
}
