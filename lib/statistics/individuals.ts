/**
 * Individuals and moving-range chart. Limits x̄ ± 3·MR̄/d₂ with d₂ = 1.128 and 3.267·MR̄ for the range of two
 * (NIST/SEMATECH e-Handbook of Statistical Methods, 6.3.2.2). Limits start anew at every new setup, and no
 * moving range is taken across that seam: a re-based bench is another process.
 */
export const D2_OF_TWO = 1.128;
export const D4_OF_TWO = 3.267;
/** From how many points limits are said to be firm; between 2 and this they are provisional. */
export const FIRM_FROM = 30;
/** Points on one side of the mean that make a finding (L. S. Nelson, J. Quality Technology 16, 237, 1984). */
export const ONE_SIDE_RUN = 9;

export interface IndividualsInput {
  valueNm: number;
  setupId: number;
}

export interface Stretch {
  setupId: number;
  first: number;
  last: number;
  points: number;
  meanNm: number;
  meanRangeNm: number | null;
  lowerNm: number | null;
  upperNm: number | null;
  upperRangeNm: number | null;
  standing: 'none' | 'provisional' | 'firm';
}

export interface IndividualsChart {
  stretches: Stretch[];
  /** |xᵢ − xᵢ₋₁|, null for the first point of a stretch. */
  movingRanges: (number | null)[];
  outside: boolean[];
  /** Findings in the order of their first point. */
  findings: { kind: 'outside' | 'range' | 'nine'; first: number; last: number }[];
}

/** Computes stretches, limits, moving ranges and findings of points in time order. */
export function individualsChart(points: readonly IndividualsInput[]): IndividualsChart {
  const movingRanges: (number | null)[] = points.map((point, i) =>
    i > 0 && points[i - 1].setupId === point.setupId ? Math.abs(point.valueNm - points[i - 1].valueNm) : null,
  );
  const stretches: Stretch[] = [];
  for (let first = 0; first < points.length;) {
    let last = first;
    while (last + 1 < points.length && points[last + 1].setupId === points[first].setupId) last += 1;
    stretches.push(stretchOf(points, movingRanges, first, last));
    first = last + 1;
  }
  const outside = points.map(() => false);
  const findings: IndividualsChart['findings'] = [];
  for (const stretch of stretches) {
    for (let i = stretch.first; i <= stretch.last; i += 1) {
      const value = points[i].valueNm;
      if (
        stretch.upperNm !== null &&
        stretch.lowerNm !== null &&
        (value > stretch.upperNm || value < stretch.lowerNm)
      ) {
        outside[i] = true;
        findings.push({ kind: 'outside', first: i, last: i });
      }
      const range = movingRanges[i];
      if (range !== null && stretch.upperRangeNm !== null && range > stretch.upperRangeNm) {
        findings.push({ kind: 'range', first: i, last: i });
      }
    }
    findings.push(...runsOnOneSide(points, stretch));
  }
  findings.sort((a, b) => a.first - b.first || a.last - b.last);
  return { stretches, movingRanges, outside, findings };
}

function stretchOf(
  points: readonly IndividualsInput[],
  movingRanges: readonly (number | null)[],
  first: number,
  last: number,
): Stretch {
  const count = last - first + 1;
  let sum = 0;
  let rangeSum = 0;
  for (let i = first; i <= last; i += 1) {
    sum += points[i].valueNm;
    rangeSum += movingRanges[i] ?? 0;
  }
  const meanNm = sum / count;
  const base = { setupId: points[first].setupId, first, last, points: count, meanNm };
  if (count < 2) {
    return { ...base, meanRangeNm: null, lowerNm: null, upperNm: null, upperRangeNm: null, standing: 'none' };
  }
  const meanRangeNm = rangeSum / (count - 1);
  const reach = (3 * meanRangeNm) / D2_OF_TWO;
  return {
    ...base,
    meanRangeNm,
    lowerNm: meanNm - reach,
    upperNm: meanNm + reach,
    upperRangeNm: D4_OF_TWO * meanRangeNm,
    standing: count < FIRM_FROM ? 'provisional' : 'firm',
  };
}

/** Every maximal run of at least nine points strictly on one side of the stretch's mean. */
function runsOnOneSide(points: readonly IndividualsInput[], stretch: Stretch): IndividualsChart['findings'] {
  const found: IndividualsChart['findings'] = [];
  let start = stretch.first;
  let side = 0;
  for (let i = stretch.first; i <= stretch.last + 1; i += 1) {
    const now = i <= stretch.last ? Math.sign(points[i].valueNm - stretch.meanNm) : 0;
    if (now !== 0 && now === side) continue;
    if (side !== 0 && i - start >= ONE_SIDE_RUN) found.push({ kind: 'nine', first: start, last: i - 1 });
    start = i;
    side = now;
  }
  return found;
}
