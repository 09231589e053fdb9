import { combinedVariance } from './propagate';
import { coverageFactor } from './student';

/** One check of a bench: a measured and a published wavelength in one medium, nm. */
export interface CheckInput {
  measuredNm: number;
  uMeasuredNm: number;
  /** Degrees of freedom of uMeasuredNm; null is infinite. */
  dof: number | null;
  publishedNm: number;
  uPublishedNm: number;
  /** The bench's own limit; null: the expanded uncertainty of the difference. */
  ownLimitNm: number | null;
}

export interface CheckResult {
  deviationNm: number;
  /** U of the deviation for 95.45 %. */
  expandedNm: number;
  limitNm: number;
  inside: boolean;
}

/**
 * Deviation of a bench from a published value, inside when |deviation| ≤ limit; the limit is U of both combined,
 * k·√(u² + u(published)²), or the bench's own. Source: JCGM 100:2008, 5.1.2 and G.4 for U of the difference.
 */
export function referenceCheck(check: CheckInput): CheckResult {
  const deviationNm = check.measuredNm - check.publishedNm;
  const u = Math.sqrt(combinedVariance([check.uMeasuredNm, check.uPublishedNm]));
  const quartic = check.dof === null ? 0 : check.uMeasuredNm ** 4 / check.dof;
  const expandedNm = coverageFactor(quartic > 0 ? u ** 4 / quartic : null) * u;
  const limitNm = check.ownLimitNm ?? expandedNm;
  return { deviationNm, expandedNm, limitNm, inside: Math.abs(deviationNm) <= limitNm };
}

/** What a bench's constants are, for the search for what is wrong with one of them. */
export interface Constants {
  distanceMm: { value: number; u: number };
  separationUm: { value: number; u: number };
  scaleUmPerPx: { value: number; u: number };
}

/** A constant that alone would explain a deviation. */
export interface Explanation {
  what: 'distance' | 'separation' | 'scale';
  /** By how much the constant would have to be larger than stated, in its own unit. */
  step: number;
  /** The same over its standard uncertainty: the smaller, the likelier. */
  times: number;
  /** What usually goes wrong by this much; '' where nothing does. */
  cause: string;
}

/** Slips of the distance that happen: name, mm, within. Common practice, no source. */
const SLIPS: readonly [cause: string, mm: number, within: number][] = [
  ['mount ring?', 5, 0.7],
  ['taken to the camera’s flange instead of the sensor?', 17.526, 1],
  ['plate the other way round?', 0.5, 0.15],
];

/**
 * Which constant would bring the bench onto the published value: λ = d·s·Λ/L, so a relative deviation δ is one of L (true L
 * is larger by the factor 1 + δ) or the opposite one of d or s. The likeliest first: the fewest of its own uncertainties.
 */
export function explain(deviationNm: number, publishedNm: number, constants: Constants): Explanation[] {
  const relative = deviationNm / publishedNm;
  const { distanceMm: l, separationUm: d, scaleUmPerPx: s } = constants;
  const distance = l.value * relative;
  const slip = SLIPS.find(([, mm, within]) => Math.abs(Math.abs(distance) - mm) <= within);
  const list: Explanation[] = [
    { what: 'distance', step: distance, times: Math.abs(distance) / l.u, cause: slip?.[0] ?? '' },
    stepOf('separation', d, relative),
    stepOf('scale', s, relative),
  ];
  const rank = (e: Explanation) => (e.cause ? 0 : 1);
  return list.sort((a, b) => rank(a) - rank(b) || a.times - b.times);
}

function stepOf(
  what: 'separation' | 'scale',
  { value, u }: { value: number; u: number },
  relative: number,
): Explanation {
  const step = value / (1 + relative) - value;
  return { what, step, times: Math.abs(step) / u, cause: '' };
}
