import { planeAt } from './fine-level';
import type { Plane } from './picture';
import { withoutOutline } from './pyramid';
import type { Level, WaveCandidate } from './spectrum';

/** Where one wave lives in the frame and how its phase runs there. Lengths in px of the frame. */
export interface FringePatch {
  /** Wave vector at the patch's middle, cycles per px, after the phase fit. */
  kx: number;
  ky: number;
  /** Middle of the patch. */
  cx: number;
  cy: number;
  /** Cells of the patch: centres, amplitude (half of the fringe's half swing), unwrapped phase in turns. */
  cells: { x: number; y: number; amplitude: number; turns: number }[];
  cellWidePx: number;
  cellHighPx: number;
  /** Sum of squared amplitudes times area: how much fringe light stands behind it. */
  energy: number;
  /** Root mean square of the phase about the best quadratic surface, turns. */
  roughTurns: number;
  /** Second derivatives of the phase, turns per px^2: across the fringes, mixed, along them. */
  bend: { across: number; mixed: number; along: number };
}

interface CellMap {
  nx: number;
  ny: number;
  /** Size of a cell in px of the plane. */
  wide: number;
  high: number;
  re: Float64Array;
  im: Float64Array;
  /** Amplitude over its own noise. */
  snr: Float64Array;
}

const SMALLEST_SHARE = 0.07;
const SMALLEST_SNR = 3;
const LARGEST_STEP_TURNS = 0.16;
const REACH = 2;

/** Level on which a wave is sampled finely enough and not more than that. */
export function levelFor(levels: readonly Level[], wave: WaveCandidate): Level {
  const periodPx = 1 / Math.hypot(wave.kx, wave.ky);
  let best = levels[0];
  for (const level of levels) if (periodPx / level.factor >= 5) best = level;
  return best;
}

/** Demodulates one wave in cells, grows the patch of continuous phase from its strongest cell and fits its phase. */
export function tracePatch(level: Level, wave: WaveCandidate): FringePatch | null {
  const plane = 'picture' in level ? planeAt(level, wave.xPx, wave.yPx) : level;
  return trace(plane, wave, { mayRetry: true, thin: false, cleaned: new Map() });
}

interface Attempt {
  mayRetry: boolean;
  /** Flat cells. */
  thin: boolean;
  /** The plane without its outline, by the radius of the mean that was taken off. */
  cleaned: Map<number, Plane>;
}

function trace(plane: Plane, wave: WaveCandidate, attempt: Attempt): FringePatch | null {
  const f = plane.factor;
  const { mayRetry, thin } = attempt;
  const clean = cleanedPlane(plane, 1 / (f * Math.hypot(wave.kx, wave.ky)), attempt);
  const map = demodulateCells(clean, wave.kx * f, wave.ky * f, thin);
  const cells = growPatch(map);
  if (cells.length < 3) return null;
  const centre = (i: number) => ({
    x: plane.x0Px + ((i % map.nx) + 0.5) * map.wide * f,
    y: plane.y0Px + (Math.floor(i / map.nx) + 0.5) * map.high * f,
  });
  const list = cells.map(({ index, turns }) => ({
    ...centre(index),
    amplitude: Math.hypot(map.re[index], map.im[index]),
    turns,
  }));
  let w = 0;
  let cx = 0;
  let cy = 0;
  for (const c of list) {
    const e = c.amplitude ** 2;
    w += e;
    cx += e * c.x;
    cy += e * c.y;
  }
  cx /= w;
  cy /= w;
  const surface = fitPhase(list, cx, cy, Math.max(map.wide, map.high) * f);
  const kx = wave.kx + surface.gx;
  const ky = wave.ky + surface.gy;
  const shift = Math.hypot(surface.gx, surface.gy) / Math.hypot(wave.kx, wave.ky);
  // A wave vector that moved far was not demodulated well: once more with the better one.
  if (mayRetry && shift > 0.02 && shift < 0.6)
    return trace(plane, { ...wave, kx, ky }, { ...attempt, mayRetry: false });
  const k = Math.hypot(kx, ky);
  const moved = k / Math.hypot(wave.kx, wave.ky);
  if (!(moved > 0.6 && moved < 1.7)) return null;
  // A pattern only a few cells high says little about its direction: once more with flatter cells.
  if (!thin && rowsOf(cells, map, Math.abs(wave.kx) >= Math.abs(wave.ky)) < FEWEST_ROWS) {
    const finer = trace(plane, { ...wave, kx, ky }, { ...attempt, mayRetry: true, thin: true });
    if (finer !== null && finer.cells.length >= cells.length) return finer;
  }
  const ux = kx / k;
  const uy = ky / k;
  return {
    kx,
    ky,
    cx,
    cy,
    cells: list,
    cellWidePx: map.wide * f,
    cellHighPx: map.high * f,
    energy: w * map.wide * map.high * f * f,
    roughTurns: surface.rough,
    bend: {
      across: surface.xx * ux * ux + 2 * surface.xy * ux * uy + surface.yy * uy * uy,
      mixed: (surface.yy - surface.xx) * ux * uy + surface.xy * (ux * ux - uy * uy),
      along: surface.xx * uy * uy - 2 * surface.xy * ux * uy + surface.yy * ux * ux,
    },
  };
}

