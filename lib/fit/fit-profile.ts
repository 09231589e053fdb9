import {
  foreseenSumOfSquares,
  leastSquares,
  type LeastSquaresProblem,
  type LeastSquaresResult,
} from './least-squares';
import type { Profile } from './profile';
import { scanStartValues, type StartValues } from './start-values';
import {
  layoutOf,
  ModelPoint,
  orderAt,
  placeOfOrder,
  type ModelFixed,
  type ModelLayout,
  type ModelTerms,
} from './two-slit-model';

/** Prior knowledge of the wide-angle curvature s/L, per px; u null: known exactly; absent: nothing known. */
export interface CurvePrior {
  value: number;
  u: number | null;
}

export interface ProfileFit {
  layout: ModelLayout;
  fixed: ModelFixed;
  result: LeastSquaresResult;
  /** x of the model = (u - originPx) / unitPx; light of the model = light / unitLight. */
  originPx: number;
  unitPx: number;
  unitLight: number;
  /** Points with a finite sigma, priors not counted. */
  points: number;
  curvePrior: CurvePrior | null;
}

/** The plainest model for a given knowledge of the geometry. */
export function plainTerms(prior: CurvePrior | null): ModelTerms {
  return {
    background: 2,
    curve: prior !== null && prior.u !== null && prior.u > 0,
    chirp: false,
    tone: false,
    fade: false,
    unequal: false,
  };
}

/** Best of several starts; `around` is the spacing in px the search believes in. Null when nothing starts. */
export function fitProfile(profile: Profile, around: number, prior: CurvePrior | null): ProfileFit | null {
  let best: ProfileFit | null = null;
  for (const start of scanStartValues(profile, around, 3)) {
    const fit = fitFrom(profile, start, plainTerms(prior), prior);
    if (best === null || fit.result.chiSquare < best.result.chiSquare) best = fit;
  }
  return best;
}

/** One fit from start values in px; `asItIs` takes them over unchanged. */
export function fitFrom(
  profile: Profile,
  start: StartValues,
  terms: ModelTerms,
  prior: CurvePrior | null,
  asItIs = false,
): ProfileFit {
  const layout = layoutOf(terms);
  const unitPx = start.spacing;
  const unitLight = Math.max(1e-9, start.a + Math.max(0, start.background));
  const originPx = start.zero;
  const p = new Float64Array(layout.size);
  p[0] = 1;
  p[1] = 0;
  p[2] = start.ratio;
  p[3] = (start.middle - start.zero) / unitPx;
  p[4] = start.a / unitLight;
  p[5] = start.b / unitLight;
  p[6] = start.background / unitLight;
  if (terms.background > 1) p[7] = start.slope / unitLight;
  if (layout.curve >= 0 && prior) p[layout.curve] = prior.value * unitPx;
  if (layout.tone >= 0) p[layout.tone] = 1;
  return run(profile, { layout, prior, originPx, unitPx, unitLight, asItIs }, p);
}

/** The same fit carried on: new data, or more terms. Parameters that are new start at their neutral value. */
export function refit(profile: Profile, before: ProfileFit, terms: ModelTerms, trial = false): ProfileFit {
  const layout = layoutOf(terms);
  const p = new Float64Array(layout.size);
  const old = before.result.parameters;
  for (let i = 0; i < 6; i++) p[i] = old[i];
  for (let k = 0; k < Math.min(terms.background, before.layout.terms.background); k++) p[6 + k] = old[6 + k];
  const carry = (now: number, then: number, neutral: number) => {
    if (now >= 0) p[now] = then >= 0 ? old[then] : neutral;
  };
  carry(layout.curve, before.layout.curve, before.fixed.curve);
  carry(layout.chirp, before.layout.chirp, 0);
  carry(layout.tone, before.layout.tone, 1);
  carry(layout.fade, before.layout.fade, 0.05);
  carry(layout.unequal, before.layout.unequal, 0.05);
  return run(
    profile,
    {
      layout,
      prior: before.curvePrior,
      originPx: before.originPx,
      unitPx: before.unitPx,
      unitLight: before.unitLight,
      trial,
    },
    p,
  );
}

/** Orders from the model's order 0 to the one nearest the envelope's middle, or nearest to a place a person chose. */
export function stepsToZero(fit: ProfileFit, zeroAtPx: number | null): number {
  const p = fit.result.parameters;
  if (zeroAtPx === null) return Math.round(p[3]);
  return Math.round(orderAt(fit.layout, fit.fixed, p, (zeroAtPx - fit.originPx) / fit.unitPx));
}

