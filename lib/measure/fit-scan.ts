import type { SetupValues } from '@/lib/domain/reading-result';
import type { ScanOptions } from '@/lib/domain/scan-result';
import { MARGIN, offers } from '@/lib/fit/choose-terms';
import {
  AveragedModel,
  fitFrom,
  plainTerms,
  rebase,
  refit,
  stepsToZero,
  type CurvePrior,
  type ProfileFit,
} from '@/lib/fit/fit-profile';
import { varianceAt } from '@/lib/fit/noise';
import { toModel, toPx } from '@/lib/fit/orders';
import type { Profile } from '@/lib/fit/profile';
import { scanStartValues, type StartValues } from '@/lib/fit/start-values';
import { ModelPoint, placeOfOrder } from '@/lib/fit/two-slit-model';
import { chooseZero, type ZeroChoice } from '@/lib/fit/zero-order';
import type { Scan } from './read-scan';
import { scanNoise } from './scan-noise';

/** A fitted scan. The profile's lengths are mm wherever lib/fit says px; points left out have an infinite sigma. */
export interface ScanFit {
  fit: ProfileFit;
  profile: Profile;
  /** Sigma of every point by the noise of the others, also of those left out. */
  sigma: Float64Array;
  zero: ZeroChoice;
  /** Spacing in mm before optional terms were added to the model. */
  plainSpacingMm: number;
  /** Model units, row-major; null where the fit has none. Scaled by what the fit leaves and by how neighbours go together. */
  covariance: Float64Array | null;
  dof: number;
}

const SPACINGS_TRIED = 36;
const STARTS_FITTED = 8;
const SHORTEST_STEPS = 3;
const LONGEST_SHARE = 0.45;
const MOST_START_POINTS = 2000;
const PLAIN_ROUNDS = 2;
const FULL_ROUNDS = 2;
const MOST_ADDED = 3;

/**
 * Fits the two-slit model to a scan. Weights follow the fitted light: the noise is taken from how residuals differ from
 * their neighbours' (so that a misfit is not taken for noise), as a function of the fitted mean, and iterated; observed
 * values never weight themselves. Null where nothing starts.
 */
export function fitScan(scan: Scan, options: ScanOptions, setup: SetupValues): ScanFit | null {
  const prior = scanPrior(setup);
  const { detectorMm } = options;
  const alike = firstProfile(scan);
  const start = bestStart({ ...alike, detector: detectorOf(detectorMm, Infinity) }, prior);
  if (start === null) return null;
  const startSpacingMm = start.result.parameters[0] * start.unitPx;
  const first: Profile = { ...alike, detector: detectorOf(detectorMm, startSpacingMm) };
  const plain = refit(first, start, start.layout.terms);
  let fit = rebase(first, plain, stepsToZero(plain, null));
  const zeroAtMm = options.zeroShift ? placeIn(fit, -options.zeroShift) : null;
  fit = rebase(first, fit, stepsToZero(fit, zeroAtMm));
  const left = placesLeftOut(fit, options.leaveOut ?? []);
  let profile = first;
  let sigma = first.sigma;
  const again = (change: (p: Profile, f: ProfileFit) => ProfileFit) => {
    sigma = sigmaOf(scan, profile, fit, left);
    profile = { ...profile, sigma: sigma.map((s, i) => (left(profile.u[i]) ? Infinity : s)) };
    const next = change(profile, fit);
    fit = rebase(profile, next, stepsToZero(next, zeroAtMm));
  };
  for (let round = 0; round < PLAIN_ROUNDS; round++) again((p, f) => refit(p, f, f.layout.terms));
  const plainSpacingMm = fit.result.parameters[0] * fit.unitPx;
  for (let round = 0; round < FULL_ROUNDS; round++)
    again((p, f) => withTerms(p, refit(p, f, f.layout.terms)));
  const choice = chooseZero(profile, fit);
  const zero = zeroAtMm === null ? choice : { fit, probability: 1, next: 0, uSpacing: 0 };
  return { fit: zero.fit, profile, sigma, zero, plainSpacingMm, ...spreadOfScan(profile, zero) };
}

/** Half of the Gauss-Legendre rules on -1..1 (Abramowitz and Stegun, table 25.4): places and weights. */
const GAUSS: Record<3 | 5 | 8, [place: number, weight: number][]> = {
  3: [
    [0, 0.888888888888889],
    [0.774596669241483, 0.555555555555556],
  ],
  5: [
    [0, 0.568888888888889],
    [0.538469310105683, 0.478628670499366],
    [0.906179845938664, 0.236926885056189],
  ],
  8: [
    [0.18343464249565, 0.362683783378362],
    [0.525532409916329, 0.313706645877887],
    [0.796666477413627, 0.222381034453374],
    [0.960289856497536, 0.101228536290376],
  ],
};

