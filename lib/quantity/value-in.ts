import type { FitResult } from '@/lib/domain/scan-result';
import type { Judgement, Medium, Specification } from '@/lib/domain/specification';
import type { FitPreview } from '@/lib/domain/views';
import { judge } from './verdict';

/** A reading's value in the medium it is judged in, and the verdict there. */
export interface ValueIn {
  medium: Medium;
  valueNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  judgement: Judgement | null;
}

/**
 * The value in the specification's medium (air without one). Uncertainties are scaled by the same index of air as
 * the value, λvac/λair. A source has no specification and gets no verdict.
 */
export function valueIn(result: FitResult, specification: Specification | null): ValueIn {
  const medium = specification?.medium ?? 'air';
  const valueNm = medium === 'air' ? result.wavelengthNm : result.wavelengthVacuumNm;
  if (valueNm === null || result.wavelengthNm === null) {
    return { medium, valueNm: null, uNm: null, expandedNm: null, judgement: null };
  }
  const index = valueNm / result.wavelengthNm;
  const uNm = result.uWavelengthNm === null ? null : result.uWavelengthNm * index;
  const expandedNm = result.expandedNm === null ? null : result.expandedNm * index;
  const judgement =
    specification && uNm !== null && expandedNm !== null
      ? judge(valueNm, uNm, result.dofWavelength, expandedNm, specification)
      : null;
  return { medium, valueNm, uNm, expandedNm, judgement };
}

/** A fit as it is shown before it is kept. */
export function previewOf(result: FitResult, specification: Specification | null): FitPreview {
  const { medium, valueNm, expandedNm, judgement } = valueIn(result, specification);
  return { result, wavelengthNm: valueNm, expandedNm, medium, judgement };
}