/**
 * Makes the order so many steps away the model's order 0 and fits again: spacing is the distance of orders there, and with
 * wide angles or perspective the numbering is not free.
 */
export function rebase(profile: Profile, fit: ProfileFit, steps: number): ProfileFit {
  const start = steps === 0 ? null : rebasedStart(fit, steps);
  return start === null ? fit : run(profile, { ...fit, prior: fit.curvePrior }, start);
}

/** So many points tell whether another numbering has any hope. */
const POINTS_TO_FORESEE = 250;

/**
 * Chi-square that `rebase` would come to for each number of steps, by one linear step from some of the points; infinite for
 * an order that has no place.
 */
export function foreseenAfterRebase(profile: Profile, fit: ProfileFit, steps: number[]): number[] {
  const every = Math.max(1, Math.floor(profile.size / POINTS_TO_FORESEE));
  const { problem } = problemOf(profile, { ...fit, prior: fit.curvePrior, every });
  return steps.map((step) => {
    const start = step === 0 ? fit.result.parameters : rebasedStart(fit, step);
    return start === null ? Infinity : every * foreseenSumOfSquares(problem, start);
  });
}

/** The fit's parameters counted from another order; null where that order has no place. */
function rebasedStart(fit: ProfileFit, steps: number): Float64Array | null {
  const { layout, fixed } = fit;
  const p = fit.result.parameters;
  const place = placeOfOrder(layout, fixed, p, steps);
  const next = placeOfOrder(layout, fixed, p, steps + 0.01);
  if (!Number.isFinite(place) || !Number.isFinite(next)) return null;
  const start = p.slice();
  start[0] = (next - place) * 100;
  start[1] = place;
  start[3] = p[3] - steps;
  if (layout.chirp >= 0) start[layout.chirp] = p[layout.chirp] / (1 + p[layout.chirp] * (place - p[1]));
  return start;
}

/**
 * The pattern of one slit on the same data: no interference term. Tried from several widths; chi-square tells whether the
 * second slit is needed at all.
 */
export function fitOneSlit(profile: Profile, two: ProfileFit): LeastSquaresResult | null {
  const layout = layoutOf(plainTerms(null));
  const old = two.result.parameters;
  let brightest = 0;
  for (let i = 0; i < profile.size; i++)
    if (Number.isFinite(profile.sigma[i]) && profile.light[i] > profile.light[brightest]) brightest = i;
  const peak = (profile.u[brightest] - two.originPx) / two.unitPx;
  let best: LeastSquaresResult | null = null;
  for (const middle of [old[3], peak]) {
    for (const ratio of [0.35, 0.6, 1, 1.7]) {
      const p = new Float64Array(layout.size);
      p[0] = 1;
      p[2] = ratio;
      p[3] = middle;
      p[4] = Math.max(old[4], 0.2);
      p[6] = old[6];
      p[7] = old[7];
      const { result } = run(
        profile,
        {
          layout,
          prior: null,
          originPx: two.originPx,
          unitPx: two.unitPx,
          unitLight: two.unitLight,
          hold: [0, 1, 5],
        },
        p,
      );
      if (best === null || result.chiSquare < best.chiSquare) best = result;
    }
  }
  return best;
}

/** Chi-square that is not worth another step: parameters then stand within a few thousandths of their uncertainty. */
const ENOUGH = 1e-5;
const ENOUGH_FOR_TRIAL = 0.1;

interface Frame {
  layout: ModelLayout;
  prior: CurvePrior | null;
  originPx: number;
  unitPx: number;
  unitLight: number;
  /** Parameters that keep their start value. */
  hold?: number[];
  asItIs?: boolean;
  /** Only chi-square is wanted, to a fraction of one. */
  trial?: boolean;
  /** Every how many points one is looked at. */
  every?: number;
}

function run(profile: Profile, frame: Frame, start: Float64Array): ProfileFit {
  const { layout, prior, originPx, unitPx, unitLight } = frame;
  const { problem, fixed, points } = problemOf(profile, frame);
  const result = leastSquares(problem, start, {
    ...boundsFor(layout, fixed, start, frame.hold ?? []),
    maxEvaluations: frame.asItIs ? 1 : 60,
    reductionTolerance: 1e-12,
    gradientTolerance: 1e-9,
    enough: frame.trial ? ENOUGH_FOR_TRIAL : ENOUGH,
  });
  return { layout, fixed, result, originPx, unitPx, unitLight, points, curvePrior: prior };
}

