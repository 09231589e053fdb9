import type {
  FitOptions,
  FrameAnswer,
  ReadingResult,
  SetupValues,
  Timing,
} from '@/lib/domain/reading-result';
import { LEFT, type BandData } from '@/lib/fit/cells';
import { chooseTerms } from '@/lib/fit/choose-terms';
import type { BandFit } from '@/lib/fit/band-fit';
import { fitBands, fitTilt } from '@/lib/fit/fit-bands';
import { tableFor } from '@/lib/fit/fit-table';
import { rebase, stepsToZero, type CurvePrior } from '@/lib/fit/fit-profile';
import { findSecondSystem, secondInflation, withoutSecond, type SecondSystem } from '@/lib/fit/second-system';
import { spreadOf, type Spread } from '@/lib/fit/spread';
import type { StartValues } from '@/lib/fit/start-values';
import { chooseZero, type ZeroChoice } from '@/lib/fit/zero-order';
import { coordinatesIn, type Rectangle } from '@/lib/imaging/geometry';
import { Refused } from '@/lib/imaging/refused';
import { refusalOf, resultOf } from './answer';
import { cutStack, type FrameStack } from './band-stack';
import { judgePlace, noFringes } from './judge';
import type { Measured } from './measured';
import type { PlaceFit } from './place';

/** Milliseconds from any fixed moment; time is an argument so that the engine itself has no clock. */
export type Clock = () => number;

export const noTime = (): Timing => ({ decode: 0, find: 0, profile: 0, fit: 0, total: 0 });

const ROUNDS = 2;
const TERMS = { tone: true, chirp: true };
const WINDOW_ROUNDS = 5;
/** Chi-square a point up to which a second system counts as taken out. */
const TAKEN_OUT = 1.5;
/** Chi-square a point from which misfit is something that has no name. */
const UNEXPLAINED = 5;
/** Largest pull of the spacing by a second system near the first, relative to both strengths (simulation: 1.5e-3 for 3 %). */
const PULL_OF_SECOND = 0.05;
const FEW_CELLS = 0.002;

/**
 * Measures a region from a band stack: plain arithmetic, the same digits on a server and in a browser. `options.region`
 * must be covered by the stack (`stackCovers`); absent, it is the region the stack was made for.
 */
export function measureStack(
  stack: FrameStack,
  setup: SetupValues,
  options: FitOptions,
  clock: Clock = () => 0,
): FrameAnswer {
  const ms = noTime();
  const start = clock();
  try {
    const result = resultFromStack(stack, setup, options, ms);
    ms.fit = clock() - start;
    ms.total = ms.fit;
    return result;
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    ms.total = clock() - start;
    return refusalOf(error, stack.picture, ms);
  }
}

/** As `measureStack`, but a refusal is thrown. */
export function resultFromStack(
  stack: FrameStack,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
): ReadingResult {
  const region = options.region ?? stack.plan.region;
  const measured = measureRegion(stack, region, curvePrior(setup), options);
  return resultOf({ stack, region, measured, setup, options, ms });
}

function measureRegion(
  stack: FrameStack,
  region: Rectangle,
  prior: CurvePrior | null,
  options: FitOptions,
): Measured {
  const { plan, limits } = stack;
  const { rect, data } = cutStack(stack, region);
  const from = startIn(stack, region);
  const zeroAtPx = options.zeroShift ? zeroWanted(stack, region, options.zeroShift) : null;
  const how = { from, asItIs: true, rounds: ROUNDS, zeroAtPx };
  const fitted = (d: BandData) =>
    fitBands(d, plan.start.spacingPx, prior, limits, leftOutBy(stack, region, options), how);
  const plainly = fitted(data);
  if (plainly === null) throw noFringes();
  const plainSpacing = plainly.fit.result.parameters[0] * plainly.fit.unitPx;
  const { band, second } = withoutWindow(chooseTerms(plainly, TERMS), (d) => {
    const again = fitted(d);
    return again === null ? null : chooseTerms(again, TERMS);
  });
  const place: PlaceFit = { rect, band, tilt: fitTilt(band) };
  const zero = settleZero(place, zeroAtPx);
  place.tilt = fitTilt(place.band);
  const alone = withZeroDoubt(spreadOf(place.band), zero);
  const evidence = judgePlace(place, alone);
  if (alone === null) throw noFringes();
  const spread = withMisfitDoubt(alone, place, second, evidence.misfit);
  return { zero, second, place, spread, evidence, plainSpacing };
}

/** The fit with a second fringe system divided out of the light, where one stands out of the misfit. */
function withoutWindow(
  plainly: BandFit,
  fitted: (data: BandData) => BandFit | null,
): { band: BandFit; second: SecondSystem | null } {
  if (!missesCells(plainly)) return { band: plainly, second: null };
  const { data } = plainly;
  let band = plainly;
  let second: SecondSystem | null = null;
  for (let round = 0; round < WINDOW_ROUNDS; round++) {
    const next = findSecondSystem(band, data.light);
    if (next === null) break;
    const better = fitted(withoutSecond(data, data.light, next));
    if (better === null) break;
    band = better;
    second = next;
  }
  return { band, second };
}

