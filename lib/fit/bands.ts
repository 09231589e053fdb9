import { AveragedModel, type ProfileFit } from './fit-profile';
import { varianceAt, type Noise } from './noise';
import { averagingNodes, type Profile } from './profile';
import { solveSymmetric } from './small-matrix';
import { ModelPoint } from './two-slit-model';

/** Bands along the fringes, each a profile of its own. Cells are [band * bins + bin]. */
export interface BandData {
  bins: number;
  bands: number;
  pitchPx: number;
  bandV: Float64Array;
  light: Float64Array;
  pixels: Float64Array;
  u: Float64Array;
  varU: Float64Array;
  dv: Float64Array;
  pixelVar: number;
  pixelFourth: number;
  /** Mean of varU over the cells with pixels. */
  meanVarU: number;
}

/** How each band differs from the common profile P: light = offset + slope z + gain P(u - shift). */
export interface BandState {
  gain: Float64Array;
  /** Change of the gain along the fringes, per px: cells of a band do not all have its mean v. */
  gainSlope: Float64Array;
  /** Change of the gain along the band, per half length: the edge of the light need not run along the bands. */
  gainAlong: Float64Array;
  offset: Float64Array;
  slope: Float64Array;
  /** Share of the fitted background's bend that this band has beyond its gain; the bend itself is `bendOf`. */
  bend: Float64Array;
  bendOf: ((u: number) => number) | null;
  shift: Float64Array;
  stretch: Float64Array;
  /** Tangent of the lean that `shift` undoes so far: shift = lean * v. */
  lean: number;
  /** Relative change of spacing per px along the fringes that `stretch` undoes so far: stretch = fan * v. */
  fan: number;
  /** Why a cell is left out; 0 is used. */
  left: Uint8Array;
  noise: Noise | null;
}

export const LEFT = { used: 0, clipped: 1, floor: 2, outlier: 3, person: 4, outside: 5 } as const;

export function freshState(data: BandData): BandState {
  const line = (v: number) => new Float64Array(data.bands).fill(v);
  return {
    gain: line(1),
    gainSlope: line(0),
    gainAlong: line(0),
    offset: line(0),
    slope: line(0),
    bend: line(0),
    bendOf: null,
    shift: line(0),
    stretch: line(0),
    lean: 0,
    fan: 0,
    left: new Uint8Array(data.bins * data.bands),
    noise: null,
  };
}

/**
 * Gains before there is a fit, where clipping takes different fringes from different bands: each band against the one
 * before it on the bins both show, by the ratio of their standard deviations (which noise does not pull to one side).
 */
export function chainGains(data: BandData, state: BandState): void {
  let gain = 1;
  for (let b = 1; b < data.bands; b++) {
    const s = { n: 0, x: 0, y: 0, xx: 0, yy: 0 };
    for (let j = 0; j < data.bins; j++) {
      const here = b * data.bins + j;
      const before = here - data.bins;
      if (
        data.pixels[here] === 0 ||
        data.pixels[before] === 0 ||
        state.left[here] !== LEFT.used ||
        state.left[before] !== LEFT.used
      )
        continue;
      s.n++;
      s.x += data.light[before];
      s.y += data.light[here];
      s.xx += data.light[before] ** 2;
      s.yy += data.light[here] ** 2;
    }
    const vx = s.xx - (s.x * s.x) / s.n;
    const vy = s.yy - (s.y * s.y) / s.n;
    if (s.n > 10 && vx > 0 && vy > 0) gain *= Math.sqrt(vy / vx);
    state.gain[b] = gain;
  }
  normalise(data, state);
}

/** Where the bands' common coordinate runs: u of the first bin's lower edge and the half length, px. */
export interface CommonGrid {
  from: number;
  half: number;
  bins: number;
  pitchPx: number;
}

export function gridOf(data: BandData): CommonGrid {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < data.u.length; i++) {
    if (!(data.pixels[i] > 0)) continue;
    if (data.u[i] < low) low = data.u[i];
    if (data.u[i] > high) high = data.u[i];
  }
  const bins = Math.max(1, Math.ceil((high - low) / data.pitchPx) + 1);
  return {
    from: low - data.pitchPx / 2,
    half: Math.max(1e-9, (high - low) / 2),
    bins,
    pitchPx: data.pitchPx,
  };
}

/** The common coordinate of a cell: the band's own shift and stretch undone. */
export function commonU(data: BandData, state: BandState, band: number, cell: number): number {
  return (data.u[cell] - state.shift[band]) / (1 + state.stretch[band]);
}

