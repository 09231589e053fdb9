import FFT from 'fft.js';
import type { Plane } from './picture';
import { withoutOutline } from './pyramid';

/** A possible fringe system: wave vector in cycles per px of the frame, pointing to the right (or straight down). */
export interface WaveCandidate {
  kx: number;
  ky: number;
  weight: number;
}

const N = 64;
const fft = new FFT(N);
/** Peaks nearer to the middle of the spectrum are the light's own outline, not fringes. */
const LOWEST_BIN = 2.1;
const FINEST_PERIOD_PX = 2.2;
const TILES_PER_PLANE = 36;

const OUTLINE_PX = 9;

/** Votes for wave vectors from windowed tiles on every plane, gathered into the few that stand out. */
export function findWaves(planes: Plane[], keep: number): WaveCandidate[] {
  const votes: WaveCandidate[] = [];
  const power = new Float32Array(N * N);
  for (const whole of planes) {
    // The finest plane is large and its fringes are finer than any outline.
    const plane = whole === planes[0] && planes.length > 1 ? whole : withoutOutline(whole, OUTLINE_PX);
    for (const [x, y] of chooseTiles(plane)) {
      tilePower(plane, x, y, power);
      votes.push(...tilePeaks(power, plane));
    }
  }
  return gather(votes, keep);
}

/** Corners of the tiles worth a spectrum: the liveliest half by their variance and an even grid of the rest. */
function chooseTiles(plane: Plane): [number, number][] {
  const tw = Math.min(N, plane.widthPx);
  const th = Math.min(N, plane.heightPx);
  const nx = plane.widthPx <= N ? 1 : Math.ceil((plane.widthPx - N) / (N / 2)) + 1;
  const ny = plane.heightPx <= N ? 1 : Math.ceil((plane.heightPx - N) / (N / 2)) + 1;
  const tiles: { at: [number, number]; energy: number }[] = [];
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const x = nx === 1 ? 0 : Math.round((i * (plane.widthPx - tw)) / (nx - 1));
      const y = ny === 1 ? 0 : Math.round((j * (plane.heightPx - th)) / (ny - 1));
      tiles.push({ at: [x, y], energy: tileEnergy(plane, x, y, tw, th) });
    }
  }
  if (tiles.length <= TILES_PER_PLANE) return tiles.map((t) => t.at);
  const lively = [...tiles].sort((a, b) => b.energy - a.energy).slice(0, TILES_PER_PLANE / 2);
  const step = tiles.length / (TILES_PER_PLANE / 2);
  const even = Array.from({ length: TILES_PER_PLANE / 2 }, (_, i) => tiles[Math.floor(i * step)]);
  return [...new Set([...lively, ...even])].map((t) => t.at);
}

/** Mean squared difference of neighbours three apart, from a thinned tile. */
function tileEnergy(plane: Plane, x0: number, y0: number, tw: number, th: number): number {
  let s = 0;
  let n = 0;
  for (let y = y0; y + 3 < y0 + th; y += 5) {
    for (let x = x0; x + 3 < x0 + tw; x += 3) {
      const i = y * plane.widthPx + x;
      const a = plane.data[i] - plane.data[i + 3];
      const b = plane.data[i] - plane.data[i + 3 * plane.widthPx];
      s += a * a + b * b;
      n++;
    }
  }
  return n > 0 ? s / n : 0;
}

const line = new Float64Array(2 * N);
const lineOut = new Float64Array(2 * N);
const grid = new Float64Array(2 * N * N);

/** Power spectrum of one tile after removal of its mean and slopes, under a sine window. Entry [ky * N + kx]. */
function tilePower(plane: Plane, x0: number, y0: number, power: Float32Array): void {
  const tw = Math.min(N, plane.widthPx);
  const th = Math.min(N, plane.heightPx);
  const { mean, sx, sy } = tilt(plane, x0, y0, tw, th);
  // A tile that is the whole picture keeps more of its ends: there are only a few fringes to tell from the outline.
  const wx = taper(tw, tw === plane.widthPx ? 1 : 2);
  const wy = taper(th, th === plane.heightPx ? 1 : 2);
  grid.fill(0);
  for (let y = 0; y < th; y++) {
    line.fill(0);
    const row = (y0 + y) * plane.widthPx + x0;
    const dy = y - (th - 1) / 2;
    for (let x = 0; x < tw; x++)
      line[2 * x] = (plane.data[row + x] - mean - sx * (x - (tw - 1) / 2) - sy * dy) * wx[x] * wy[y];
    fft.transform(lineOut, line);
    // Transposed on the way, so that the second pass runs along rows again.
    for (let k = 0; k < N; k++) {
      grid[2 * (k * N + y)] = lineOut[2 * k];
      grid[2 * (k * N + y) + 1] = lineOut[2 * k + 1];
    }
  }
  for (let kx = 0; kx <= N / 2; kx++) {
    fft.transform(lineOut, grid.subarray(2 * kx * N, 2 * (kx + 1) * N));
    for (let ky = 0; ky < N; ky++) power[ky * N + kx] = lineOut[2 * ky] ** 2 + lineOut[2 * ky + 1] ** 2;
  }
}

