import FFT from 'fft.js';
import { readTile, tileEnergyOf, type FineLevel } from './fine-level';
import type { Plane } from './picture';
import { withoutOutline } from './pyramid';

/** A possible fringe system: wave vector in cycles per px of the frame, pointing to the right (or straight down). */
export interface WaveCandidate {
  kx: number;
  ky: number;
  weight: number;
  /** Middle of the tile that shows it best, px of the frame. */
  xPx: number;
  yPx: number;
}

/** A plane, or a finer level of which only tiles are read. */
export type Level = Plane | FineLevel;

const N = 64;
const HALF = N / 2 + 1;
const fft = new FFT(N);
/** Peaks nearer to the middle of the spectrum are the light's own outline, not fringes. */
const LOWEST_BIN = 2.1;
const FINEST_PERIOD_PX = 2.2;
const TILES_PER_PLANE = 24;
/** On a level that is read from the picture tiles take longer. */
const TILES_PER_FINE_LEVEL = 16;
/** Places of tiles on one level; a larger picture has them further apart. */
const MOST_PLACES = 700;

const OUTLINE_PX = 9;

/** Votes for wave vectors from windowed tiles on every level, gathered into the few that stand out. */
export function findWaves(levels: readonly Level[], keep: number): WaveCandidate[] {
  const votes: WaveCandidate[] = [];
  for (const whole of levels) {
    // The finest level is large and its fringes are finer than any outline.
    const fine = 'picture' in whole || (whole === levels[0] && levels.length > 1);
    const level = fine ? whole : withoutOutline(whole, OUTLINE_PX);
    for (const [x, y] of chooseTiles(level)) {
      tilePower(level, x, y);
      votes.push(...tilePeaks(level, x, y));
    }
  }
  return gather(votes, keep);
}

/** Corners of the tiles worth a spectrum: the liveliest half by their variance and an even grid of the rest. */
function chooseTiles(level: Level): [number, number][] {
  const tw = Math.min(N, level.widthPx);
  const th = Math.min(N, level.heightPx);
  const thin = Math.max(1, Math.sqrt((level.widthPx * level.heightPx) / ((N / 2) ** 2 * MOST_PLACES)));
  const nx = level.widthPx <= N ? 1 : Math.ceil((level.widthPx - N) / ((N / 2) * thin)) + 1;
  const ny = level.heightPx <= N ? 1 : Math.ceil((level.heightPx - N) / ((N / 2) * thin)) + 1;
  const tiles: { at: [number, number]; energy: number }[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const x = nx === 1 ? 0 : Math.round((i * (level.widthPx - tw)) / (nx - 1));
      const y = ny === 1 ? 0 : Math.round((j * (level.heightPx - th)) / (ny - 1));
      tiles.push({ at: [x, y], energy: tileEnergy(level, x, y, tw, th) });
    }
  }
  const many = 'picture' in level ? TILES_PER_FINE_LEVEL : TILES_PER_PLANE;
  if (tiles.length <= many) return tiles.map((t) => t.at);
  const lively = [...tiles].sort((a, b) => b.energy - a.energy).slice(0, many / 2);
  const step = tiles.length / (many / 2);
  const even = Array.from({ length: many / 2 }, (_, i) => tiles[Math.floor(i * step)]);
  return [...new Set([...lively, ...even])].map((t) => t.at);
}

/** Mean squared difference of neighbours three apart, from a thinned tile. */
function tileEnergy(level: Level, x0: number, y0: number, tw: number, th: number): number {
  if ('picture' in level) return tileEnergyOf(level, x0, y0, tw, th);
  const { data, widthPx } = level;
  let s = 0;
  let n = 0;
  for (let y = y0; y + 3 < y0 + th; y += 5) {
    for (let x = x0; x + 3 < x0 + tw; x += 3) {
      const i = y * widthPx + x;
      const a = data[i] - data[i + 3];
      const b = data[i] - data[i + 3 * widthPx];
      s += a * a + b * b;
      n++;
    }
  }
  return n > 0 ? s / n : 0;
}

const tile = new Float32Array(N * N);
const pair = new Float64Array(2 * N);
const pairOut = new Float64Array(2 * N);
const grid = new Float64Array(2 * N * HALF);
const columns = Array.from({ length: HALF }, (_, k) => grid.subarray(2 * k * N, 2 * (k + 1) * N));
/** Power spectrum of the tile at hand, half plane kx >= 0: entry [kx * N + ky], ky modulo N. */
const power = new Float32Array(HALF * N);

