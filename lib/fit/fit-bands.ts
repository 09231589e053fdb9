import {
  chainGains,
  combineBands,
  commonU,
  freshState,
  gainIn,
  gridOf,
  LEFT,
  regressBands,
  strayIn,
  tableFor,
  type BandData,
  type BandShifts,
  type BandState,
  type CommonGrid,
  type FitTable,
} from './bands';
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
import { fitNoise, varianceAt, type Noise } from './noise';
import type { StartValues } from './start-values';
import type { Profile } from './profile';
import type { ModelTerms } from './two-slit-model';
import { weightedLine } from './small-matrix';

/** Limits of the camera in linear light; a limit that does not occur is infinite. */
export interface LightLimits {
  clip: number;
  floor: number;
  /** Smallest variance of a pixel: rounding to codes. */
  leastVariance: number;
}

/** How a fit starts: from values of an earlier one or from a scan, with how many rounds, and a person's zero order. */
export interface FitStart {
  from: StartValues | null;
  /** The start values are a fit of the same region: masks are made with them before anything is fitted. */
  asItIs: boolean;
  rounds: number;
  /** Where a person wants the zero order, px; null leaves it to the envelope and the geometry. */
  zeroAtPx: number | null;
}

export interface BandFit {
  data: BandData;
  fit: ProfileFit;
  profile: Profile;
  state: BandState;
  grid: CommonGrid;
  table: FitTable;
  shifts: BandShifts;
  limits: LightLimits;
  leaveOut: (u: number) => boolean;
  /** A zero order that is settled, px; null follows the envelope. */
  zeroAtPx: number | null;
}

const OUTLIER_SIGMAS = 5;
const NEIGHBOUR_SIGMAS = 3.5;
/** Before there is a fit, cells this near the white level count as clipped. */
const NEAR_WHITE = 0.94;
const FEWEST_POINTS = 12;

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
  if (how.asItIs) maskBins({ data, state, grid, table, fit }, profile);
  const shifts = regressBands(data, state, grid, table, fit);
  undoLean(data, state, shifts, fit.result.parameters[0] * fit.unitPx);
  undoFan(data, state, shifts);
  let band: BandFit = {
    data,
    fit,
    profile,
    state,
    grid,
    table,
    shifts,
    limits,
    leaveOut,
    zeroAtPx: how.zeroAtPx,
  };
  for (let round = 0; round < how.rounds; round++) {
    const next = refineBands(band, band.fit.layout.terms);
    if (next === null) return null;
    band = next;
  }
  return how.zeroAtPx === null ? withBestZero(band) : band;
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
  const ub = fan.ub * Math.sqrt(Math.max(1, fan.chiSquare / Math.max(1, fan.n - 2)));
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
  const { data, state, grid, limits } = before;
  const spacing = before.fit.result.parameters[0] * before.fit.unitPx;
  const agreed = agreeOn(before);
  measureNoise(before, agreed);
  maskCells(before, agreed);
  const expected = expectedOn(grid, before.table);
  const whole = combineBands(data, state, grid, expected, spacing);
  const profile = maskBins(before, whole) ? combineBands(data, state, grid, expected, spacing) : whole;
  if (countUsed(profile) < FEWEST_POINTS) return null;
  const next = refit(profile, before.fit, terms);
  const fit = rebase(profile, next, stepsToZero(next, before.zeroAtPx));
  const table = tableFor(data, grid, fit);
  const shifts = regressBands(data, state, grid, table, fit);
  undoLean(data, state, shifts, fit.result.parameters[0] * fit.unitPx);
  undoFan(data, state, shifts);
  return { ...before, fit, profile, table, shifts, limits };
}

/** Without a noise model the profile's own scatter stands in: differences of neighbours. */
function scaledFirst(profile: Profile): Profile {
  const steps: number[] = [];
  for (let i = 2; i < profile.size; i++) {
    const [a, b, c] = [profile.sigma[i - 2], profile.sigma[i - 1], profile.sigma[i]];
    if (Number.isFinite(a) && Number.isFinite(b) && Number.isFinite(c)) {
      steps.push(
        Math.abs(profile.light[i] - 2 * profile.light[i - 1] + profile.light[i - 2]) /
          Math.sqrt(a * a + 4 * b * b + c * c),
      );
    }
  }
  steps.sort((a, b) => a - b);
  const scale = Math.max(1e-9, (steps[steps.length >> 1] ?? 1) / 0.6745);
  return { ...profile, sigma: profile.sigma.map((s) => s * scale) };
}