/** Stray light of a band at u beyond its share of the common profile. */
export function strayIn(state: BandState, grid: CommonGrid, band: number, u: number): number {
  const plain = state.offset[band] + (state.slope[band] * u) / grid.half;
  return state.bendOf === null ? plain : plain + state.bend[band] * state.bendOf(u);
}

/** Bend of the fitted background (its terms of second order and up) in light of the profile; null where it has none. */
function bendOf(fit: ProfileFit): ((u: number) => number) | null {
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

/** The gain at a cell's own place along the fringes. */
export function gainIn(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  band: number,
  cell: number,
): number {
  const g = state.gain[band];
  return Math.max(
    0.05 * g,
    g + state.gainSlope[band] * data.dv[cell] + (state.gainAlong[band] * data.u[cell]) / grid.half,
  );
}

/**
 * One profile from all bands: in each bin of the common coordinate the weighted mean of (light - offset - slope z)/gain
 * with weights pixels * gain^2 / variance(light of the fit), never of the observed light.
 * `expected` is the light the last fit expects on the same grid; absent before the first fit.
 */
export function combineBands(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  expected: Float64Array | null,
  spacingPx: number,
): Profile {
  const n = grid.bins;
  const sw = new Float64Array(n);
  const sz = new Float64Array(n);
  const su = new Float64Array(n);
  const suu = new Float64Array(n);
  const sv = new Float64Array(n);
  const scale = 1 / grid.pitchPx;
  for (let b = 0; b < data.bands; b++) {
    if (!(state.gain[b] > 0)) continue;
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      const pixels = data.pixels[cell];
      if (pixels === 0 || state.left[cell] !== LEFT.used) continue;
      const u = commonU(data, state, b, cell);
      const g = gainIn(data, state, grid, b, cell);
      const k = Math.floor((u - grid.from) * scale);
      if (k < 0 || k >= n) continue;
      const extra = strayIn(state, grid, b, u);
      let variance = 1;
      if (expected && state.noise) variance = varianceAt(state.noise, g * expected[k] + extra);
      const w = (pixels * g * g) / variance;
      sw[k] += w;
      sz[k] += (w * (data.light[cell] - extra)) / g;
      su[k] += w * u;
      suu[k] += w * u * u;
      sv[k] += w * data.varU[cell];
    }
  }
  return profileFrom(data, { sw, sz, su, suu, sv }, spacingPx);
}

function profileFrom(
  data: BandData,
  sums: Record<'sw' | 'sz' | 'su' | 'suu' | 'sv', Float64Array>,
  spacingPx: number,
): Profile {
  const n = sums.sw.length;
  const profile: Profile = {
    u: new Float64Array(n),
    node: new Float64Array(n),
    nodeWeight: new Float64Array(n),
    light: new Float64Array(n),
    sigma: new Float64Array(n).fill(Infinity),
    size: n,
  };
  for (let k = 0; k < n; k++) {
    const w = sums.sw[k];
    if (!(w > 0)) continue;
    const u = sums.su[k] / w;
    const bin = Math.max(0, sums.suu[k] / w - u * u) + sums.sv[k] / w;
    profile.u[k] = u;
    profile.light[k] = sums.sz[k] / w;
    profile.sigma[k] = 1 / Math.sqrt(w);
    const { node, weight } = averagingNodes(
      data.pixelVar + bin,
      data.pixelFourth + 1.8 * bin * bin + 6 * data.pixelVar * bin,
      spacingPx,
    );
    profile.node[k] = node;
    profile.nodeWeight[k] = weight;
  }
  return profile;
}

/** The fitted light and its derivative along u on an even grid, for quick look-up by cubic interpolation. */
export class FitTable {
  readonly light: Float64Array;
  readonly slope: Float64Array;
  private readonly step: number;
  /** Last index an interval may start at. */
  private readonly last: number;

  constructor(
    fit: ProfileFit,
    readonly from: number,
    to: number,
    pitchPx: number,
    extent: { variance: number; fourth: number },
  ) {
    const spacing = fit.result.parameters[0] * fit.unitPx;
    this.step = Math.min(pitchPx, spacing / 20);
    const n = Math.max(2, Math.ceil((to - from) / this.step) + 2);
    this.last = n - 2;
    this.light = new Float64Array(n);
    this.slope = new Float64Array(n);
    const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
    const { node, weight } = averagingNodes(extent.variance, extent.fourth, spacing);
    for (let i = 0; i < n; i++) {
      const x = (from + i * this.step - fit.originPx) / fit.unitPx;
      if (!model.evaluate(fit.result.parameters, x, node / fit.unitPx, weight, false)) continue;
      this.light[i] = model.light * fit.unitLight;
      this.slope[i] = (model.slope * fit.unitLight) / fit.unitPx;
    }
  }

