import type { Judgement, Specification, Verdict } from '@/lib/domain/specification';
import { studentCdf, studentQuantile } from './student';

/**
 * Verdict of a value against a specification, in the specification's own medium.
 *
 * With the guard band g of the decision rule: outside when y − g > upper or y + g < lower, whatever U is;
 * otherwise no verdict when U > r·T (T half the tolerance); then within when lower + g ≤ y ≤ upper − g, else
 * undecided. Conformity is P(lower ≤ Y ≤ upper) with Student's t of the stated degrees of freedom
 * (JCGM 106:2012, clause 7, for a normal state of knowledge with a known u; t where u is estimated).
 *
 * @param yNm value, nm  @param uNm standard uncertainty, nm  @param dof degrees of freedom, null infinite
 * @param expandedNm U, nm. Throws RangeError when the specification has no limit.
 */
export function judge(
  yNm: number,
  uNm: number,
  dof: number | null,
  expandedNm: number,
  spec: Specification,
): Judgement {
  const { lowerNm, upperNm } = spec;
  if (lowerNm === null && upperNm === null) throw new RangeError('A specification needs at least one limit.');
  const guardNm = guardBand(spec, uNm, dof, expandedNm);
  const half = lowerNm !== null && upperNm !== null ? (upperNm - lowerNm) / 2 : spec.halfToleranceNm;
  const conformity =
    (upperNm === null ? 1 : studentCdf((upperNm - yNm) / uNm, dof)) -
    (lowerNm === null ? 0 : studentCdf((lowerNm - yNm) / uNm, dof));
  const say = (verdict: Verdict, because: string): Judgement => ({ verdict, guardNm, conformity, because });

  if (upperNm !== null && yNm - guardNm > upperNm)
    return say('outside', beyond(guardNm, 'above the upper limit'));
  if (lowerNm !== null && yNm + guardNm < lowerNm)
    return say('outside', beyond(guardNm, 'below the lower limit'));
  if (expandedNm > spec.ratio * half) {
    return say('no-verdict', 'U is too large for this tolerance: the bench cannot decide it.');
  }
  const clearBelow = upperNm === null || yNm <= upperNm - guardNm;
  const clearAbove = lowerNm === null || yNm >= lowerNm + guardNm;
  if (clearBelow && clearAbove) {
    return say('within', guardNm > 0 ? 'Inside the limits, clear of the guard band.' : 'Inside the limits.');
  }
  return say('undecided', 'Reaches into the guard band of a limit.');
}

const beyond = (guardNm: number, where: string) =>
  guardNm > 0 ? `By more than the guard band ${where}.` : `The value lies ${where}.`;

/** Width of the guard band in nm by the specification's rule; 0 for simple acceptance. */
export function guardBand(spec: Specification, uNm: number, dof: number | null, expandedNm: number): number {
  switch (spec.rule) {
    case 'simple':
      return 0;
    case 'guard-expanded':
      return expandedNm;
    case 'guard-one-sided':
      return studentQuantile(0.95, dof) * uNm;
    case 'guard-own':
      return spec.ownGuardNm ?? 0;
  }
}
