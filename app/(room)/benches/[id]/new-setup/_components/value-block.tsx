'use client';

import { CertificateFields } from '@/components/setups/certificate-fields';
import { nameOfValue, OddValue, StatedFields } from '@/components/setups/stated-fields';
import type { BenchValue, ValueText } from './setup-text';

interface Props {
  valueKey: BenchValue;
  text: ValueText;
  /** What looks odd about the value; null for nothing. */
  hint: string | null;
  errors: Record<string, string>;
  onChange: (text: ValueText) => void;
}

/** One value of a setup: value, ± and what kind it is, certificate and due date; what looks odd asks for a reason. */
export function ValueBlock({ valueKey, text, hint, errors, onChange }: Props) {
  const { name, symbol } = nameOfValue(valueKey);
  const stated = {
    valueKey,
    text,
    errors,
    onChange: (part: Partial<ValueText>) => onChange({ ...text, ...part }),
  };
  return (
    <fieldset className="value-block">
      <legend className="only-heard">
        {name} {symbol}
      </legend>
      <StatedFields {...stated} />
      <CertificateFields
        of={`${name} ${symbol}`}
        at={`${valueKey}.`}
        text={text}
        errors={errors}
        onChange={(part) => onChange({ ...text, ...part })}
      />
      <OddValue {...stated} hint={hint} />
    </fieldset>
  );
}
