import {
  freshState,
  gridOf,
  LEFT,
  placeCells,
  type BandData,
  type BandState,
  type CommonGrid,
} from './cells';
import { AgreedLight, measureNoise } from './agreed-light';
import type { BandFit, LightLimits } from './band-fit';
import { chainGains, combineBands } from './combine-bands';
import { expectedOn, tableFor, viewCells, type FitTable } from './fit-table';
import { maskBins, maskCells } from './masks';
import { regressBands, type BandShifts } from './regress-bands';
import {
  fitFrom,
  fitProfile,
  plainTerms,
  rebase,
  refit,
  stepsToZero,
  type CurvePrior,
  type ProfileFit,
} from './fit-profile';
import { chooseZero } from './zero-order';
import type { StartValues } from './start-values';
import type { Profile } from './profile';
import type { ModelTerms } from './two-slit-model';
import { weightedLine } from './small-matrix';

/** How a fit starts: from values of an earlier one or from a scan, with how many rounds, and a person's zero order. */
export interface FitStart {
  from: StartValues | null;
  /** The start values are a fit of the same region: masks are made with them before anything is fitted. */
  asItIs: boolean;
  rounds: number;
  /** Where a person wants the zero order, px; null leaves it to the envelope and the geometry. */
  zeroAtPx: number | null;
}

/** Before there is a fit, cells this near the white level count as clipped. */
const NEAR_WHITE = 0.94;
const FEWEST_POINTS = 12;
/** Chi-square a round may still take away to be the last, and the same as a share of the points: no mask depends on it. */
const SETTLED = 25;
const SETTLED_SHARE = 0.1;

/**
 * Fits all bands with one pattern: profile -> fit -> bands against the fit (gain, stray light) -> noise and cells to leave
 * out -> better profile, a few times over. Null when no start leads anywhere.
 */
export function fitBands(
  data: BandData,
  aroundPx: number,
  prior: CurvePrior | null,
  limits: LightLimits,
  leaveOut: (u: number) => boolean,
  how: FitStart,
): BandFit | null {
  const state = freshState(data);
  const grid = gridOf(data);
  for (let cell = 0; cell < state.left.length; cell++) {
    if (leaveOut(data.u[cell])) state.left[cell] = LEFT.person;
    else if (data.light[cell] > NEAR_WHITE * limits.clip) state.left[cell] = LEFT.clipped;
  }
  if (state.left.some((why) => why === LEFT.clipped)) chainGains(data, state);
  placeCells(data, state, grid);
  const profile = scaledFirst(combineBands(data, state, grid, null, aroundPx));
  if (countUsed(profile) < FEWEST_POINTS) return null;
  const first =
    how.from === null
      ? fitProfile(profile, aroundPx, prior)
      : fitFrom(profile, how.from, plainTerms(prior), prior, how.asItIs);
  if (first === null) return null;
  const fit = rebase(profile, first, stepsToZero(first, how.zeroAtPx));
  const table = tableFor(data, grid, fit);
  // A pen line would count as a change of every band's gain, and all of them be thrown out.
  if (how.asItIs) maskBins({ state, grid, fit }, profile);
  const { shifts } = alignBands(data, state, grid, table, fit);
  let band: BandFit = {
    data,
    fit,
    profile,
    state,
    grid,
    table,
    shifts,
    limits,
    zeroAtPx: how.zeroAtPx,
    settled: false,
  };
  for (let round = 0; round < how.rounds; round++) {
    const next = refineBands(band, band.fit.layout.terms);
    if (next === null) return null;
    band = next;
    if (band.settled) break;
  }
  return how.zeroAtPx === null ? withBestZero(band) : band;
}

/** Bands count as aligned once a turn moves none of them by more than this share of a fringe. */
const ALIGNED = 0.02;
const MOST_TURNS = 4;

/** Every band against the fit, until lean and fan are undone: the regression sees a displacement in its first order only. */
function alignBands(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  table: FitTable,
  fit: ProfileFit,
): { shifts: BandShifts; moved: boolean } {
  const spacingPx = fit.result.parameters[0] * fit.unitPx;
  const reach = Math.max(...data.bandV.map(Math.abs));
  table.fill(state.view);
  for (let turn = 1; ; turn++) {
    const { lean, fan } = state;
    const shifts = regressBands(data, state, grid, fit);
    undoLean(data, state, shifts, spacingPx);
    undoFan(data, state, shifts);
    const moved = reach * (Math.abs(state.lean - lean) + grid.half * Math.abs(state.fan - fan));
    if (turn === MOST_TURNS || moved < ALIGNED * spacingPx) return { shifts, moved: turn > 1 };
    viewCells(data, state, grid, table);
  }
}