/** Without the mean over one period what is left is the fringes; a bright outline would leak into faint ones. */
function cleanedPlane(plane: Plane, period: number, attempt: Attempt): Plane {
  if (period < FINE_PERIOD) return plane;
  const radius = Math.max(1, Math.round((period - 1) / 2));
  const clean = attempt.cleaned.get(radius) ?? withoutOutline(plane, radius);
  attempt.cleaned.set(radius, clean);
  return clean;
}

const FEWEST_ROWS = 6;
const FINE_PERIOD = 5;

/** Over how many rows of cells (columns for a wave running down) the patch extends. */
function rowsOf(cells: { index: number }[], map: CellMap, alongX: boolean): number {
  return new Set(cells.map((c) => (alongX ? Math.floor(c.index / map.nx) : c.index % map.nx))).size;
}

/** Complex amplitude of the wave in cells about a period wide, smoothed over 3 x 3 cells, local mean removed. */
function demodulateCells(plane: Plane, kx: number, ky: number, thin: boolean): CellMap {
  const period = 1 / Math.hypot(kx, ky);
  // About a period long where the wave runs, and short enough across it for several cells in a flat pattern.
  const size = Math.max(4, Math.round(0.9 * period));
  const short = (side: number) =>
    Math.max(2, Math.min(thin ? Math.round(size / 4) : size, Math.floor(side / 6)));
  const long = (side: number) => Math.max(2, Math.min(size, Math.floor(side / 3)));
  const wide = Math.abs(kx) >= Math.abs(ky) ? long(plane.widthPx) : short(plane.widthPx);
  const high = Math.abs(kx) >= Math.abs(ky) ? short(plane.heightPx) : long(plane.heightPx);
  const nx = Math.floor(plane.widthPx / wide);
  const ny = Math.floor(plane.heightPx / high);
  const cosX = new Float64Array(plane.widthPx);
  const sinX = new Float64Array(plane.widthPx);
  for (let x = 0; x < plane.widthPx; x++) {
    cosX[x] = Math.cos(2 * Math.PI * kx * (x + 0.5));
    sinX[x] = Math.sin(2 * Math.PI * kx * (x + 0.5));
  }
  // Sums of the wave itself over each cell's width; along y they only turn.
  const waveC = new Float64Array(nx);
  const waveS = new Float64Array(nx);
  for (let x = 0; x < nx * wide; x++) {
    const i = Math.floor(x / wide);
    waveC[i] += cosX[x];
    waveS[i] += sinX[x];
  }
  const sums = emptySums(nx * ny);
  const { data, widthPx } = plane;
  for (let y = 0; y < ny * high; y++) {
    const cy = Math.cos(2 * Math.PI * ky * (y + 0.5));
    const sy = Math.sin(2 * Math.PI * ky * (y + 0.5));
    const cellRow = Math.floor(y / high) * nx;
    let at = y * widthPx;
    let x = 0;
    for (let i = 0; i < nx; i++) {
      let c = 0;
      let s = 0;
      let one = 0;
      let two = 0;
      for (const end = x + wide; x < end; x++, at++) {
        const v = data[at];
        c += v * cosX[x];
        s += v * sinX[x];
        one += v;
        two += v * v;
      }
      const k = cellRow + i;
      // exp(-i phi) with phi split into its x and y parts
      sums.re[k] += c * cy - s * sy;
      sums.im[k] -= s * cy + c * sy;
      sums.er[k] += waveC[i] * cy - waveS[i] * sy;
      sums.ei[k] -= waveS[i] * cy + waveC[i] * sy;
      sums.one[k] += one;
      sums.two[k] += two;
    }
  }
  return smoothCells(sums, nx, ny, wide, high);
}