/** More cells far from the fit than noise makes, or a profile that misses it. */
function missesCells({ fit, state, data }: BandFit): boolean {
  const dof = Math.max(1, fit.result.dof);
  if (fit.result.chiSquare / dof > 1 + 3 * Math.sqrt(2 / dof)) return true;
  let out = 0;
  for (let i = 0; i < state.left.length; i++) if (state.left[i] === LEFT.outlier) out++;
  return out > FEW_CELLS * data.bins * data.bands;
}

/**
 * The spacing's variance grows by what a second system shares with the first. Where misfit stays far above the noise, a wave
 * that was not found or not quite taken out may be in it: its largest pull counts as the half width of a rectangle.
 */
function withMisfitDoubt(
  spread: Spread,
  place: PlaceFit,
  second: SecondSystem | null,
  misfit: number,
): Spread {
  const factor = second === null ? 1 : secondInflation(place.band, second);
  const covariance = spread.covariance.map((v) => v * factor);
  const { result } = place.band.fit;
  const most = second === null ? UNEXPLAINED : TAKEN_OUT;
  if (result.chiSquare > most * Math.max(1, result.dof)) {
    const strength = Math.max(second === null ? 0 : Math.hypot(second.c, second.s), 2 * misfit);
    covariance[0] += (PULL_OF_SECOND * strength * result.parameters[0]) ** 2 / 3;
  }
  return { ...spread, covariance };
}

/** The pattern as the stack's maker saw it, from this region's centre. */
function startIn(stack: FrameStack, region: Rectangle): StartValues {
  const { start, rect } = stack.plan;
  const centre = coordinatesIn(rect, region.cxPx, region.cyPx).u;
  return {
    spacing: start.spacingPx,
    zero: start.zeroPx - centre,
    middle: start.middlePx - centre,
    ratio: start.ratio,
    a: start.a,
    b: start.b,
    background: start.background,
    slope: start.slope,
    rest: 0,
  };
}

/** Where the zero order stands from this region's centre once a person has moved it by so many orders. */
function zeroWanted(stack: FrameStack, region: Rectangle, zeroShift: number): number {
  const { zeroPx, start, rect } = stack.plan;
  return zeroPx - zeroShift * start.spacingPx - coordinatesIn(rect, region.cxPx, region.cyPx).u;
}

/** Places near orders the person wants left out, counted from the same zero order as the numbers the person saw. */
function leftOutBy(stack: FrameStack, region: Rectangle, options: FitOptions): (u: number) => boolean {
  const orders = options.leaveOut ?? [];
  if (orders.length === 0) return () => false;
  const zero = zeroWanted(stack, region, options.zeroShift ?? 0);
  const { spacingPx } = stack.plan.start;
  const places = orders.map((m) => zero + m * spacingPx);
  return (u) => places.some((at) => Math.abs(u - at) < 0.5 * spacingPx);
}

/** The zero order by envelope and geometry; a person's own choice stands. */
function settleZero(place: PlaceFit, zeroAtPx: number | null): ZeroChoice {
  const { fit, profile } = place.band;
  const take = (chosen: typeof fit) => {
    if (chosen === place.band.fit) return;
    const { data, grid } = place.band;
    place.band = { ...place.band, fit: chosen, table: tableFor(data, grid, chosen) };
  };
  if (fit.layout.chirp >= 0 && zeroAtPx === null) {
    // A fitted perspective takes up what the geometry would say about the zero order: only the envelope tells.
    const nearest = rebase(profile, fit, stepsToZero(fit, null));
    take(nearest);
    return { ...chooseZero(profile, nearest), fit: nearest };
  }
  const choice = chooseZero(profile, fit);
  if (zeroAtPx !== null) return { ...choice, fit, probability: 1, next: 0, uSpacing: 0 };
  take(choice.fit);
  return choice;
}

/** What doubt about the zero order adds to the spacing's uncertainty. */
function withZeroDoubt(spread: Spread | null, zero: ZeroChoice): Spread | null {
  if (spread === null || zero.uSpacing === 0) return spread;
  const covariance = Float64Array.from(spread.covariance);
  covariance[0] += zero.uSpacing * zero.uSpacing;
  return { ...spread, covariance };
}

/** Wide-angle curvature s/L from the bench's values, with the uncertainty they have. */
export function curvePrior(setup: SetupValues): CurvePrior | null {
  const { scaleUmPerPx: s, distanceMm: l } = setup;
  if (!s || !l) return null;
  const value = s.value / 1000 / l.value;
  const known = s.u !== null && l.u !== null;
  return { value, u: known ? value * Math.hypot((s.u ?? 0) / s.value, (l.u ?? 0) / l.value) : null };
}