/**
 * Bands are compared with each other only after a lean between them is undone: displaced fringes would count as outliers,
 * and what shows the lean would be masked.
 */
function undoLean(data: BandData, state: BandState, shifts: BandShifts, spacingPx: number): void {
  const { b } = robustLine(data.bandV, shifts.shift, shifts.shiftWeight, spacingPx / 3);
  const reach = Math.max(...data.bandV.map(Math.abs));
  // A step that moves the outer bands by more than a third of a fringe is no measurement of this fringe any more.
  if (!Number.isFinite(b) || Math.abs(b) * reach > spacingPx / 3) return;
  state.lean += b;
  for (let k = 0; k < data.bands; k++) {
    state.shift[k] = state.lean * data.bandV[k];
    // What is undone now is no longer beyond the state.
    shifts.shift[k] -= b * data.bandV[k];
  }
}

const FAN_SIGMAS = 5;

/**
 * A view from above or below makes the spacing change along the fringes. Where that shows, every band is stretched back to
 * the spacing in the middle of the region; mixed as they are, the outer orders would wash out.
 */
function undoFan(data: BandData, state: BandState, shifts: BandShifts): void {
  const fan = weightedLine(data.bandV, shifts.stretch, shifts.stretchWeight);
  const scatter = fan.chiSquare / Math.max(1, fan.n - 2);
  // Weights have no scale before the noise is known: then the scatter is all there is.
  const ub = fan.ub * Math.sqrt(state.noise === null ? scatter : Math.max(1, scatter));
  if (!Number.isFinite(fan.b) || !(Math.abs(fan.b) > FAN_SIGMAS * ub)) return;
  state.fan += fan.b;
  for (let k = 0; k < data.bands; k++) {
    state.stretch[k] = state.fan * data.bandV[k];
    shifts.stretch[k] -= fan.b * data.bandV[k];
  }
}

/** Weighted line without values beyond `most`, then without those beyond four of the remaining ones' median distance. */
function robustLine(
  t: Float64Array,
  y: Float64Array,
  w: Float64Array,
  most: number,
): { a: number; b: number } {
  const kept = w.map((v, i) => (Math.abs(y[i]) < most ? v : 0));
  const first = weightedLine(t, y, kept);
  const off = y.map((v, i) => Math.abs(v - first.a - first.b * t[i]) * Math.sqrt(kept[i]));
  const sizes = off.filter((_, i) => kept[i] > 0).sort();
  const limit = 4 * 1.48 * (sizes[sizes.length >> 1] ?? 0);
  return weightedLine(
    t,
    y,
    kept.map((v, i) => (off[i] <= limit ? v : 0)),
  );
}

/** Where the exact geometry tells fringes apart, the zero order is the one with which the pattern fits best. */
function withBestZero(band: BandFit): BandFit | null {
  const { fit } = band;
  const p = fit.result.parameters;
  const covariance = fit.result.covariance;
  const curve = fit.layout.curve >= 0 ? p[fit.layout.curve] : fit.fixed.curve;
  if (covariance === null || !(1.5 * (curve * p[0]) ** 2 > 0.2 * Math.sqrt(covariance[0]))) return band;
  const choice = chooseZero(band.profile, fit);
  if (choice.fit === fit) return band;
  const table = tableFor(band.data, band.grid, choice.fit);
  const zeroAtPx = choice.fit.originPx + choice.fit.result.parameters[1] * choice.fit.unitPx;
  return refineBands({ ...band, fit: choice.fit, table, zeroAtPx }, fit.layout.terms);
}