function taper(n: number, power: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => Math.sin((Math.PI * (i + 0.5)) / n) ** power);
}

function tilt(
  plane: Plane,
  x0: number,
  y0: number,
  tw: number,
  th: number,
): { mean: number; sx: number; sy: number } {
  let s = 0;
  let bx = 0;
  let by = 0;
  for (let y = 0; y < th; y++) {
    const row = (y0 + y) * plane.widthPx + x0;
    const dy = y - (th - 1) / 2;
    for (let x = 0; x < tw; x++) {
      const v = plane.data[row + x];
      s += v;
      bx += v * (x - (tw - 1) / 2);
      by += v * dy;
    }
  }
  const n = tw * th;
  return { mean: s / n, sx: bx / ((n * (tw * tw - 1)) / 12), sy: by / ((n * (th * th - 1)) / 12) };
}

const SAMPLED = 512;
const STRIDE = (N * N) / SAMPLED;
const sample = new Float32Array(SAMPLED);
const PEAKS_PER_TILE = 3;
/** A peak must stand this far above the median power of its tile. */
const PROMINENCE = 10;

/**
 * Local peaks of the half plane kx >= 0, those at finer periods preferred where power is alike (the light's own outline fills
 * the low end), weighted by amplitude, by their share of the energy that is not coarser than they are, and by the tile's size.
 */
function tilePeaks(power: Float32Array, plane: Plane): WaveCandidate[] {
  const highest = plane.factor === 1 ? N / FINEST_PERIOD_PX : N / 3.6;
  const at = (kx: number, ky: number) => power[((ky + N) % N) * N + (kx < 0 ? -kx : kx)];
  for (let i = 0; i < SAMPLED; i++) sample[i] = power[i * STRIDE + (i % STRIDE)];
  sample.sort();
  // Half of the grid is empty, so that this is the median of the spectrum.
  const noise = sample[Math.floor(0.75 * SAMPLED)];
  // Energy by distance from the middle, so that the share of what is not coarser is a sum of a few rings.
  const rings = new Float64Array(N);
  const peaks: { kx: number; ky: number; k: number; rank: number }[] = [];
  for (let ky = -N / 2 + 1; ky < N / 2; ky++) {
    for (let kx = 0; kx <= N / 2; kx++) {
      const p = power[((ky + N) % N) * N + kx];
      const k = Math.sqrt(kx * kx + ky * ky);
      rings[k | 0] += p;
      if (k < LOWEST_BIN || k > highest || (kx === 0 && ky <= 0) || !(p > PROMINENCE * noise)) continue;
      if (!isLocalPeak(power, kx, ky)) continue;
      peaks.push({ kx, ky, k, rank: p * k * k });
    }
  }
  peaks.sort((a, b) => b.rank - a.rank);
  // A tile with few rows or columns smears its peak over that many bins.
  const rx = Math.max(1, Math.round((0.6 * N) / Math.min(N, plane.widthPx)));
  const ry = Math.max(1, Math.round((0.6 * N) / Math.min(N, plane.heightPx)));
  return peaks.slice(0, PEAKS_PER_TILE).map((peak) => {
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
      kx: mx / e / N / plane.factor,
      ky: my / e / N / plane.factor,
      weight: Math.sqrt(e) * ((2 * e) / total) * plane.factor,
    };
  });
}

function isLocalPeak(power: Float32Array, kx: number, ky: number): boolean {
  const here = power[((ky + N) % N) * N + kx];
  for (let dy = -1; dy <= 1; dy++) {
    for (let dx = -1; dx <= 1; dx++) {
      if (dx === 0 && dy === 0) continue;
      // The spectrum of a real picture: P(-kx, ky) = P(kx, -ky); beyond the last column there is nothing to compare.
      const x = kx + dx;
      const y = x < 0 ? -(ky + dy) : ky + dy;
      if (x > N / 2) continue;
      if (power[((y + 2 * N) % N) * N + Math.abs(x)] > here) return false;
    }
  }
  return true;
}

/** Greedy clusters of votes whose wave vectors agree to a fifth, strongest first. */
function gather(votes: WaveCandidate[], keep: number): WaveCandidate[] {
  const left = [...votes].sort((a, b) => b.weight - a.weight);
  const clusters: { kx: number; ky: number; weight: number; sum: number }[] = [];
  for (const v of left) {
    const k = Math.hypot(v.kx, v.ky);
    const home = clusters.find(
      (c) => Math.min(Math.hypot(c.kx - v.kx, c.ky - v.ky), Math.hypot(c.kx + v.kx, c.ky + v.ky)) < 0.17 * k,
    );
    if (!home) {
      clusters.push({ kx: v.kx, ky: v.ky, weight: v.weight, sum: v.weight });
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
    .map(({ kx, ky, weight }) => ({ kx, ky, weight }));
}
