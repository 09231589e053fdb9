'use client';

import { Mark } from '@/components/figures/marks';
import { CertificateFileField } from '@/components/setups/certificate-file';
import { Field, Select, Tick } from '@/components/ui/field';
import {
  SETUP_VALUES,
  SHAPE_WORDS,
  UNCERTAINTY_SHAPES,
  type UncertaintyShape,
  type ValueKey,
} from '@/lib/domain/setup';
import type { ValueText } from './setup-text';

interface Props {
  valueKey: ValueKey;
  text: ValueText;
  /** What looks odd about the value; null for nothing. */
  hint: string | null;
  errors: Record<string, string>;
  onChange: (text: ValueText) => void;
}

type TextPart = 'value' | 'stated' | 'k' | 'dof' | 'certificate' | 'due';

const STATED_WORDS: Record<UncertaintyShape, string> = {
  expanded: '± as stated',
  rectangular: '± limits',
  'type-a': '± standard uncertainty',
};

/** One value of a setup: value, ± and what kind it is, certificate and due date; what looks odd asks for a reason. */
export function ValueBlock({ valueKey, text, hint, errors, onChange }: Props) {
  const { name, symbol, unit } = SETUP_VALUES.find(({ key }) => key === valueKey)!;
  const field = (part: TextPart) => ({
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
      <Field label={`${STATED_WORDS[text.shape]}, ${unit}`} inputMode="decimal" {...field('stated')} />
      <Select
        label="Kind of ±"
        value={text.shape}
        onChange={(event) =>
          onChange({
            ...text,
            shape: UNCERTAINTY_SHAPES.find((shape) => shape === event.target.value) ?? 'expanded',
          })
        }
      >
        {UNCERTAINTY_SHAPES.map((shape) => (
          <option key={shape} value={shape}>
            {SHAPE_WORDS[shape]}
          </option>
        ))}
      </Select>
      {text.shape === 'expanded' ? (
        <Field label="at k =" inputMode="decimal" {...field('k')} />
      ) : (
        <span className="max-[1000px]:hidden" />
      )}
      <Field
        label="Degrees of freedom"
        inputMode="decimal"
        placeholder={text.shape === 'type-a' ? '' : 'none stated'}
        {...field('dof')}
      />
      <div className="wide">
        <Field label="Certificate" {...field('certificate')} />
      </div>
      <div className="wide">
        <CertificateFileField
          of={`${name} ${symbol}`}
          file={text.file}
          error={errors[`${valueKey}.file`]}
          onChange={(file) => onChange({ ...text, file })}
        />
      </div>
      <Field label="Due" type="date" {...field('due')} />
      {hint ? (
        <div className="hint" role="status">
          <p className="flex items-center gap-2.5 text-small">
            <Mark kind="check-look" /> {hint}
          </p>
          <Tick
            label="It is right"
            checked={text.isRight}
            onChange={(event) => onChange({ ...text, isRight: event.target.checked })}
          />
          {text.isRight || errors[`confirmed.${valueKey}`] ? (
            <Field
              label="Why it is right"
              value={text.reason}
              maxLength={300}
              error={errors[`confirmed.${valueKey}`]}
              onChange={(event) => onChange({ ...text, isRight: true, reason: event.target.value })}
            />
          ) : null}
        </div>
      ) : null}
    </fieldset>
  );
}