  lightAt(u: number): number {
    const t = (u - this.from) / this.step;
    const i = t < 0 ? 0 : t > this.last ? this.last : t | 0;
    const f = t - i < 0 ? 0 : t - i > 1 ? 1 : t - i;
    const a = this.light[i];
    const b = this.light[i + 1];
    const c = this.slope[i] * this.step;
    const d = this.slope[i + 1] * this.step;
    // Cubic with the values and slopes at both ends.
    return a + f * (c + f * (3 * (b - a) - 2 * c - d + f * (2 * (a - b) + c + d)));
  }

  slopeAt(u: number): number {
    const t = (u - this.from) / this.step;
    const i = t < 0 ? 0 : t > this.last ? this.last : t | 0;
    const f = t - i < 0 ? 0 : t - i > 1 ? 1 : t - i;
    return this.slope[i] + f * (this.slope[i + 1] - this.slope[i]);
  }
}

export function tableFor(data: BandData, grid: CommonGrid, fit: ProfileFit): FitTable {
  const bin = data.meanVarU;
  const margin = 3 * grid.pitchPx;
  return new FitTable(fit, grid.from - margin, grid.from + grid.bins * grid.pitchPx + margin, grid.pitchPx, {
    variance: data.pixelVar + bin,
    fourth: data.pixelFourth + 1.8 * bin * bin + 6 * data.pixelVar * bin,
  });
}

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

/**
 * Fits every band as offset + slope z + gain P(u) (1 + along z) - shift P' - stretch u P', with its own share of a bent background, and
 * renews the state's gain and stray light.
 * Shift and stretch are answered, not applied. Bands too poor for it get weight 0 and keep gain 0.
 */
export function regressBands(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  table: FitTable,
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
  const a = new Float64Array(T * T);
  const rhs = new Float64Array(T);
  const t = new Float64Array(T);
  const renewed = new Float64Array(n);
  for (let b = 0; b < n; b++) {
    a.fill(0);
    rhs.fill(0);
    const g = state.gain[b] > 0 ? state.gain[b] : 1;
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      if (data.pixels[cell] === 0 || state.left[cell] !== LEFT.used) continue;
      const u = commonU(data, state, b, cell);
      // What the gain's slope across the bands adds within this one is put into the pattern it is compared with.
      const along = state.gain[b] > 0 ? 1 + (state.gainSlope[b] * data.dv[cell]) / state.gain[b] : 1;
      const p = along * table.lightAt(u);
      const slope = along * table.slopeAt(u);
      const w =
        data.pixels[cell] / (state.noise ? varianceAt(state.noise, g * p + strayIn(state, grid, b, u)) : 1);
      t[0] = 1;
      t[1] = u / grid.half;
      t[2] = p;
      t[3] = -slope;
      t[4] = (-slope * u) / grid.half;
      t[5] = (p * u) / grid.half;
      if (bend !== null) t[6] = bend(u);
      for (let k = 0; k < T; k++) {
        const wt = w * t[k];
        rhs[k] += wt * data.light[cell];
        for (let l = k; l < T; l++) a[k * T + l] += wt * t[l];
      }
    }
    for (let k = 0; k < T; k++) for (let l = 0; l < k; l++) a[k * T + l] = a[l * T + k];
    const x = solveSymmetric(a, rhs, T);
    const noisy = state.noise ? 1 : a[0] > 0 ? (OWN_NOISE * OWN_NOISE * rhs[0] * rhs[0]) / (a[0] * a[0]) : 1;
    if (
      x === null ||
      !(x[2] > 0.01) ||
      !(informationOf(a, T, 2) * x[2] * x[2] > LEAST_GAIN_INFORMATION * noisy) ||
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
    out.shiftWeight[b] = informationOf(a, T, 3) * x[2] * x[2];
    out.stretch[b] = x[4] / x[2] / grid.half;
    out.stretchWeight[b] = informationOf(a, T, 4) * x[2] * x[2] * grid.half * grid.half;
  }
  state.bend = renewed;
  state.bendOf = bend;
  normalise(data, state);
  return out;
}

/** 1 / (inverse of a)_kk */
function informationOf(a: Float64Array, n: number, k: number): number {
  const e = new Float64Array(n);
  e[k] = 1;
  const x = solveSymmetric(a, e, n);
  return x !== null && x[k] > 0 ? 1 / x[k] : 0;
}

/** Mean gain 1; offsets and slopes without a common part, which belongs to the profile. */
function normalise(data: BandData, state: BandState): void {
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