/** Weighted residuals of the profile and of what is known beforehand. */
function problemOf(
  profile: Profile,
  frame: Frame,
): { problem: LeastSquaresProblem; fixed: ModelFixed; points: number } {
  const { layout, prior, originPx, unitPx, unitLight } = frame;
  const index = new Int32Array(profile.size);
  let n = 0;
  for (let i = 0; i < profile.size; i += frame.every ?? 1)
    if (Number.isFinite(profile.sigma[i])) index[n++] = i;
  const from = (profile.u[index[0]] - originPx) / unitPx;
  const to = (profile.u[index[n - 1]] - originPx) / unitPx;
  const fixed: ModelFixed = {
    curve: prior ? prior.value * unitPx : 0,
    centre: (from + to) / 2,
    half: Math.max(1e-9, (to - from) / 2),
  };
  const { detector } = profile;
  if (detector) fixed.detector = { ...detector, offset: detector.offset.map((d) => d / unitPx) };
  const priors = priorRows(layout, frame, fixed);
  const rows = n + priors.length;
  const averaged = new AveragedModel(new ModelPoint(layout, fixed));
  const evaluate: LeastSquaresProblem['evaluate'] = (p, r, jacobian) => {
    for (let k = 0; k < n; k++) {
      const i = index[k];
      const x = (profile.u[i] - originPx) / unitPx;
      if (!averaged.evaluate(p, x, profile.node[i] / unitPx, profile.nodeWeight[i], jacobian !== null))
        return false;
      const w = unitLight / profile.sigma[i];
      r[k] = (profile.light[i] / unitLight - averaged.light) * w;
      if (jacobian) for (let j = 0; j < layout.size; j++) jacobian[j * rows + k] = averaged.gradient[j] * w;
    }
    for (let k = 0; k < priors.length; k++) {
      const { parameter, value, u } = priors[k];
      r[n + k] = (value - p[parameter]) / u;
      if (jacobian)
        for (let j = 0; j < layout.size; j++) jacobian[j * rows + n + k] = j === parameter ? 1 / u : 0;
    }
    return true;
  };
  return { problem: { residuals: rows, evaluate }, fixed, points: n };
}

/** Weak knowledge that keeps a flat envelope from wandering, and the stated geometry. */
function priorRows(
  layout: ModelLayout,
  frame: Frame,
  fixed: ModelFixed,
): { parameter: number; value: number; u: number }[] {
  const rows: { parameter: number; value: number; u: number }[] = [
    { parameter: layout.middle, value: fixed.centre, u: 40 * Math.max(1, fixed.half) },
    { parameter: layout.ratio, value: 0.25, u: 5 },
  ];
  const { prior, unitPx } = frame;
  if (layout.curve >= 0 && prior?.u)
    rows.push({ parameter: layout.curve, value: prior.value * unitPx, u: prior.u * unitPx });
  return rows;
}

function boundsFor(
  layout: ModelLayout,
  fixed: ModelFixed,
  start: Float64Array,
  hold: number[],
): { lower: Float64Array; upper: Float64Array } {
  const lower = new Float64Array(layout.size).fill(-Infinity);
  const upper = new Float64Array(layout.size).fill(Infinity);
  lower[0] = 0.4;
  upper[0] = 2.5;
  lower[2] = 0.002;
  upper[2] = hold.length > 0 ? 4 : 1.2;
  lower[4] = 0;
  upper[4] = 60;
  lower[5] = 0;
  const reach = 3 * fixed.half + 5;
  lower[3] = fixed.centre - reach;
  upper[3] = fixed.centre + reach;
  if (layout.curve >= 0) lower[layout.curve] = 0;
  if (layout.tone >= 0) {
    lower[layout.tone] = 0.25;
    upper[layout.tone] = 2.5;
  }
  if (layout.fade >= 0) {
    lower[layout.fade] = 1e-4;
    upper[layout.fade] = 1.5;
  }
  if (layout.unequal >= 0) {
    lower[layout.unequal] = 1e-4;
    upper[layout.unequal] = 0.6;
  }
  if (layout.chirp >= 0) {
    lower[layout.chirp] = -0.5 / fixed.half;
    upper[layout.chirp] = 0.5 / fixed.half;
  }
  for (const k of hold) {
    lower[k] = start[k];
    upper[k] = start[k];
  }
  return { lower, upper };
}

