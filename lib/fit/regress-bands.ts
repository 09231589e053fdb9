import { LEFT, strayAt, type BandData, type BandState, type CommonGrid } from './cells';
import type { ProfileFit } from './fit-profile';
import { varianceAt } from './noise';
import { inverseSymmetric } from './small-matrix';

/** A band whose gain is known to less than 8 % says nothing about the pattern. */
const LEAST_GAIN_INFORMATION = 150;
/** A band whose light changes by more than this share from its middle to its end is half in the dark: it is not used. */
const MOST_ALONG = 0.8;
/** Relative scatter of a pixel assumed before the noise is known. */
const OWN_NOISE = 0.1;

export interface BandShifts {
  /** Displacement of the fringes in each band beyond what the state already undoes, px, and 1/u^2. */
  shift: Float64Array;
  shiftWeight: Float64Array;
  /** Relative change of spacing in each band beyond the state's stretch, and 1/u^2. */
  stretch: Float64Array;
  stretchWeight: Float64Array;
}

type Bend = (u: number) => number;

/** Bend of the fitted background (its terms of second order and up) in light of the profile; null where it has none. */
function bendOf(fit: ProfileFit): Bend | null {
  const n = fit.layout.terms.background;
  const p = fit.result.parameters;
  if (n < 3) return null;
  return (u) => {
    const z = ((u - fit.originPx) / fit.unitPx - fit.fixed.centre) / fit.fixed.half;
    let before = 1;
    let here = z;
    let sum = 0;
    for (let k = 2; k < n; k++) {
      const next = ((2 * k - 1) * z * here - (k - 1) * before) / k;
      before = here;
      here = next;
      sum += p[6 + k] * next;
    }
    return sum * fit.unitLight;
  };
}

/**
 * Sums over the cells of one band: w times the products of 1, P and P' with each other and with z^0, z^1, z^2, which are all
 * the Gram matrix of the regression consists of; w times light; and the same with the bend q of the background.
 */
class BandSums {
  readonly gram: Float64Array;
  readonly rhs: Float64Array;

  constructor(readonly terms: 6 | 7) {
    this.gram = new Float64Array(terms * terms);
    this.rhs = new Float64Array(terms);
  }

  /** Adds up one band; the cells must be viewed. */
  fill(data: BandData, state: BandState, grid: CommonGrid, band: number, bend: Bend | null): void {
    const { u: place, bin, light: fitted, slope: steepness } = state.view;
    const { left } = state;
    const perHalf = 1 / grid.half;
    let w0 = 0;
    let w1 = 0;
    let w2 = 0;
    let p0 = 0;
    let p1 = 0;
    let p2 = 0;
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let pp0 = 0;
    let pp1 = 0;
    let pp2 = 0;
    let ps0 = 0;
    let ps1 = 0;
    let ps2 = 0;
    let ss0 = 0;
    let ss1 = 0;
    let ss2 = 0;
    let l0 = 0;
    let l1 = 0;
    let lp0 = 0;
    let lp1 = 0;
    let ls0 = 0;
    let ls1 = 0;
    for (let cell = band * data.bins, end = cell + data.bins; cell < end; cell++) {
      if (bin[cell] < 0 || left[cell] !== LEFT.used) continue;
      const u = place[cell];
      const z = u * perHalf;
      const along = alongIn(state, band, data.dv[cell]);
      const p = along * fitted[cell];
      const s = along * steepness[cell];
      const w = weightOf(data, state, band, cell, p, u, z);
      const wz = w * z;
      const wzz = wz * z;
      const light = data.light[cell];
      w0 += w;
      w1 += wz;
      w2 += wzz;
      p0 += w * p;
      p1 += wz * p;
      p2 += wzz * p;
      s0 += w * s;
      s1 += wz * s;
      s2 += wzz * s;
      const pp = p * p;
      const ps = p * s;
      const ss = s * s;
      pp0 += w * pp;
      pp1 += wz * pp;
      pp2 += wzz * pp;
      ps0 += w * ps;
      ps1 += wz * ps;
      ps2 += wzz * ps;
      ss0 += w * ss;
      ss1 += wz * ss;
      ss2 += wzz * ss;
      const wl = w * light;
      const wzl = wz * light;
      l0 += wl;
      l1 += wzl;
      lp0 += wl * p;
      lp1 += wzl * p;
      ls0 += wl * s;
      ls1 += wzl * s;
    }
    // Columns: 1, z, P, -P', -z P', z P, and the bend.
    this.row(0, [w0, w1, p0, -s0, -s1, p1], l0);
    this.row(1, [w1, w2, p1, -s1, -s2, p2], l1);
    this.row(2, [p0, p1, pp0, -ps0, -ps1, pp1], lp0);
    this.row(3, [-s0, -s1, -ps0, ss0, ss1, -ps1], -ls0);
    this.row(4, [-s1, -s2, -ps1, ss1, ss2, -ps2], -ls1);
    this.row(5, [p1, p2, pp1, -ps1, -ps2, pp2], lp1);
    if (bend !== null) this.fillBend(data, state, grid, band, bend);
  }

  private row(k: number, values: number[], right: number): void {
    for (let l = 0; l < values.length; l++) this.gram[k * this.terms + l] = values[l];
    this.rhs[k] = right;
  }