interface CellSums {
  re: Float64Array;
  im: Float64Array;
  /** The wave itself, for taking the local mean off. */
  er: Float64Array;
  ei: Float64Array;
  one: Float64Array;
  two: Float64Array;
}

const emptySums = (n: number): CellSums => ({
  re: new Float64Array(n),
  im: new Float64Array(n),
  er: new Float64Array(n),
  ei: new Float64Array(n),
  one: new Float64Array(n),
  two: new Float64Array(n),
});

/** Weights 1 2 1 over the cells there are, along the rows and then down the columns. */
function spread121(from: Float64Array, nx: number, ny: number): Float64Array {
  const across = new Float64Array(nx * ny);
  for (let y = 0, i = 0; y < ny; y++)
    for (let x = 0; x < nx; x++, i++)
      across[i] = 2 * from[i] + (x > 0 ? from[i - 1] : 0) + (x + 1 < nx ? from[i + 1] : 0);
  const out = new Float64Array(nx * ny);
  for (let y = 0, i = 0; y < ny; y++)
    for (let x = 0; x < nx; x++, i++)
      out[i] = 2 * across[i] + (y > 0 ? across[i - nx] : 0) + (y + 1 < ny ? across[i + nx] : 0);
  return out;
}

/** Sum of the weights 1 2 1 (to a power) of the cells there are about place i of n. */
const weight121 = (i: number, n: number, exponent: number) =>
  2 ** exponent + (i > 0 ? 1 : 0) + (i + 1 < n ? 1 : 0);

function smoothCells(sums: CellSums, nx: number, ny: number, wide: number, high: number): CellMap {
  const re = spread121(sums.re, nx, ny);
  const im = spread121(sums.im, nx, ny);
  const er = spread121(sums.er, nx, ny);
  const ei = spread121(sums.ei, nx, ny);
  const one = spread121(sums.one, nx, ny);
  const two = spread121(sums.two, nx, ny);
  const snr = new Float64Array(nx * ny);
  for (let y = 0, i = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++, i++) {
      const w = weight121(x, nx, 1) * weight121(y, ny, 1);
      const w2 = weight121(x, nx, 2) * weight121(y, ny, 2);
      const pixels = w * wide * high;
      const mean = one[i] / pixels;
      re[i] = (re[i] - mean * er[i]) / pixels;
      im[i] = (im[i] - mean * ei[i]) / pixels;
      const strength = re[i] * re[i] + im[i] * im[i];
      const rest = Math.max(1e-12, two[i] / pixels - mean * mean - 2 * strength);
      snr[i] = Math.sqrt(strength / ((rest * w2) / (w * pixels)));
    }
  }
  return { nx, ny, wide, high, re, im, snr };
}