function countUsed(profile: Profile): number {
  let n = 0;
  for (let i = 0; i < profile.size; i++) if (Number.isFinite(profile.sigma[i])) n++;
  return n;
}

export function expectedOn(grid: CommonGrid, table: FitTable): Float64Array {
  return Float64Array.from({ length: grid.bins }, (_, k) =>
    table.lightAt(grid.from + (k + 0.5) * grid.pitchPx),
  );
}

/**
 * Light the bands agree on at the middle of each bin: their median, so that what only some of them show (dust, marks) does
 * not count; the fit's light where fewer than three bands say anything.
 */
function agreeOn(band: BandFit): Float64Array {
  const { data, state, grid, table } = band;
  const values: number[][] = Array.from({ length: grid.bins }, () => []);
  for (let b = 0; b < data.bands; b++) {
    if (!(state.gain[b] > 0)) continue;
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      const why = state.left[cell];
      if (data.pixels[cell] === 0 || (why !== LEFT.used && why !== LEFT.outlier)) continue;
      const u = commonU(data, state, b, cell);
      const k = Math.floor((u - grid.from) / grid.pitchPx);
      if (k < 0 || k >= grid.bins) continue;
      const own = (data.light[cell] - strayIn(state, grid, b, u)) / gainIn(data, state, grid, b, cell);
      values[k].push(own - table.lightAt(u) + table.lightAt(grid.from + (k + 0.5) * grid.pitchPx));
    }
  }
  return Float64Array.from(values, (v, k) =>
    v.length < 3 ? table.lightAt(grid.from + (k + 0.5) * grid.pitchPx) : medianOf(v),
  );
}

function medianOf(values: number[]): number {
  const sorted = Float64Array.from(values).sort();
  const mid = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[mid] : 0.5 * (sorted[mid - 1] + sorted[mid]);
}

/** The same light at a cell: carried from the middle of its bin to its own place, with the band's gain and stray light. */
function agreedIn(band: BandFit, agreed: Float64Array, b: number, cell: number): number {
  const { data, state, grid, table } = band;
  const u = commonU(data, state, b, cell);
  const k = Math.floor((u - grid.from) / grid.pitchPx);
  if (k < 0 || k >= grid.bins) return NaN;
  const light = agreed[k] + table.lightAt(u) - table.lightAt(grid.from + (k + 0.5) * grid.pitchPx);
  return strayIn(state, grid, b, u) + gainIn(data, state, grid, b, cell) * light;
}

const NOISE_CELLS = 4000;

/** Every how many cells are looked at: no common factor with the bins, or only some places would ever be seen. */
export function strideOver(cells: number, wanted: number, bins: number): number {
  const common = (a: number, b: number): number => (b === 0 ? a : common(b, a % b));
  let every = Math.max(1, Math.floor(cells / wanted));
  while (common(bins, every) > 1) every++;
  return every;
}

function measureNoise(band: BandFit, agreed: Float64Array): void {
  const { data, state, limits } = band;
  const step = strideOver(data.bins * data.bands, NOISE_CELLS, data.bins);
  const most = Math.ceil(data.light.length / step);
  const light = new Float64Array(most);
  const q = new Float64Array(most);
  let n = 0;
  // Each band spends five parameters on its bins, each bin of the profile one on its bands.
  const rest = Math.max(0.2, 1 - 5 / data.bins - 1 / Math.max(2, data.bands));
  for (let cell = 0; cell < data.light.length; cell += step) {
    const b = Math.floor(cell / data.bins);
    if (data.pixels[cell] === 0 || state.left[cell] !== LEFT.used || !(state.gain[b] > 0)) continue;
    const expected = agreedIn(band, agreed, b, cell);
    if (!Number.isFinite(expected)) continue;
    const r = data.light[cell] - expected;
    light[n] = expected;
    q[n++] = (r * r * data.pixels[cell]) / rest;
  }
  state.noise = fitNoise(light.subarray(0, n), q.subarray(0, n), limits.leastVariance);
}

