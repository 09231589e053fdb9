import FFT from 'fft.js';
import { gainAt, LEFT, strayAt, type BandData } from './cells';
import { viewCells } from './fit-table';
import type { BandFit } from './band-fit';
import { linearRoom } from './linear-room';
import { varianceAt } from './noise';

/**
 * A second, weak fringe system that multiplies the light, as a window or cover glass makes it:
 * 1 + c cos(2 pi (q u + t v)) + s sin(2 pi (q u + t v)), q and t in cycles per px across and along the fringes.
 */
export interface SecondSystem {
  q: number;
  t: number;
  c: number;
  s: number;
  /** Chi-square that it takes away. */
  gain: number;
}

/** Frequencies looked at, relative to the fringes' own; nearer to it than 1.2 turns over the region they cannot be told apart. */
const FROM = 0.3;
const TO = 2.6;
const STEPS_PER_TURN = 3;
const OWN_TURNS = 1.2;
/** Lean of the second system against the first: tangent. */
const MOST_LEAN = 0.12;
const MOST_GROUPS = 16;
const LEAST_GAIN = 60;
/** Grain and compression give peaks everywhere: a real system stands this far above the middle one. */
const ABOVE_MIDDLE = 30;
const LEAST_STRENGTH = 0.01;
/** Where the light is less than this share of the brightest, its ratio to the fit says nothing. */
const LEAST_LIGHT = 0.1;
const REFININGS = 12;
/** Places a turn of the fastest wave that is looked for: what a wave loses by them is 3 % of its square at most. */
const PLACES_PER_TURN = 10;

/** Relative misfit of the cells, with weights that make chi-square of it. */
interface Ratio {
  u: Float64Array;
  v: Float64Array;
  rel: Float64Array;
  w: Float64Array;
  group: Uint8Array;
  groups: number;
  size: number;
}

/** The strongest second system in what the bands leave beside the fit, or null. `light` is the light as it was measured. */
export function findSecondSystem(band: BandFit, light: Float64Array): SecondSystem | null {
  const ratio = ratioOf(band, light);
  if (ratio === null) return null;
  const own = 1 / (band.fit.result.parameters[0] * band.fit.unitPx);
  const length = 2 * band.grid.half;
  const spectra = new GroupSpectra(ratio, band.grid.from, length, TO * own);
  const gains: number[] = [];
  let best: SecondSystem | null = null;
  for (let k = Math.ceil((FROM * own) / spectra.step); k * spectra.step < TO * own; k++) {
    if (Math.abs(k * spectra.step - own) < OWN_TURNS / length) continue;
    const found = spectra.bestLean(k, heightOf(band));
    gains.push(found.gain);
    if (best === null || found.gain > best.gain) best = found;
  }
  if (best === null) return null;
  gains.sort((a, b) => a - b);
  const middle = gains[gains.length >> 1];
  if (!(best.gain > LEAST_GAIN) || !(best.gain > ABOVE_MIDDLE * middle)) return null;
  const found = refined(ratio, best, spectra.step, 1 / (4 * heightOf(band)));
  return Math.hypot(found.c, found.s) > LEAST_STRENGTH ? found : null;
}

/** The data with a second system divided out; everything but the light is shared. */
export function withoutSecond(data: BandData, light: Float64Array, system: SecondSystem): BandData {
  const out = new Float64Array(light.length);
  for (let b = 0; b < data.bands; b++) {
    for (let j = 0; j < data.bins; j++) {
      const cell = b * data.bins + j;
      out[cell] = light[cell] / waveAt(system, data.u[cell], data.bandV[b] + data.dv[cell]);
    }
  }
  return { ...data, light: out };
}

/** By which factor the spacing's variance grows because the second system had to be found from the same data. */
export function secondInflation(band: BandFit, system: SecondSystem): number {
  const turn = (u: number) => 2 * Math.PI * system.q * u;
  const room = linearRoom(band.profile, band.fit, [
    ({ u, light }) => light * Math.cos(turn(u)),
    ({ u, light }) => light * Math.sin(turn(u)),
    ({ u, light }) =>
      (light * u * (system.s * Math.cos(turn(u)) - system.c * Math.sin(turn(u)))) / band.grid.half,
  ]);
  const alone = band.fit.result.covariance;
  return room === null || alone === null ? 1 : Math.max(1, room.covariance[0] / alone[0]);
}

function waveAt({ q, t, c, s }: SecondSystem, u: number, v: number): number {
  const turn = 2 * Math.PI * (q * u + t * v);
  return 1 + c * Math.cos(turn) + s * Math.sin(turn);
}

function heightOf({ data }: BandFit): number {
  return Math.max(1, Math.abs(data.bandV[data.bands - 1] - data.bandV[0]));
}