/** One more round: noise and masks from the bands' agreement, a new profile, the fit with these terms, the bands again. */
export function refineBands(before: BandFit, terms: ModelTerms): BandFit | null {
  const { data, state, grid } = before;
  const spacing = before.fit.result.parameters[0] * before.fit.unitPx;
  viewCells(data, state, grid, before.table);
  const agreed = new AgreedLight(before);
  measureNoise(before, agreed);
  maskCells(before, agreed);
  const expected = expectedOn(grid, before.table);
  const whole = combineBands(data, state, grid, expected, spacing);
  const masked = maskBins(before, whole);
  const profile = masked ? combineBands(data, state, grid, expected, spacing) : whole;
  if (countUsed(profile) < FEWEST_POINTS) return null;
  const next = refit(profile, before.fit, terms);
  const fit = rebase(profile, next, stepsToZero(next, before.zeroAtPx));
  const table = tableFor(data, grid, fit);
  const { shifts, moved } = alignBands(data, state, grid, table, fit);
  return { ...before, fit, profile, table, shifts, settled: !masked && !moved && isSettled(next) };
}

/** Was the fit what it is now before its last round, up to what noise and misfit make of chi-square anyway? */
function isSettled({ result }: ProfileFit): boolean {
  const dof = Math.max(1, result.dof);
  const scale = Math.max(1, result.chiSquare / dof);
  return result.startChiSquare - result.chiSquare < scale * Math.max(SETTLED, SETTLED_SHARE * dof);
}

/** Without a noise model the profile's own scatter stands in: differences of neighbours. */
function scaledFirst(profile: Profile): Profile {
  const steps = new Float64Array(profile.size);
  let n = 0;
  for (let i = 2; i < profile.size; i++) {
    const [a, b, c] = [profile.sigma[i - 2], profile.sigma[i - 1], profile.sigma[i]];
    if (Number.isFinite(a) && Number.isFinite(b) && Number.isFinite(c)) {
      steps[n++] =
        Math.abs(profile.light[i] - 2 * profile.light[i - 1] + profile.light[i - 2]) /
        Math.sqrt(a * a + 4 * b * b + c * c);
    }
  }
  const scale = n > 0 ? Math.max(1e-9, steps.subarray(0, n).sort()[n >> 1] / 0.6745) : 1;
  return { ...profile, sigma: profile.sigma.map((s) => s * scale) };
}

function countUsed(profile: Profile): number {
  let n = 0;
  for (let i = 0; i < profile.size; i++) if (Number.isFinite(profile.sigma[i])) n++;
  return n;
}

export interface TiltFit {
  /** d(shift)/dv: tangent of the angle by which the fringes lean against the region. */
  slope: number;
  uSlope: number;
  /** Second derivative of the shift along the fringes (px per px^2) and how far it bows over half the height, px. */
  bowPx: number;
  uBowPx: number;
  /** Change of spacing along the fringes, relative per px. */
  fan: number;
  uFan: number;
  /** The same bow in the spacing: relative change of spacing over half the height, even in v. Rings have it. */
  barrel: number;
  uBarrel: number;
}

/** Straight line and parabola through the bands' shifts, straight line through their stretches. */
export function fitTilt(band: BandFit): TiltFit {
  const { data, shifts, state } = band;
  const line = weightedLine(data.bandV, shifts.shift, shifts.shiftWeight);
  const scatter = Math.max(1, line.chiSquare / Math.max(1, line.n - 2));
  const fan = weightedLine(data.bandV, shifts.stretch, shifts.stretchWeight);
  const fanScatter = Math.max(1, fan.chiSquare / Math.max(1, fan.n - 2));
  const half = Math.max(...data.bandV.map(Math.abs), 1e-9);
  const squares = data.bandV.map((v) => (v / half) ** 2 - 1 / 3);
  const rest = shifts.shift.map((s, i) => s - line.a - line.b * data.bandV[i]);
  const bow = weightedLine(squares, rest, shifts.shiftWeight);
  const barrel = weightedLine(
    squares,
    shifts.stretch.map((s, i) => s - fan.a - fan.b * data.bandV[i]),
    shifts.stretchWeight,
  );
  return {
    barrel: barrel.b,
    uBarrel: barrel.ub * Math.sqrt(fanScatter),
    slope: state.lean + line.b,
    uSlope: line.ub * Math.sqrt(scatter),
    bowPx: bow.b,
    uBowPx: bow.ub * Math.sqrt(scatter),
    fan: state.fan + fan.b,
    uFan: fan.ub * Math.sqrt(fanScatter),
  };
}