/**
 * A uniform detector as nodes, as many as its width against the spacing asks for: the contrast is then right to 1e-6 up to
 * 1.5 fringes. Few nodes do for finding a start.
 */
function detectorOf(detectorMm: number | null, spacingMm: number): Profile['detector'] {
  if (detectorMm === null) return undefined;
  const share = detectorMm / spacingMm;
  const rule = GAUSS[share < 0.15 ? 3 : share < 0.6 ? 5 : 8];
  const both = rule.flatMap(([x, w]) =>
    x === 0
      ? [[0, w]]
      : [
          [-x, w],
          [x, w],
        ],
  );
  return {
    offset: Float64Array.from(both, ([x]) => (x * detectorMm) / 2),
    weight: Float64Array.from(both, ([, w]) => w / 2),
  };
}

/** X/L with X in mm: the curvature per mm is 1/L. */
function scanPrior(setup: SetupValues): CurvePrior | null {
  const distance = setup.distanceMm;
  if (!distance) return null;
  return { value: 1 / distance.value, u: distance.u === null ? null : distance.u / distance.value ** 2 };
}

/** All points alike, their sigma from second differences (median of a normal's absolute values: 0.6745). */
function firstProfile(scan: Scan): Profile {
  const n = scan.positionMm.length;
  const steps = Array.from({ length: n - 2 }, (_, i) =>
    Math.abs(scan.intensity[i] - 2 * scan.intensity[i + 1] + scan.intensity[i + 2]),
  ).sort((a, b) => a - b);
  const sigma = Math.max(Math.sqrt(leastVariance(scan)), steps[steps.length >> 1] / 0.6745 / Math.sqrt(6));
  return {
    u: scan.positionMm,
    light: scan.intensity,
    sigma: Float64Array.from(scan.repeats, (r) => sigma / Math.sqrt(r)),
    node: new Float64Array(n),
    nodeWeight: new Float64Array(n),
    size: n,
  };
}

/** Values are rounded to some step, the smallest difference there is: variance 1/12 of its square. */
function leastVariance(scan: Scan): number {
  const sorted = Float64Array.from(scan.intensity).sort();
  let step = Infinity;
  for (let i = 1; i < sorted.length; i++)
    if (sorted[i] > sorted[i - 1]) step = Math.min(step, sorted[i] - sorted[i - 1]);
  const top = Math.max(Math.abs(sorted[0]), Math.abs(sorted[sorted.length - 1]));
  return Number.isFinite(step) ? Math.max(step * step, (1e-9 * top) ** 2) / 12 : Math.max(1e-24, top * top);
}

function bestStart(profile: Profile, prior: CurvePrior | null): ProfileFit | null {
  const thin = thinned(profile);
  let best: ProfileFit | null = null;
  for (const from of likelyStarts(thin)) {
    const fit = fitFrom(thin, from, plainTerms(prior), prior);
    if (best === null || fit.result.chiSquare < best.result.chiSquare) best = fit;
  }
  return best;
}

function thinned(profile: Profile): Profile {
  const every = Math.ceil(profile.size / MOST_START_POINTS);
  if (every === 1) return profile;
  const some = (a: Float64Array) => a.filter((_, i) => i % every === 0);
  const u = some(profile.u);
  return {
    ...profile,
    u,
    light: some(profile.light),
    sigma: some(profile.sigma),
    node: some(profile.node),
    nodeWeight: some(profile.nodeWeight),
    size: u.length,
  };
}

/** Best starts over spacings from a few steps to nearly half of the scan. */
function likelyStarts(profile: Profile): StartValues[] {
  const n = profile.size;
  const span = profile.u[n - 1] - profile.u[0];
  const shortest = (SHORTEST_STEPS * span) / (n - 1);
  const ratio = (LONGEST_SHARE * span) / shortest;
  const starts: StartValues[] = [];
  for (let i = 0; i < SPACINGS_TRIED; i++)
    starts.push(...scanStartValues(profile, shortest * ratio ** (i / (SPACINGS_TRIED - 1)), 1));
  return starts.sort((a, b) => a.rest - b.rest).slice(0, STARTS_FITTED);
}

/** Where an order of a fit stands, mm of the scan. */
function placeIn(fit: ProfileFit, m: number): number {
  return toPx(fit, placeOfOrder(fit.layout, fit.fixed, fit.result.parameters, m));
}

/** Half a fringe to each side of the orders a person leaves out, numbered as in this fit. */
function placesLeftOut(fit: ProfileFit, orders: readonly number[]): (xMm: number) => boolean {
  const half = 0.5 * fit.result.parameters[0] * fit.unitPx;
  const places = orders.map((m) => placeIn(fit, m));
  return (xMm) => places.some((at) => Math.abs(xMm - at) < half);
}