function ratioOf(band: BandFit, light: Float64Array): Ratio | null {
  const { data, state, grid, table } = band;
  const { noise } = state;
  if (noise === null) return null;
  let top = 0;
  for (let i = 0; i < light.length; i++) if (light[i] > top) top = light[i];
  const n = data.bins * data.bands;
  const line = () => new Float64Array(n);
  const groups = Math.min(MOST_GROUPS, data.bands);
  const ratio: Ratio = {
    u: line(),
    v: line(),
    rel: line(),
    w: line(),
    group: new Uint8Array(n),
    groups,
    size: 0,
  };
  const { u: place, bin, light: fitted } = viewCells(data, state, grid, table);
  for (let b = 0; b < data.bands; b++) {
    if (!(state.gain[b] > 0)) continue;
    for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
      const why = state.left[cell];
      if (bin[cell] < 0 || (why !== LEFT.used && why !== LEFT.outlier)) continue;
      const u = place[cell];
      const z = u / grid.half;
      const expected = strayAt(state, b, u, z) + gainAt(state, b, data.dv[cell], z) * fitted[cell];
      if (!(expected > LEAST_LIGHT * top)) continue;
      const k = ratio.size++;
      ratio.u[k] = data.u[cell];
      ratio.v[k] = data.bandV[b] + data.dv[cell];
      ratio.rel[k] = light[cell] / expected - 1;
      ratio.w[k] = (expected * expected * data.pixels[cell]) / varianceAt(noise, expected);
      ratio.group[k] = Math.floor((b * groups) / data.bands);
    }
  }
  return ratio.size > 200 ? ratio : null;
}

/**
 * Phasors of the relative misfit of groups of bands at all frequencies, by one transform a group over places finer than the
 * fastest wave. They are put together at the lean that gives most.
 */
class GroupSpectra {
  /** Distance of neighbouring frequencies, cycles per px. */
  readonly step: number;
  private readonly spectra: Float64Array[] = [];
  private readonly v: number[] = [];
  private total = 0;

  constructor(ratio: Ratio, from: number, length: number, fastest: number) {
    const place = 1 / (PLACES_PER_TURN * fastest);
    const wanted = Math.max(STEPS_PER_TURN * length, 2 * length) / place;
    const size = 2 ** Math.ceil(Math.log2(Math.max(16, wanted)));
    this.step = 1 / (size * place);
    const fft = new FFT(size);
    let i = 0;
    for (let g = 0; g < ratio.groups; g++) {
      const sums = new Float64Array(size);
      let weight = 0;
      let along = 0;
      for (; i < ratio.size && ratio.group[i] === g; i++) {
        const at = Math.floor((ratio.u[i] - from) / place);
        // Bands are shifted against each other by less than the room beyond the region.
        sums[(at + size) % size] += ratio.w[i] * ratio.rel[i];
        weight += ratio.w[i];
        along += ratio.w[i] * ratio.v[i];
      }
      if (weight === 0) continue;
      const spectrum = new Float64Array(2 * size);
      fft.realTransform(spectrum, sums);
      this.spectra.push(spectrum);
      this.v.push(along / weight);
      this.total += weight;
    }
  }

  /** The lean that gives most at one frequency; what its phase is does not matter here. */
  bestLean(k: number, height: number): SecondSystem {
    const q = k * this.step;
    const most = MOST_LEAN * q;
    const step = Math.min(most, 1 / (4 * height));
    let best: SecondSystem = { q, t: 0, c: 0, s: 0, gain: 0 };
    for (let t = -most; t <= most + 1e-12; t += step) {
      let re = 0;
      let im = 0;
      for (let g = 0; g < this.spectra.length; g++) {
        const turn = 2 * Math.PI * t * this.v[g];
        const c = Math.cos(turn);
        const s = Math.sin(turn);
        // The transform turns backwards: its conjugate is the phasor.
        const r = this.spectra[g][2 * k];
        const i = -this.spectra[g][2 * k + 1];
        re += r * c - i * s;
        im += i * c + r * s;
      }
      // Sums of w cos^2 and w sin^2 are half of the sum of w, up to what one turn more or less matters.
      const gain = (2 * (re * re + im * im)) / this.total;
      if (gain > best.gain) best = { q, t, c: 0, s: 0, gain };
    }
    return best;
  }
}

/** Closes in on the maximum: steps in q and t, halved where no neighbour is better. */
function refined(ratio: Ratio, from: SecondSystem, stepQ: number, stepT: number): SecondSystem {
  let best = exactAt(ratio, from.q, from.t);
  let dq = stepQ / 2;
  let dt = stepT / 2;
  for (let i = 0; i < REFININGS; i++) {
    const here = best;
    for (const [a, b] of [
      [dq, 0],
      [-dq, 0],
      [0, dt],
      [0, -dt],
    ]) {
      const next = exactAt(ratio, here.q + a, here.t + b);
      if (next.gain > best.gain) best = next;
    }
    if (best === here) {
      dq /= 2;
      dt /= 2;
    }
  }
  return best;
}

/** Least-squares amplitudes at one frequency from all cells. */
function exactAt(ratio: Ratio, q: number, t: number): SecondSystem {
  let cc = 0;
  let cs = 0;
  let ss = 0;
  let rc = 0;
  let rs = 0;
  for (let i = 0; i < ratio.size; i++) {
    const turn = 2 * Math.PI * (q * ratio.u[i] + t * ratio.v[i]);
    const c = Math.cos(turn);
    const s = Math.sin(turn);
    const w = ratio.w[i];
    cc += w * c * c;
    cs += w * c * s;
    ss += w * s * s;
    rc += w * c * ratio.rel[i];
    rs += w * s * ratio.rel[i];
  }
  const det = cc * ss - cs * cs;
  if (!(det > 0)) return { q, t, c: 0, s: 0, gain: 0 };
  const c = (ss * rc - cs * rs) / det;
  const s = (cc * rs - cs * rc) / det;
  return { q, t, c, s, gain: c * rc + s * rs };
}