/** Cells reached from the strongest one by small steps of phase; each keeps the whole number of turns on its way. */
function growPatch(map: CellMap): { index: number; turns: number }[] {
  const { nx, ny, re, im, snr } = map;
  const n = nx * ny;
  const amplitude = new Float64Array(n);
  let seed = 0;
  for (let i = 0; i < n; i++) {
    amplitude[i] = Math.sqrt(re[i] * re[i] + im[i] * im[i]);
    if (amplitude[i] > amplitude[seed]) seed = i;
  }
  const good = (i: number) => amplitude[i] > SMALLEST_SHARE * amplitude[seed] && snr[i] > SMALLEST_SNR;
  if (!good(seed)) return [];
  const turnsOf = (i: number) => Math.atan2(im[i], re[i]) / (2 * Math.PI);
  const turns = new Float64Array(n).fill(NaN);
  turns[seed] = turnsOf(seed);
  const queue = [seed];
  for (let head = 0; head < queue.length; head++) {
    const i = queue[head];
    const x = i % nx;
    const y = Math.floor(i / nx);
    for (let dy = -REACH; dy <= REACH; dy++) {
      for (let dx = -REACH; dx <= REACH; dx++) {
        const xx = x + dx;
        const yy = y + dy;
        if (xx < 0 || xx >= nx || yy < 0 || yy >= ny) continue;
        const j = yy * nx + xx;
        if (!Number.isNaN(turns[j]) || !good(j)) continue;
        let step = turnsOf(j) - turns[i];
        step -= Math.round(step);
        if (Math.abs(step) > LARGEST_STEP_TURNS * Math.max(1, Math.sqrt(dx * dx + dy * dy) * 0.8)) continue;
        turns[j] = turns[i] + step;
        queue.push(j);
      }
    }
  }
  return queue.map((index) => ({ index, turns: turns[index] }));
}

interface PhaseSurface {
  gx: number;
  gy: number;
  xx: number;
  xy: number;
  yy: number;
  rough: number;
}

/** Weighted least squares of turns = t0 + gx x + gy y + xx x^2/2 + xy x y + yy y^2/2; second order only with enough cells. */
function fitPhase(cells: FringePatch['cells'], cx: number, cy: number, unit: number): PhaseSurface {
  const full = cells.length >= 16;
  const terms = full ? 6 : 3;
  const basis = (c: { x: number; y: number }) => {
    const x = (c.x - cx) / unit;
    const y = (c.y - cy) / unit;
    return [1, x, y, (x * x) / 2, x * y, (y * y) / 2];
  };
  const a = new Float64Array(terms * terms);
  const b = new Float64Array(terms);
  for (const c of cells) {
    const t = basis(c);
    const w = c.amplitude ** 2;
    for (let i = 0; i < terms; i++) {
      b[i] += w * t[i] * c.turns;
      for (let j = 0; j < terms; j++) a[i * terms + j] += w * t[i] * t[j];
    }
  }
  const s = solveSmall(a, b, terms);
  let w = 0;
  let e = 0;
  for (const c of cells) {
    const t = basis(c);
    let r = c.turns;
    for (let i = 0; i < terms; i++) r -= s[i] * t[i];
    w += c.amplitude ** 2;
    e += c.amplitude ** 2 * r * r;
  }
  const second = unit * unit;
  return {
    gx: s[1] / unit,
    gy: s[2] / unit,
    xx: (s[3] ?? 0) / second,
    xy: (s[4] ?? 0) / second,
    yy: (s[5] ?? 0) / second,
    rough: Math.sqrt(e / w),
  };
}

/** Gaussian elimination with a small ridge, for normal equations of a few unknowns. */
export function solveSmall(a: Float64Array, b: Float64Array, n: number): Float64Array {
  const m = Float64Array.from(a);
  const x = Float64Array.from(b);
  for (let i = 0; i < n; i++) m[i * n + i] *= 1 + 1e-9;
  for (let k = 0; k < n; k++) {
    const pivot = m[k * n + k];
    if (!(Math.abs(pivot) > 0)) continue;
    for (let i = k + 1; i < n; i++) {
      const f = m[i * n + k] / pivot;
      for (let j = k; j < n; j++) m[i * n + j] -= f * m[k * n + j];
      x[i] -= f * x[k];
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    let s = x[i];
    for (let j = i + 1; j < n; j++) s -= m[i * n + j] * x[j];
    const pivot = m[i * n + i];
    x[i] = Math.abs(pivot) > 0 ? s / pivot : 0;
  }
  return x;
}
