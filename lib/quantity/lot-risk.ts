import type { Specification } from '@/lib/domain/specification';
import { globalRisks, normalPrior, type Risks } from './risk';
import { typeA } from './type-a';
import { guardBand } from './verdict';

/** One unit's value with its uncertainty, in the specification's medium. */
export interface UnitValue {
  valueNm: number;
  uNm: number;
  expandedNm: number;
}

export interface LotRisk extends Risks {
  units: number;
  meanNm: number;
  /** Scatter of the units' values. */
  sdNm: number;
  /** Mean standard uncertainty and guard band. */
  uNm: number;
  guardNm: number;
}

/** With fewer, the scatter itself is known to worse than a quarter (JCGM 100:2008, table E.1: 24 % for 10). */
export const FEWEST_UNITS = 10;

/**
 * Consumer's and producer's risk of the decision rule for units like those of the lot: a normal spread with the mean and the
 * standard deviation of the measured values, each measured with the mean standard uncertainty. The measurement's own scatter
 * is in that spread as well, which makes the risks a little larger than they are.
 * Null with fewer than FEWEST_UNITS values, or where all are the same. Source: JCGM 106:2012, 9.5.
 */
export function lotRisk(values: readonly UnitValue[], specification: Specification): LotRisk | null {
  if (values.length < FEWEST_UNITS) return null;
  const { mean: meanNm, s: sdNm } = typeA(values.map(({ valueNm }) => valueNm));
  const average = (of: (value: UnitValue) => number) =>
    values.reduce((sum, value) => sum + of(value), 0) / values.length;
  const uNm = average((value) => value.uNm);
  if (!(sdNm > 0) || !(uNm > 0)) return null;
  const guardNm = guardBand(
    specification,
    uNm,
    null,
    average((value) => value.expandedNm),
  );
  const { lowerNm: lower, upperNm: upper } = specification;
  const acceptance = {
    lower: lower === null ? null : lower + guardNm,
    upper: upper === null ? null : upper - guardNm,
  };
  const risks = globalRisks(normalPrior(meanNm, sdNm), uNm, { lower, upper }, acceptance);
  return { ...risks, units: values.length, meanNm, sdNm, uNm, guardNm };
}