  /** The column of the background's bend beside the others. */
  private fillBend(data: BandData, state: BandState, grid: CommonGrid, band: number, bend: Bend): void {
    const { u: place, bin, light: fitted, slope: steepness } = state.view;
    const { gram, rhs, terms } = this;
    const column = new Float64Array(terms);
    let right = 0;
    for (let cell = band * data.bins, end = cell + data.bins; cell < end; cell++) {
      if (bin[cell] < 0 || state.left[cell] !== LEFT.used) continue;
      const u = place[cell];
      const z = u / grid.half;
      const along = alongIn(state, band, data.dv[cell]);
      const p = along * fitted[cell];
      const s = along * steepness[cell];
      const q = bend(u);
      const wq = weightOf(data, state, band, cell, p, u, z) * q;
      column[0] += wq;
      column[1] += wq * z;
      column[2] += wq * p;
      column[3] -= wq * s;
      column[4] -= wq * s * z;
      column[5] += wq * p * z;
      column[6] += wq * q;
      right += wq * data.light[cell];
    }
    for (let k = 0; k < terms; k++) {
      gram[k * terms + 6] = column[k];
      gram[6 * terms + k] = column[k];
    }
    rhs[6] = right;
  }
}

/** What the gain's slope across the bands adds within one of them is put into the pattern it is compared with. */
function alongIn(state: BandState, band: number, dv: number): number {
  return state.gain[band] > 0 ? 1 + (state.gainSlope[band] * dv) / state.gain[band] : 1;
}

function weightOf(
  data: BandData,
  state: BandState,
  band: number,
  cell: number,
  pattern: number,
  u: number,
  z: number,
): number {
  if (state.noise === null) return data.pixels[cell];
  const g = state.gain[band] > 0 ? state.gain[band] : 1;
  return data.pixels[cell] / varianceAt(state.noise, g * pattern + strayAt(state, band, u, z));
}

/**
 * Fits every band as offset + slope z + gain P(u) (1 + along z) - shift P' - stretch u P', with its own share of a bent
 * background, and renews the state's gain and stray light. The cells must be viewed with this fit.
 * Shift and stretch are answered, not applied. Bands too poor for it get weight 0 and keep gain 0.
 */
export function regressBands(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  fit: ProfileFit,
): BandShifts {
  const n = data.bands;
  const out: BandShifts = {
    shift: new Float64Array(n),
    shiftWeight: new Float64Array(n),
    stretch: new Float64Array(n),
    stretchWeight: new Float64Array(n),
  };
  const bend = bendOf(fit);
  const T = bend === null ? 6 : 7;
  const sums = new BandSums(T);
  const { gram: a, rhs } = sums;
  const renewed = new Float64Array(n);
  const x = new Float64Array(T);
  for (let b = 0; b < n; b++) {
    sums.fill(data, state, grid, b, bend);
    const covariance = inverseSymmetric(a, T);
    if (covariance !== null) multiplyInto(x, covariance, rhs);
    const noisy = state.noise ? 1 : a[0] > 0 ? (OWN_NOISE * OWN_NOISE * rhs[0] * rhs[0]) / (a[0] * a[0]) : 1;
    if (
      covariance === null ||
      !(x[2] > 0.01) ||
      !((x[2] * x[2]) / covariance[2 * T + 2] > LEAST_GAIN_INFORMATION * noisy) ||
      Math.abs(x[5]) > MOST_ALONG * x[2]
    ) {
      state.gain[b] = 0;
      state.gainAlong[b] = 0;
      continue;
    }
    state.offset[b] = x[0];
    state.slope[b] = x[1];
    state.gainAlong[b] = x[5];
    renewed[b] = bend === null ? 0 : x[6];
    state.gain[b] = x[2];
    out.shift[b] = x[3] / x[2];
    out.shiftWeight[b] = (x[2] * x[2]) / covariance[3 * T + 3];
    out.stretch[b] = x[4] / x[2] / grid.half;
    out.stretchWeight[b] = (x[2] * x[2] * grid.half * grid.half) / covariance[4 * T + 4];
  }
  state.bend = renewed;
  state.bendOf = bend;
  normalise(data, state);
  return out;
}

function multiplyInto(out: Float64Array, a: Float64Array, b: Float64Array): void {
  const n = b.length;
  for (let i = 0; i < n; i++) {
    let s = 0;
    for (let j = 0; j < n; j++) s += a[i * n + j] * b[j];
    out[i] = s;
  }
}

/** Mean gain 1; offsets and slopes without a common part, which belongs to the profile. */
export function normalise(data: BandData, state: BandState): void {
  let g = 0;
  let n = 0;
  for (let b = 0; b < data.bands; b++) {
    if (state.gain[b] > 0) {
      g += state.gain[b];
      n++;
    }
  }
  if (n === 0) return;
  let gg = 0;
  let go = 0;
  let gs = 0;
  let gb = 0;
  let ga = 0;
  for (let b = 0; b < data.bands; b++) {
    state.gain[b] *= n / g;
    state.gainAlong[b] *= n / g;
    gg += state.gain[b] ** 2;
    go += state.gain[b] * state.offset[b];
    gs += state.gain[b] * state.slope[b];
    gb += state.gain[b] * state.bend[b];
    ga += state.gain[b] * state.gainAlong[b];
  }
  for (let b = 0; b < data.bands; b++) {
    state.offset[b] -= (state.gain[b] * go) / gg;
    state.slope[b] -= (state.gain[b] * gs) / gg;
    state.bend[b] -= (state.gain[b] * gb) / gg;
    state.gainAlong[b] -= (state.gain[b] * ga) / gg;
  }
  for (let b = 0; b < data.bands; b++) {
    const before = b > 0 && state.gain[b - 1] > 0 ? b - 1 : b;
    const after = b + 1 < data.bands && state.gain[b + 1] > 0 ? b + 1 : b;
    state.gainSlope[b] =
      state.gain[b] > 0 && after > before
        ? (state.gain[after] - state.gain[before]) / (data.bandV[after] - data.bandV[before])
        : 0;
  }
}