/** The model averaged over the extent of a point by its three nodes. */
export class AveragedModel {
  light = 0;
  fringes = 0;
  envelope = 0;
  slope = 0;
  readonly gradient: Float64Array;

  constructor(readonly point: ModelPoint) {
    this.gradient = new Float64Array(point.layout.size);
  }

  evaluate(p: Float64Array, x: number, node: number, weight: number, wantGradient: boolean): boolean {
    const { point, gradient } = this;
    if (point.fixed.detector) return this.evaluateWide(point.fixed.detector, p, x, wantGradient);
    if (weight === 0.5) return this.evaluatePair(p, x, node, wantGradient);
    if (!point.evaluate(p, x, wantGradient)) return false;
    const mid = 1 - 2 * weight;
    this.light = mid * point.light;
    this.fringes = mid * point.fringes;
    this.envelope = mid * point.envelope;
    this.slope = mid * point.slope;
    if (wantGradient) for (let j = 0; j < gradient.length; j++) gradient[j] = mid * point.gradient[j];
    if (weight === 0) return true;
    for (let side = -1; side <= 1; side += 2) {
      if (!point.evaluate(p, x + side * node, wantGradient)) return false;
      this.light += weight * point.light;
      this.fringes += weight * point.fringes;
      this.envelope += weight * point.envelope;
      this.slope += weight * point.slope;
      if (wantGradient) for (let j = 0; j < gradient.length; j++) gradient[j] += weight * point.gradient[j];
    }
    return true;
  }

  /** All nodes of a wide detector. */
  private evaluateWide(
    { offset, weight }: NonNullable<ModelFixed['detector']>,
    p: Float64Array,
    x: number,
    wantGradient: boolean,
  ): boolean {
    const { point, gradient } = this;
    this.light = 0;
    this.fringes = 0;
    this.envelope = 0;
    this.slope = 0;
    if (wantGradient) gradient.fill(0);
    for (let k = 0; k < offset.length; k++) {
      const w = weight[k];
      if (!point.evaluate(p, x + offset[k], wantGradient)) return false;
      this.light += w * point.light;
      this.fringes += w * point.fringes;
      this.envelope += w * point.envelope;
      this.slope += w * point.slope;
      if (wantGradient) for (let j = 0; j < gradient.length; j++) gradient[j] += w * point.gradient[j];
    }
    return true;
  }

  /** Two nodes only, where the extent is small against a fringe. */
  private evaluatePair(p: Float64Array, x: number, node: number, wantGradient: boolean): boolean {
    const { point, gradient } = this;
    if (!point.evaluate(p, x - node, wantGradient)) return false;
    this.light = point.light;
    this.fringes = point.fringes;
    this.envelope = point.envelope;
    this.slope = point.slope;
    if (wantGradient) gradient.set(point.gradient);
    if (!point.evaluate(p, x + node, wantGradient)) return false;
    this.light = 0.5 * (this.light + point.light);
    this.fringes = 0.5 * (this.fringes + point.fringes);
    this.envelope = 0.5 * (this.envelope + point.envelope);
    this.slope = 0.5 * (this.slope + point.slope);
    if (wantGradient)
      for (let j = 0; j < gradient.length; j++) gradient[j] = 0.5 * (gradient[j] + point.gradient[j]);
    return true;
  }
}

/** The fit's light at every point of a profile, averaged over what the point covers; not a number where there is no point. */
export function lightOn(profile: Profile, fit: ProfileFit): Float64Array {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const p = fit.result.parameters;
  const out = new Float64Array(profile.size).fill(NaN);
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const x = (profile.u[k] - fit.originPx) / fit.unitPx;
    if (model.evaluate(p, x, profile.node[k] / fit.unitPx, profile.nodeWeight[k], false))
      out[k] = model.light * fit.unitLight;
  }
  return out;
}

/** Standard uncertainty of the visibility B/A by the law of propagation; infinite where the covariance does not say. */
export function ratioU(p: Float64Array, c: Float64Array, n: number): number {
  if (!(p[4] > 0)) return Infinity;
  const v = p[5] / p[4];
  const variance = (c[5 * n + 5] + v * v * c[4 * n + 4] - 2 * v * c[4 * n + 5]) / (p[4] * p[4]);
  return variance >= 0 ? Math.sqrt(variance) : Infinity;
}