/** Marks cells that are clipped, at the floor, or differ from what the other bands show there. */
function maskCells(band: BandFit, agreed: Float64Array): void {
  const { data, state, limits, leaveOut } = band;
  const noise = state.noise;
  if (noise === null) return;
  const black = limits.floor + 4 * Math.sqrt(varianceAt({ ...noise, grain: 0 }, Math.max(0, limits.floor)));
  const far = new Float32Array(data.light.length);
  for (let b = 0; b < data.bands; b++) {
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      if (data.pixels[cell] === 0) continue;
      if (leaveOut(data.u[cell])) {
        state.left[cell] = LEFT.person;
        continue;
      }
      state.left[cell] = LEFT.used;
      if (!(state.gain[b] > 0)) continue;
      const expected = agreedIn(band, agreed, b, cell);
      if (reachesWhite(noise, expected, limits.clip)) state.left[cell] = LEFT.clipped;
      else if (expected < black) state.left[cell] = LEFT.floor;
      else
        far[cell] =
          Math.abs(data.light[cell] - expected) / Math.sqrt(varianceAt(noise, expected) / data.pixels[cell]);
    }
  }
  for (let b = 0; b < data.bands; b++) {
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      if (!(far[cell] > OUTLIER_SIGMAS)) continue;
      state.left[cell] = LEFT.outlier;
      for (let d = -1; d <= 1; d += 2) {
        for (let k = j + d; k >= 0 && k < data.bins && far[b * data.bins + k] > NEIGHBOUR_SIGMAS; k += d)
          state.left[b * data.bins + k] = LEFT.outlier;
      }
    }
  }
}

/**
 * Would some pixels of this mean be clipped? Four standard deviations of the camera's noise; two of grain, whose own
 * scatter is so much larger that what is cut off does not matter beside it.
 */
function reachesWhite(noise: Noise, light: number, clip: number): boolean {
  if (!Number.isFinite(clip)) return false;
  const camera = 4 * Math.sqrt(varianceAt({ ...noise, grain: 0 }, light));
  return light + camera + 2 * Math.sqrt(noise.grain) * Math.max(0, light) > clip;
}

const LONGEST_RUN_FRINGES = 1.2;
const MOST_BINS_LEFT = 0.25;
/** A run ends where the misfit has fallen to this share of its peak. */
const RUN_EDGE = 0.1;

/**
 * Leaves out what all bands show in one place and the fit does not: a dead column, a pen line. Only where most of the profile
 * follows the fit (the yardstick is the median misfit), so that a wrong model does not mask the data that speak against it.
 */
function maskBins(
  band: Pick<BandFit, 'data' | 'state' | 'grid' | 'table' | 'fit'>,
  agreed: Profile,
): boolean {
  const { data, state, grid, table, fit } = band;
  const z = new Float64Array(grid.bins);
  const sizes: number[] = [];
  for (let k = 0; k < grid.bins; k++) {
    if (!Number.isFinite(agreed.sigma[k])) continue;
    z[k] = Math.abs(agreed.light[k] - table.lightAt(agreed.u[k])) / agreed.sigma[k];
    sizes.push(z[k]);
  }
  if (sizes.length === 0) return false;
  sizes.sort((a, b) => a - b);
  const scale = Math.max(1, sizes[sizes.length >> 1] / 0.6745);
  const longest = (LONGEST_RUN_FRINGES * fit.result.parameters[0] * fit.unitPx) / grid.pitchPx;
  const out = new Uint8Array(grid.bins);
  let count = 0;
  for (let k = 0; k < grid.bins; k++) {
    if (!(z[k] > OUTLIER_SIGMAS * scale)) continue;
    let peak = k;
    while (peak + 1 < grid.bins && z[peak + 1] > z[peak]) peak++;
    // What a spike does to the fit beside it does not belong to it.
    const edge = Math.max(NEIGHBOUR_SIGMAS * 0.7 * scale, RUN_EDGE * z[peak]);
    let from = peak;
    let to = peak;
    while (from > 0 && z[from - 1] > edge) from--;
    while (to + 1 < grid.bins && z[to + 1] > edge) to++;
    if (to - from + 1 <= longest) {
      out.fill(1, Math.max(0, from - 1), Math.min(grid.bins, to + 2));
      count += to - from + 3;
    }
    k = Math.max(k, to);
  }
  if (count === 0 || count > MOST_BINS_LEFT * sizes.length) return false;
  for (let b = 0; b < data.bands; b++) {
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      if (state.left[cell] !== LEFT.used) continue;
      const k = Math.floor((commonU(data, state, b, cell) - grid.from) / grid.pitchPx);
      if (k >= 0 && k < grid.bins && out[k] === 1) state.left[cell] = LEFT.outlier;
    }
  }
  return true;
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
