'use client';

import { Field } from '@/components/ui/field';
import { CertificateFileField } from './certificate-file';
import type { CertificateText } from './stated-text';

interface Props {
  /** Whose certificate it is, for those who hear the page. */
  of: string;
  /** Path of its fields in the errors: "distanceMm." or ''. */
  at: string;
  text: CertificateText;
  errors: Record<string, string>;
  onChange: (text: CertificateText) => void;
}

/** The certificate behind a value: what it is called, its file, until when. Stands in the grid of a value block. */
export function CertificateFields({ of, at, text, errors, onChange }: Props) {
  return (
    <>
      <div className="wide">
        <Field
          label="Certificate"
          value={text.certificate}
          error={errors[`${at}certificate`]}
          onChange={(event) => onChange({ ...text, certificate: event.target.value })}
        />
      </div>
      <div className="wide">
        <CertificateFileField
          of={of}
          file={text.file}
          error={errors[`${at}file`]}
          onChange={(file) => onChange({ ...text, file })}
        />
      </div>
      <Field
        label="Due"
        type="date"
        value={text.due}
        error={errors[`${at}due`]}
        onChange={(event) => onChange({ ...text, due: event.target.value })}
      />
    </>
  );
}