/** Power spectrum of one tile after removal of its mean and slopes, under a sine window. */
function tilePower(level: Level, x0: number, y0: number): void {
  const tw = Math.min(N, level.widthPx);
  const th = Math.min(N, level.heightPx);
  if ('picture' in level) readTile(level, x0, y0, tw, th, tile, N);
  else
    for (let y = 0; y < th; y++) {
      const from = (y0 + y) * level.widthPx + x0;
      for (let x = 0; x < tw; x++) tile[y * N + x] = level.data[from + x];
    }
  // A tile that is the whole picture keeps more of its ends: there are only a few fringes to tell from the outline.
  flatten(tw, th, taper(tw, tw === level.widthPx ? 1 : 2), taper(th, th === level.heightPx ? 1 : 2));
  grid.fill(0);
  for (let y = 0; y < th; y += 2) {
    // Two rows of real numbers at once, as the real and imaginary part of one.
    const two = y + 1 < th;
    pair.fill(0);
    for (let x = 0; x < tw; x++) {
      pair[2 * x] = tile[y * N + x];
      pair[2 * x + 1] = two ? tile[(y + 1) * N + x] : 0;
    }
    fft.transform(pairOut, pair);
    // Parted by their symmetry, and transposed on the way, so that the second pass runs along rows again.
    for (let k = 0; k < HALF; k++) {
      const m = (N - k) & (N - 1);
      const re = pairOut[2 * k];
      const im = pairOut[2 * k + 1];
      const reBack = pairOut[2 * m];
      const imBack = pairOut[2 * m + 1];
      const to = 2 * (k * N + y);
      grid[to] = 0.5 * (re + reBack);
      grid[to + 1] = 0.5 * (im - imBack);
      grid[to + 2] = 0.5 * (im + imBack);
      grid[to + 3] = 0.5 * (reBack - re);
    }
  }
  for (let kx = 0; kx < HALF; kx++) {
    fft.transform(pairOut, columns[kx]);
    const to = kx * N;
    for (let ky = 0; ky < N; ky++)
      power[to + ky] = pairOut[2 * ky] * pairOut[2 * ky] + pairOut[2 * ky + 1] * pairOut[2 * ky + 1];
  }
}

/** Takes the mean and the slopes off the tile and lays the windows over it. */
function flatten(tw: number, th: number, wx: Float64Array, wy: Float64Array): void {
  let s = 0;
  let bx = 0;
  let by = 0;
  for (let y = 0; y < th; y++) {
    let row = 0;
    for (let x = 0; x < tw; x++) {
      const v = tile[y * N + x];
      row += v;
      bx += v * x;
    }
    s += row;
    by += row * (y - (th - 1) / 2);
  }
  const n = tw * th;
  const mean = s / n;
  const sx = (bx - (s * (tw - 1)) / 2) / ((n * (tw * tw - 1)) / 12);
  const sy = by / ((n * (th * th - 1)) / 12);
  for (let y = 0; y < th; y++) {
    const base = mean + sy * (y - (th - 1) / 2) - (sx * (tw - 1)) / 2;
    const w = wy[y];
    for (let x = 0; x < tw; x++) tile[y * N + x] = (tile[y * N + x] - base - sx * x) * wx[x] * w;
  }
}

const tapers = new Map<number, Float64Array>();

/** Sine window of n samples to a power of 1 or 2. */
function taper(n: number, exponent: 1 | 2): Float64Array {
  const key = 2 * n + exponent;
  let window = tapers.get(key);
  if (!window) {
    window = Float64Array.from({ length: n }, (_, i) => Math.sin((Math.PI * (i + 0.5)) / n) ** exponent);
    tapers.set(key, window);
  }
  return window;
}

const SAMPLED = 256;
const STRIDE = (HALF * N) / SAMPLED;
const sample = new Float32Array(SAMPLED);
const PEAKS_PER_TILE = 3;
/** A peak must stand this far above the median power of its tile. */
const PROMINENCE = 10;

/** Distance from the middle of the spectrum of entry [kx * N + ky]. */
const distance = Float32Array.from({ length: HALF * N }, (_, i) =>
  Math.hypot(Math.floor(i / N), i % N < N / 2 ? i % N : (i % N) - N),
);
const ringOf = Uint8Array.from(distance, (k) => Math.floor(k));
/** Energy by distance from the middle, so that the share of what is not coarser is a sum of a few rings. */
const rings = new Float64Array(N);

const at = (kx: number, ky: number) => power[kx * N + (ky & (N - 1))];

interface Peak {
  kx: number;
  ky: number;
  k: number;
  rank: number;
}

