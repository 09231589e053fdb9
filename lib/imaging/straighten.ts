import { toRadians, type Rectangle } from './geometry';
import type { Picture } from './picture';

/**
 * The region cut into bands along the fringes; every band is averaged along them without resampling. Each pixel keeps
 * its exact coordinate u across the fringes: within one row of pixels u grows by cos(angle) a pixel, so with bins of that
 * pitch every row gives each bin exactly one pixel, and all bins of a band share the same set of sub-pixel offsets.
 */
export interface BandStack {
  rect: Rectangle;
  bins: number;
  bands: number;
  /** Distance of bin centres and u of the first one's centre, px. */
  pitchPx: number;
  fromPx: number;
  /** Mean v of each band, px from the rectangle's axis. */
  bandV: Float64Array;
  /**
   * Cell [band * bins + bin]: mean linear light, pixels in it, mean u minus the bin's centre (px), variance of u about the
   * mean (px^2), mean v of the cell's pixels minus its band's (px). Single precision: 6e-8 of the light is far below noise.
   */
  light: Float32Array;
  pixels: Float32Array;
  offset: Float32Array;
  varU: Float32Array;
  dv: Float32Array;
}

export interface StraightenOptions {
  bands: number;
  /** Bins per pixel of pitch: more than 1 where fringes are fine. */
  lanes: number;
  /** Neighbouring bins put together where fringes are wide. */
  merge: number;
  /** Every how many rows are read; 1 for the answer, more for a quick look. */
  rowStep: number;
}

interface Scan {
  samples: Uint8Array | Uint16Array;
  width: number;
  rows: number;
  /** u = u0 + p up + q uq, v = v0 + p vp + q vq for the pixel at index p of row q. */
  u0: number;
  up: number;
  uq: number;
  v0: number;
  vp: number;
  vq: number;
}

/** Averages the region into bands and bins. Pixels outside the frame do not exist; cells may be empty. */
export function straighten(picture: Picture, rect: Rectangle, options: StraightenOptions): BandStack {
  const scan = scanOf(picture, rect);
  const { bands, lanes, merge, rowStep } = options;
  const step = scan.up / lanes;
  const half = rect.lengthPx / 2;
  // Fine bin J holds u in [J, J + 1) * step (step may be negative).
  const first = Math.floor(Math.min(-half / step, half / step));
  const fine = Math.ceil(Math.abs(rect.lengthPx / step)) + 2;
  const bins = Math.floor(fine / merge);
  const edge = step < 0 ? first + (bins - 1) * merge : first;
  const stack = emptyStack(rect, bins, bands, Math.abs(step) * merge, (edge + merge / 2) * step);
  const line: FineLine = {
    sum: new Float64Array(fine + lanes),
    n: new Float64Array(fine + lanes),
    d: new Float64Array(fine + lanes),
    dd: new Float64Array(fine + lanes),
    v: new Float64Array(fine + lanes),
  };
  for (let b = 0; b < bands; b++) {
    const low = -rect.heightPx / 2 + (b * rect.heightPx) / bands;
    const high = low + rect.heightPx / bands;
    line.sum.fill(0);
    line.n.fill(0);
    line.d.fill(0);
    line.dd.fill(0);
    line.v.fill(0);
    accumulateBand(picture, scan, line, { low, high, half, lanes, first, fine, rowStep });
    for (let i = lanes; i < fine; i++) {
      line.n[i] += line.n[i - lanes];
      line.d[i] += line.d[i - lanes];
      line.dd[i] += line.dd[i - lanes];
      line.v[i] += line.v[i - lanes];
    }
    mergeBins(stack, b, line, { step, merge, vPerBin: scan.vp / lanes });
    centreBand(stack, b, (low + high) / 2);
  }
  return stack;
}

interface FineLine {
  sum: Float64Array;
  n: Float64Array;
  /** Sums of the rows' offsets from the bin's centre (in bins), of their squares, and of v at the bin's index 0. */
  d: Float64Array;
  dd: Float64Array;
  v: Float64Array;
}

function emptyStack(
  rect: Rectangle,
  bins: number,
  bands: number,
  pitchPx: number,
  fromPx: number,
): BandStack {
  const cells = bins * bands;
  return {
    rect,
    bins,
    bands,
    pitchPx,
    fromPx,
    bandV: new Float64Array(bands),
    light: new Float32Array(cells),
    pixels: new Float32Array(cells),
    offset: new Float32Array(cells),
    varU: new Float32Array(cells),
    dv: new Float32Array(cells),
  };
}

/** Scanning rows of the frame, or its columns where the fringes lie nearer to horizontal. */
function scanOf(picture: Picture, rect: Rectangle): Scan {
  const c = Math.cos(toRadians(rect.angleDeg));
  const s = Math.sin(toRadians(rect.angleDeg));
  const u0 = (0.5 - rect.cxPx) * c + (0.5 - rect.cyPx) * s;
  const v0 = -(0.5 - rect.cxPx) * s + (0.5 - rect.cyPx) * c;
  if (Math.abs(c) >= Math.abs(s)) {
    return {
      samples: picture.samples,
      width: picture.widthPx,
      rows: picture.heightPx,
      u0,
      up: c,
      uq: s,
      v0,
      vp: -s,
      vq: c,
    };
  }
  return {
    samples: transposed(picture),
    width: picture.heightPx,
    rows: picture.widthPx,
    u0,
    up: s,
    uq: c,
    v0,
    vp: c,
    vq: -s,
  };
}

/** Turned once for a frame, however often it is straightened. */
const turnedPictures = new WeakMap<Picture, Uint8Array | Uint16Array>();

