import { COARSE_PIXELS, type Picture, type Plane } from './picture';

/** Pixels a plane may have so that looking for fringes stays quick. */
export const PLANE_PIXELS = 1_400_000;

/** The same where the file gave no small picture: the less is made, the sooner it is searched. */
const COARSE_PIXELS_READ = 150_000;

const SMALLEST_PLANE_PX = 64;

/**
 * Linear light reduced by whole-number block averages, from the finest that stays below PLANE_PIXELS down to a
 * plane of about 64 px. Light above the white level counts as white.
 */
export function buildPyramid(picture: Picture): Plane[] {
  return halvings(reducePicture(picture, factorFor(picture, PLANE_PIXELS)));
}

/** As `buildPyramid`, from a coarser plane on, and from the small picture of the file where there is one. */
export function coarsePlanes(picture: Picture): Plane[] {
  const { small } = picture;
  const factor = factorFor(picture, small ? COARSE_PIXELS : COARSE_PIXELS_READ);
  if (!small || small.factor > factor) return halvings(reducePicture(picture, factor));
  const reduced = {
    ...picture,
    samples: small.samples,
    widthPx: picture.widthPx / small.factor,
    heightPx: picture.heightPx / small.factor,
  };
  return halvings({ ...reducePicture(reduced, factor / small.factor), factor });
}

function factorFor(picture: Picture, mostPixels: number): number {
  let factor = 1;
  while ((picture.widthPx / factor) * (picture.heightPx / factor) > mostPixels) factor *= 2;
  return factor;
}

function halvings(first: Plane): Plane[] {
  const planes = [first];
  for (;;) {
    const last = planes[planes.length - 1];
    if (
      Math.max(last.widthPx, last.heightPx) <= SMALLEST_PLANE_PX ||
      Math.min(last.widthPx, last.heightPx) < 8
    )
      return planes;
    planes.push(halve(last));
  }
}

export function reducePicture(picture: Picture, factor: number): Plane {
  const w = Math.floor(picture.widthPx / factor);
  const h = Math.floor(picture.heightPx / factor);
  return reduceWindow(picture, factor, 0, 0, w, h);
}

/** Block averages of a window whose corner is at pixel (x0, y0) of the reduced picture. */
export function reduceWindow(
  picture: Picture,
  factor: number,
  x0: number,
  y0: number,
  widthPx: number,
  heightPx: number,
): Plane {
  const data = new Float32Array(widthPx * heightPx);
  const scale = 1 / (factor * factor);
  const pairs = pairsOf(picture, factor);
  for (let y = 0; y < heightPx; y++) {
    const row = data.subarray(y * widthPx, (y + 1) * widthPx);
    for (let dy = 0; dy < factor; dy++) {
      const from = ((y0 + y) * factor + dy) * picture.widthPx + x0 * factor;
      if (pairs) addRow(pairs.samples, pairs.light, row, from / 2, factor / 2);
      else addRow(picture.samples, picture.light, row, from, factor);
    }
    if (factor > 1) for (let x = 0; x < widthPx; x++) row[x] *= scale;
  }
  return { widthPx, heightPx, data, factor, x0Px: x0 * factor, y0Px: y0 * factor };
}

/** Where blocks are large, 8 bit samples are looked up two at a time, in a table of the light of every pair. */
function pairsOf(picture: Picture, factor: number): { samples: Uint16Array; light: Float32Array } | null {
  const { samples, light, widthPx } = picture;
  if (picture.bits !== 8 || factor % 4 !== 0 || widthPx % 2 !== 0 || samples.byteOffset % 2 !== 0)
    return null;
  const table = new Float32Array(65536);
  for (let b = 0; b < 256; b++) for (let a = 0; a < 256; a++) table[256 * b + a] = light[a] + light[b];
  return { samples: new Uint16Array(samples.buffer, samples.byteOffset, samples.length >> 1), light: table };
}

