/** One value with its ± as a form has it. */
import { parseMaybe, parseNumber } from '@/lib/client/use-submit';
import type { UncertaintyShape } from '@/lib/domain/setup';
import type { CertificateLink, StatedValue } from '@/lib/domain/views';

export interface StatedText {
  value: string;
  stated: string;
  shape: UncertaintyShape;
  k: string;
  dof: string;
  /** What looks odd is right, for this reason. */
  isRight: boolean;
  reason: string;
}

export interface CertificateText {
  certificate: string;
  file: CertificateLink | null;
  due: string;
}

export const NO_VALUE: StatedText = {
  value: '',
  stated: '',
  shape: 'expanded',
  k: '2',
  dof: '',
  isRight: false,
  reason: '',
};
export const NO_CERTIFICATE: CertificateText = { certificate: '', file: null, due: '' };

export function textOfStated(value: StatedValue): StatedText {
  return {
    ...NO_VALUE,
    value: String(value.value),
    stated: String(value.stated),
    shape: value.shape,
    k: value.shape === 'expanded' ? String(value.k) : '2',
    dof: value.dof === null ? '' : String(value.dof),
  };
}

export function statedInput(text: StatedText) {
  return {
    value: parseNumber(text.value),
    stated: parseNumber(text.stated),
    shape: text.shape,
    k: text.shape === 'expanded' ? parseNumber(text.k) : 2,
    dof: parseMaybe(text.dof),
  };
}

export function certificateInput(text: CertificateText) {
  return {
    certificate: text.certificate,
    file: text.file?.sha256 ?? null,
    due: text.due === '' ? null : text.due,
  };
}

/** The reason why an odd value is right; '' while it has not been said. */
export function confirmedInput({ isRight, reason }: StatedText): string {
  return isRight ? reason : '';
}