/** Fitted light and residual at every point, light of the file. */
function fitted(profile: Profile, fit: ProfileFit): { light: Float64Array; rest: Float64Array } {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const light = new Float64Array(profile.size);
  for (let i = 0; i < profile.size; i++) {
    if (model.evaluate(fit.result.parameters, toModel(fit, profile.u[i]), 0, 0, false))
      light[i] = model.light * fit.unitLight;
  }
  return { light, rest: light.map((l, i) => profile.light[i] - l) };
}

/** Sigma of every point at its fitted light, from residuals against the straight line through their neighbours'. */
function sigmaOf(
  scan: Scan,
  profile: Profile,
  fit: ProfileFit,
  left: (xMm: number) => boolean,
): Float64Array {
  const { light, rest } = fitted(profile, fit);
  const n = profile.size;
  const { u } = profile;
  const q: number[] = [];
  const at: number[] = [];
  const share = Math.max(0.5, 1 - fit.layout.size / n);
  for (let i = 1; i < n - 1; i++) {
    if (left(u[i - 1]) || left(u[i]) || left(u[i + 1])) continue;
    const b = (u[i] - u[i - 1]) / (u[i + 1] - u[i - 1]);
    const d = rest[i] - (1 - b) * rest[i - 1] - b * rest[i + 1];
    const { repeats } = scan;
    const unit = 1 / repeats[i] + (1 - b) ** 2 / repeats[i - 1] + b ** 2 / repeats[i + 1];
    q.push((d * d) / unit / share);
    at.push(light[i]);
  }
  const noise = scanNoise(at, q, leastVariance(scan));
  return light.map((l, i) => Math.sqrt(varianceAt(noise, l) / scan.repeats[i]));
}

/** Optional terms while the information criterion asks for them. */
function withTerms(profile: Profile, fit: ProfileFit): ProfileFit {
  let now = fit;
  for (let added = 0; added < MOST_ADDED; added++) {
    let best: { fit: ProfileFit; gain: number } | null = null;
    for (const terms of offers(now.layout.terms, { tone: false, chirp: false })) {
      const trial = refit(profile, now, terms);
      if (trial.result.covariance === null) continue;
      const scale = Math.max(1, trial.result.chiSquare / Math.max(1, trial.result.dof));
      const gain =
        (now.result.chiSquare - trial.result.chiSquare) / scale -
        (trial.layout.size - now.layout.size) * Math.log(trial.points) -
        MARGIN;
      if (gain > 0 && (best === null || gain > best.gain)) best = { fit: trial, gain };
    }
    if (best === null) return now;
    now = best.fit;
  }
  return now;
}

/**
 * Covariance and degrees of freedom: the fit's own, scaled by chi-square over its degrees of freedom where that is above
 * one, and by how neighbouring residuals go together, since that many points count as one: 1 + 2 (sum of autocorrelations
 * until the first below noise), or what the first of them means in a process that forgets, (1 + r) / (1 - r), where that
 * is more, since the sum ends before the tail does.
 */
function spreadOfScan(profile: Profile, { fit, uSpacing }: ZeroChoice): Pick<ScanFit, 'covariance' | 'dof'> {
  const { rest } = fitted(profile, fit);
  const used = Array.from(rest, (r, i) => r / profile.sigma[i]).filter((_, i) =>
    Number.isFinite(profile.sigma[i]),
  );
  const together = correlation(used);
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof)) * together;
  const covariance = fit.result.covariance?.map((c) => c * scale) ?? null;
  // Doubt about the zero order is doubt about the spacing there.
  if (covariance) covariance[0] += uSpacing * uSpacing;
  return { covariance, dof: Math.max(2, used.length / together - fit.layout.size) };
}

function correlation(r: readonly number[]): number {
  const power = r.reduce((s, v) => s + v * v, 0);
  let factor = 1;
  let forgetting = 1;
  for (let lag = 1; lag < r.length / 4; lag++) {
    let s = 0;
    for (let i = lag; i < r.length; i++) s += r[i] * r[i - lag];
    if (!(s / power > 2 / Math.sqrt(r.length))) break;
    factor += (2 * s) / power;
    if (lag === 1) forgetting = (1 + s / power) / Math.max(0.05, 1 - s / power);
  }
  return Math.max(factor, forgetting);
}

/** Spacing in mm of the same scan taken with another detector. */
export function spacingWith({ fit, profile }: ScanFit, detectorMm: number | null): number {
  const detector = detectorOf(detectorMm, fit.result.parameters[0] * fit.unitPx);
  const other = refit({ ...profile, detector }, fit, fit.layout.terms);
  return other.result.parameters[0] * other.unitPx;
}