function transposed(picture: Picture): Uint8Array | Uint16Array {
  const known = turnedPictures.get(picture);
  if (known) return known;
  const { samples, widthPx: w, heightPx: h } = picture;
  const out = picture.bits === 16 ? new Uint16Array(w * h) : new Uint8Array(w * h);
  const block = 32;
  for (let y0 = 0; y0 < h; y0 += block) {
    const y1 = Math.min(h, y0 + block);
    for (let x0 = 0; x0 < w; x0 += block) {
      const x1 = Math.min(w, x0 + block);
      for (let y = y0; y < y1; y++) for (let x = x0; x < x1; x++) out[x * h + y] = samples[y * w + x];
    }
  }
  turnedPictures.set(picture, out);
  return out;
}

interface BandRange {
  low: number;
  high: number;
  half: number;
  lanes: number;
  first: number;
  fine: number;
  rowStep: number;
}

function accumulateBand(picture: Picture, scan: Scan, line: FineLine, range: BandRange): void {
  const { samples, width } = scan;
  const light = picture.light;
  const { low, high, half, lanes, first, fine, rowStep } = range;
  const reach = half + 1;
  // Rows whose v can fall into the band for some u within the region.
  const vAcross = Math.abs((scan.vp / scan.up) * reach);
  const slope = scan.vq - (scan.vp * scan.uq) / scan.up;
  const base = scan.v0 - (scan.vp * scan.u0) / scan.up;
  const qa = (low - vAcross - base) / slope;
  const qb = (high + vAcross - base) / slope;
  const q0 = Math.max(0, Math.floor(Math.min(qa, qb)));
  const q1 = Math.min(scan.rows - 1, Math.ceil(Math.max(qa, qb)));
  for (let q = q0 - (q0 % rowStep); q <= q1; q += rowStep) {
    if (q < 0) continue;
    const uRow = scan.u0 + q * scan.uq;
    const vRow = scan.v0 + q * scan.vq;
    let p0 = Math.max(0, Math.ceil(Math.min((-half - uRow) / scan.up, (half - uRow) / scan.up)));
    let p1 = Math.min(width, Math.ceil(Math.max((-half - uRow) / scan.up, (half - uRow) / scan.up)));
    if (Math.abs(scan.vp) > 1e-12) {
      const a = (low - vRow) / scan.vp;
      const b = (high - vRow) / scan.vp;
      p0 = Math.max(p0, Math.ceil(Math.min(a, b)));
      p1 = Math.min(p1, Math.ceil(Math.max(a, b)));
    } else if (vRow < low || vRow >= high) continue;
    if (p1 <= p0) continue;
    const t = (uRow / scan.up) * lanes;
    const whole = Math.floor(t);
    const offset = t - whole - 0.5;
    let i = p0 * lanes + whole - first;
    if (i < 0) {
      const skip = Math.ceil(-i / lanes);
      p0 += skip;
      i += skip * lanes;
    }
    p1 = Math.min(p1, p0 + Math.max(0, Math.ceil((fine - i) / lanes)));
    if (p1 <= p0) continue;
    const end = i + (p1 - p0) * lanes;
    // v at bin index 0 of this row; it grows by vp / lanes a bin.
    addRange(line, i, Math.min(end, fine + lanes - 1), offset, vRow + p0 * scan.vp - (i * scan.vp) / lanes);
    const sum = line.sum;
    let at = q * width + p0;
    for (let j = i; j < end; j += lanes) sum[j] += light[samples[at++]];
  }
}

/** One more pixel with this offset in every lane-strided bin from `i` up to `end`. */
function addRange(line: FineLine, i: number, end: number, offset: number, v: number): void {
  line.n[i] += 1;
  line.d[i] += offset;
  line.dd[i] += offset * offset;
  line.v[i] += v;
  line.v[end] -= v;
  line.n[end] -= 1;
  line.d[end] -= offset;
  line.dd[end] -= offset * offset;
}

function mergeBins(
  stack: BandStack,
  band: number,
  line: FineLine,
  grid: { step: number; merge: number; vPerBin: number },
): void {
  const { step, merge, vPerBin } = grid;
  const { bins } = stack;
  for (let k = 0; k < bins; k++) {
    let n = 0;
    let s = 0;
    let m = 0;
    let mm = 0;
    let v = 0;
    for (let j = 0; j < merge; j++) {
      const i = k * merge + j;
      const pixels = line.n[i];
      if (!(pixels > 0.5)) continue;
      // Centre of the fine bin relative to the merged bin's start, plus the rows' own offsets.
      const centre = j + 0.5;
      n += pixels;
      s += line.sum[i];
      v += line.v[i] + pixels * i * vPerBin;
      m += pixels * centre + line.d[i];
      mm += pixels * centre * centre + 2 * centre * line.d[i] + line.dd[i];
    }
    const cell = band * bins + (step < 0 ? bins - 1 - k : k);
    stack.pixels[cell] = n;
    if (n === 0) continue;
    const mean = m / n;
    stack.light[cell] = s / n;
    stack.dv[cell] = v / n;
    stack.offset[cell] = (mean - merge / 2) * step;
    stack.varU[cell] = Math.max(0, mm / n - mean * mean) * step * step;
  }
}

/** The band's mean v becomes its place; cells keep theirs relative to it. */
function centreBand(stack: BandStack, band: number, middle: number): void {
  const from = band * stack.bins;
  let n = 0;
  let v = 0;
  for (let i = from; i < from + stack.bins; i++) {
    n += stack.pixels[i];
    v += stack.pixels[i] * stack.dv[i];
  }
  const mean = n > 0 ? v / n : middle;
  stack.bandV[band] = mean;
  for (let i = from; i < from + stack.bins; i++) if (stack.pixels[i] > 0) stack.dv[i] -= mean;
}