/** Local peaks of the half plane kx >= 0, those at finer periods preferred where power is alike: the light's own outline fills the low end. */
function localPeaks(highest: number): Peak[] {
  for (let i = 0; i < SAMPLED; i++) sample[i] = power[Math.floor(i * STRIDE)];
  sample.sort();
  const least = PROMINENCE * sample[SAMPLED / 2];
  const peaks: Peak[] = [];
  for (let i = 0; i < HALF * N; i++) {
    if (!(power[i] > least)) continue;
    const k = distance[i];
    if (k < LOWEST_BIN || k > highest) continue;
    const kx = Math.floor(i / N);
    const ky = i % N < N / 2 ? i % N : (i % N) - N;
    if (ky === -N / 2 || (kx === 0 && ky <= 0) || !isLocalPeak(kx, ky)) continue;
    peaks.push({ kx, ky, k, rank: power[i] * k * k });
  }
  return peaks.sort((a, b) => b.rank - a.rank || a.ky - b.ky || a.kx - b.kx).slice(0, PEAKS_PER_TILE);
}

/** The tile's best peaks as votes, weighted by amplitude, by their share of the energy that is not coarser than they are, and by the tile's size. */
function tilePeaks(level: Level, x0: number, y0: number): WaveCandidate[] {
  const { factor } = level;
  const peaks = localPeaks(factor === 1 ? N / FINEST_PERIOD_PX : N / 3.6);
  if (peaks.length === 0) return [];
  rings.fill(0);
  for (let i = 0; i < HALF * N; i++) rings[ringOf[i]] += power[i];
  // A tile with few rows or columns smears its peak over that many bins.
  const rx = Math.max(1, Math.round((0.6 * N) / Math.min(N, level.widthPx)));
  const ry = Math.max(1, Math.round((0.6 * N) / Math.min(N, level.heightPx)));
  const corner = 'picture' in level ? { x: 0, y: 0 } : { x: level.x0Px, y: level.y0Px };
  return peaks.map((peak) => {
    let e = 0;
    let mx = 0;
    let my = 0;
    for (let dx = -rx; dx <= rx; dx++) {
      for (let dy = -ry; dy <= ry; dy++) {
        const kx = peak.kx + dx;
        if (kx < 0 || kx > N / 2 || Math.abs(peak.ky + dy) >= N / 2) continue;
        const p = at(kx, peak.ky + dy);
        e += p;
        mx += p * kx;
        my += p * (peak.ky + dy);
      }
    }
    let total = e;
    for (let r = Math.floor(0.7 * peak.k); r < N; r++) total += rings[r];
    return {
      kx: mx / e / N / factor,
      ky: my / e / N / factor,
      weight: Math.sqrt(e) * ((2 * e) / total) * factor,
      xPx: corner.x + (x0 + Math.min(N, level.widthPx) / 2) * factor,
      yPx: corner.y + (y0 + Math.min(N, level.heightPx) / 2) * factor,
    };
  });
}

function isLocalPeak(kx: number, ky: number): boolean {
  const here = at(kx, ky);
  for (let dx = -1; dx <= 1; dx++) {
    // The spectrum of a real picture: P(-kx, ky) = P(kx, -ky); beyond the last column there is nothing to compare.
    const x = kx + dx;
    if (x > N / 2) continue;
    for (let dy = -1; dy <= 1; dy++) {
      if (dx === 0 && dy === 0) continue;
      if ((x < 0 ? at(-x, -(ky + dy)) : at(x, ky + dy)) > here) return false;
    }
  }
  return true;
}

/** Greedy clusters of votes whose wave vectors agree to a fifth, strongest first. */
function gather(votes: WaveCandidate[], keep: number): WaveCandidate[] {
  const left = [...votes].sort((a, b) => b.weight - a.weight);
  const clusters: (WaveCandidate & { sum: number })[] = [];
  for (const v of left) {
    const near = 0.17 ** 2 * (v.kx * v.kx + v.ky * v.ky);
    const home = clusters.find(
      (c) =>
        Math.min((c.kx - v.kx) ** 2 + (c.ky - v.ky) ** 2, (c.kx + v.kx) ** 2 + (c.ky + v.ky) ** 2) < near,
    );
    if (!home) {
      clusters.push({ ...v, sum: v.weight });
      continue;
    }
    const sign = home.kx * v.kx + home.ky * v.ky < 0 ? -1 : 1;
    home.kx = (home.kx * home.sum + sign * v.kx * v.weight) / (home.sum + v.weight);
    home.ky = (home.ky * home.sum + sign * v.ky * v.weight) / (home.sum + v.weight);
    home.sum += v.weight;
    home.weight += v.weight;
  }
  return clusters
    .sort((a, b) => b.weight - a.weight)
    .slice(0, keep)
    .map(({ kx, ky, weight, xPx, yPx }) => ({ kx, ky, weight, xPx, yPx }));
}
