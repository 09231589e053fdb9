import { chainGains, combineBands, commonU, freshState, gainIn, gridOf, LEFT, regressBands, tableFor, type BandData, type BandShifts, type BandState, type CommonGrid, type FitTable } from './bands';
import { fitProfile, refit, type CurvePrior, type ProfileFit } from './fit-profile';
import { fitNoise, varianceAt } from './noise';
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

export interface BandFit {
  data: BandData;
  fit: ProfileFit;
  profile: Profile;
  state: BandState;
  grid: CommonGrid;
  table: FitTable;
  shifts: BandShifts;
}

const ROUNDS = 3;
const OUTLIER_SIGMAS = 5;
const NEIGHBOUR_SIGMAS = 3.5;
/** Before there is a fit, cells this near the white level count as clipped. */
const NEAR_WHITE = 0.94;

/**
 * Fits all bands with one pattern: profile -> fit -> bands against the fit (gain, stray light, noise, cells to leave out)
 * -> better profile, a few times over. Null when no start leads anywhere.
 */
export function fitBands(data: BandData, aroundPx: number, prior: CurvePrior | null, limits: LightLimits, leaveOut: (u: number) => boolean): BandFit | null {
  const state = freshState(data);
  const grid = gridOf(data);
  for (let cell = 0; cell < state.left.length; cell++) {
    if (leaveOut(data.u[cell])) state.left[cell] = LEFT.person;
    else if (data.light[cell] > NEAR_WHITE * limits.clip) state.left[cell] = LEFT.clipped;
  }
  if (state.left.some((why) => why === LEFT.clipped)) chainGains(data, state);
  let profile = scaledFirst(combineBands(data, state, grid, null));
  if (countUsed(profile) < 12) return null;
  let fit = fitProfile(profile, aroundPx, prior);
  if (fit === null) return null;
  let table = tableFor(data, grid, fit);
  let shifts = regressBands(data, state, grid, table);
  for (let round = 0; round < ROUNDS; round++) {
    measureNoise(data, state, grid, table, limits);
    maskCells(data, state, grid, table, limits, leaveOut);
    profile = combineBands(data, state, grid, expectedOn(grid, table));
    if (countUsed(profile) < 12) return null;
    fit = refit(profile, fit, fit.layout.terms);
    table = tableFor(data, grid, fit);
    shifts = regressBands(data, state, grid, table);
  }
  return { data, fit, profile, state, grid, table, shifts };
}

/** One more round with other terms: the model earns them from the outside, see choose-terms. */
export function refitBands(before: BandFit, terms: ModelTerms): BandFit {
  const { data, state, grid } = before;
  const profile = combineBands(data, state, grid, expectedOn(grid, before.table));
  const fit = refit(profile, before.fit, terms);
  const table = tableFor(data, grid, fit);
  const shifts = regressBands(data, state, grid, table);
  return { data, fit, profile, state, grid, table, shifts };
}

/** Without a noise model the profile's own scatter stands in: differences of neighbours. */
function scaledFirst(profile: Profile): Profile {
  const steps: number[] = [];
  for (let i = 2; i < profile.size; i++) {
    const [a, b, c] = [profile.sigma[i - 2], profile.sigma[i - 1], profile.sigma[i]];
    if (Number.isFinite(a) && Number.isFinite(b) && Number.isFinite(c)) {
      steps.push(Math.abs(profile.light[i] - 2 * profile.light[i - 1] + profile.light[i - 2]) / Math.sqrt(a * a + 4 * b * b + c * c));
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
  return Float64Array.from({ length: grid.bins }, (_, k) => table.lightAt(grid.from + (k + 0.5) * grid.pitchPx));
}

/** What the fit expects in a cell. */
function expectedIn(data: BandData, state: BandState, grid: CommonGrid, table: FitTable, band: number, cell: number): number {
  const u = commonU(data, state, band, cell);
  return state.offset[band] + (state.slope[band] * u) / grid.half + gainIn(data, state, band, cell) * table.lightAt(u);
}

const NOISE_CELLS = 12000;

function measureNoise(data: BandData, state: BandState, grid: CommonGrid, table: FitTable, limits: LightLimits): void {
  const step = Math.max(1, Math.floor((data.bins * data.bands) / NOISE_CELLS));
  const light: number[] = [];
  const q: number[] = [];
  // Each band spends five parameters on its bins, each bin of the profile one on its bands.
  const rest = Math.max(0.2, 1 - 5 / data.bins - 1 / Math.max(2, data.bands));
  for (let cell = 0; cell < data.light.length; cell += step) {
    const band = Math.floor(cell / data.bins);
    if (data.pixels[cell] === 0 || state.left[cell] !== LEFT.used || !(state.gain[band] > 0)) continue;
    const expected = expectedIn(data, state, grid, table, band, cell);
    const r = data.light[cell] - expected;
    light.push(expected);
    q.push((r * r * data.pixels[cell]) / rest);
  }
  state.noise = fitNoise(Float64Array.from(light), Float64Array.from(q), limits.leastVariance);
}

/** Marks cells that are clipped, at the floor, or hold something that is not the pattern. */
function maskCells(data: BandData, state: BandState, grid: CommonGrid, table: FitTable, limits: LightLimits, leaveOut: (u: number) => boolean): void {
  const noise = state.noise;
  if (noise === null) return;
  const white = limits.clip - 4 * Math.sqrt(varianceAt(noise, limits.clip));
  const black = limits.floor + 4 * Math.sqrt(varianceAt(noise, Math.max(0, limits.floor)));
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
      const expected = expectedIn(data, state, grid, table, b, cell);
      if (expected > white) state.left[cell] = LEFT.clipped;
      else if (expected < black) state.left[cell] = LEFT.floor;
      else far[cell] = Math.abs(data.light[cell] - expected) / Math.sqrt(varianceAt(noise, expected) / data.pixels[cell]);
    }
  }
  for (let b = 0; b < data.bands; b++) {
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      if (!(far[cell] > OUTLIER_SIGMAS)) continue;
      state.left[cell] = LEFT.outlier;
      for (let d = -1; d <= 1; d += 2) {
        for (let k = j + d; k >= 0 && k < data.bins && far[b * data.bins + k] > NEIGHBOUR_SIGMAS; k += d) state.left[b * data.bins + k] = LEFT.outlier;
      }
    }
  }
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
}

/** Straight line and parabola through the bands' shifts, straight line through their stretches. */
export function fitTilt(data: BandData, shifts: BandShifts): TiltFit {
  const line = weightedLine(data.bandV, shifts.shift, shifts.shiftWeight);
  const scatter = Math.max(1, line.chiSquare / Math.max(1, line.n - 2));
  const fan = weightedLine(data.bandV, shifts.stretch, shifts.stretchWeight);
  const fanScatter = Math.max(1, fan.chiSquare / Math.max(1, fan.n - 2));
  const half = Math.max(...data.bandV.map(Math.abs), 1e-9);
  const squares = data.bandV.map((v) => (v / half) ** 2 - 1 / 3);
  const rest = shifts.shift.map((s, i) => s - line.a - line.b * data.bandV[i]);
  const bow = weightedLine(squares, rest, shifts.shiftWeight);
  return { slope: line.b, uSlope: line.ub * Math.sqrt(scatter), bowPx: bow.b, uBowPx: bow.ub * Math.sqrt(scatter), fan: fan.b, uFan: fan.ub * Math.sqrt(fanScatter) };
}