/** Adds the light of one row of samples from `at` on, `many` of them to each entry. */
function addRow(
  samples: Uint8Array | Uint16Array,
  light: Float32Array,
  row: Float32Array,
  at: number,
  many: number,
): void {
  let i = at;
  if (many === 1) {
    for (let x = 0; x < row.length; x++) row[x] += light[samples[i++]];
  } else if (many === 2) {
    for (let x = 0; x < row.length; x++, i += 2) row[x] += light[samples[i]] + light[samples[i + 1]];
  } else {
    // Four sums side by side, so that no addition waits for the one before.
    const fours = many - (many % 4);
    for (let x = 0; x < row.length; x++) {
      let a = 0;
      let b = 0;
      let c = 0;
      let d = 0;
      const end = i + fours;
      const next = i + many;
      for (; i < end; i += 4) {
        a += light[samples[i]];
        b += light[samples[i + 1]];
        c += light[samples[i + 2]];
        d += light[samples[i + 3]];
      }
      for (; i < next; i++) a += light[samples[i]];
      row[x] += a + b + (c + d);
    }
  }
}

function halve(plane: Plane): Plane {
  const w = plane.widthPx >> 1;
  const h = plane.heightPx >> 1;
  const data = new Float32Array(w * h);
  for (let y = 0; y < h; y++) {
    let a = 2 * y * plane.widthPx;
    let b = a + plane.widthPx;
    for (let x = 0; x < w; x++, a += 2, b += 2)
      data[y * w + x] = 0.25 * (plane.data[a] + plane.data[a + 1] + plane.data[b] + plane.data[b + 1]);
  }
  return { ...plane, widthPx: w, heightPx: h, data, factor: 2 * plane.factor };
}

/** The plane minus its mean over a square of 2 r + 1 px about each pixel: the light's own outline goes, fringes up to that size stay. */
export function withoutOutline(plane: Plane, r: number): Plane {
  const { widthPx: w, heightPx: h, data: from } = plane;
  const data = new Float32Array(w * h);
  // Down the columns with one running sum for each, row by row; along each row with one over those.
  const sums = new Float64Array(w);
  let rows = 0;
  for (let y = -r; y < h; y++) {
    const enters = y + r < h;
    const leaves = y - r - 1 >= 0;
    const next = (y + r) * w;
    const gone = (y - r - 1) * w;
    if (enters) rows++;
    if (leaves) rows--;
    if (enters && leaves) {
      for (let x = 0; x < w; x++) sums[x] += from[next + x] - from[gone + x];
    } else if (enters) {
      for (let x = 0; x < w; x++) sums[x] += from[next + x];
    } else if (leaves) {
      for (let x = 0; x < w; x++) sums[x] -= from[gone + x];
    }
    if (y >= 0) lessRowMeans(from, data, y * w, sums, r, rows);
  }
  return { ...plane, data };
}

/** One row minus the means of `sums` (each over `rows` samples) over up to 2 r + 1 columns; at its ends over those there are. */
function lessRowMeans(
  from: Float32Array,
  to: Float32Array,
  start: number,
  sums: Float64Array,
  r: number,
  rows: number,
): void {
  const n = sums.length;
  let count = Math.min(r, n);
  let sum = 0;
  for (let x = 0; x < count; x++) sum += sums[x];
  let x = 0;
  const inner = n - r;
  for (; x < Math.min(r + 1, inner); x++) {
    sum += sums[x + r];
    to[start + x] = from[start + x] - sum / (++count * rows);
  }
  const scale = 1 / (count * rows);
  for (; x < inner; x++) {
    sum += sums[x + r] - sums[x - r - 1];
    to[start + x] = from[start + x] - sum * scale;
  }
  for (; x < n; x++) {
    if (x - r - 1 >= 0) {
      sum -= sums[x - r - 1];
      count--;
    }
    to[start + x] = from[start + x] - sum / (count * rows);
  }
}
