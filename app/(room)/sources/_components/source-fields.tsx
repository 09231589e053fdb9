'use client';

import { CertificateFileField } from '@/components/setups/certificate-file';
import { Field } from '@/components/ui/field';
import { parseNumber } from '@/lib/client/use-submit';
import type { CertificateLink } from '@/lib/domain/views';

export interface CertifiedText {
  vacuum: string;
  u: string;
  certificate: string;
  file: CertificateLink | null;
  due: string;
}

interface Props {
  of: string;
  text: CertifiedText;
  errors: Record<string, string>;
  onChange: (text: CertifiedText) => void;
}

export function certifiedInput(text: CertifiedText) {
  return {
    vacuumNm: parseNumber(text.vacuum),
    uNm: parseNumber(text.u),
    certificate: text.certificate,
    file: text.file?.sha256 ?? null,
    due: text.due === '' ? null : text.due,
  };
}

/** What a source's wavelength is and what it stands on. */
export function CertifiedFields({ of, text, errors, onChange }: Props) {
  const field = (key: 'vacuum' | 'u' | 'certificate' | 'due', error: string) => ({
    value: text[key],
    error: errors[error],
    onChange: (event: React.ChangeEvent<HTMLInputElement>) =>
      onChange({ ...text, [key]: event.target.value }),
  });
  return (
    <>
      <Field label="Wavelength in vacuum, nm" inputMode="decimal" required {...field('vacuum', 'vacuumNm')} />
      <Field label="Standard uncertainty, nm (k = 1)" inputMode="decimal" required {...field('u', 'uNm')} />
      <Field
        label="Certificate or publication"
        help="Number of the certificate, or where the value is published."
        {...field('certificate', 'certificate')}
      />
      <Field label="Due" type="date" help="Empty when it has no end." {...field('due', 'due')} />
      <CertificateFileField
        of={of}
        file={text.file}
        error={errors.file}
        onChange={(file) => onChange({ ...text, file })}
      />
    </>
  );
}
