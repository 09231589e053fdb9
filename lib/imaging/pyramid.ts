import type { Picture, Plane } from './picture';

/** Pixels a plane may have so that looking for fringes stays quick. */
const PLANE_PIXELS = 1_400_000;

const SMALLEST_PLANE_PX = 64;

/**
 * Linear light reduced by whole-number block averages, from the finest that stays below PLANE_PIXELS down to a
 * plane of about 64 px. Light above the white level counts as white.
 */
export function buildPyramid(picture: Picture): Plane[] {
  let factor = 1;
  while ((picture.widthPx / factor) * (picture.heightPx / factor) > PLANE_PIXELS) factor *= 2;
  const planes = [reducePicture(picture, factor)];
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
  const { samples, light } = picture;
  const data = new Float32Array(w * h);
  if (factor === 1) {
    for (let i = 0; i < data.length; i++) data[i] = light[samples[i]];
    return { widthPx: w, heightPx: h, data, factor };
  }
  const scale = 1 / (factor * factor);
  for (let y = 0; y < h; y++) {
    const row = y * w;
    for (let dy = 0; dy < factor; dy++) {
      let i = (y * factor + dy) * picture.widthPx;
      for (let x = 0; x < w; x++) {
        let s = 0;
        for (let dx = 0; dx < factor; dx++) s += light[samples[i++]];
        data[row + x] += s;
      }
    }
    for (let x = 0; x < w; x++) data[row + x] *= scale;
  }
  return { widthPx: w, heightPx: h, data, factor };
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
  return { widthPx: w, heightPx: h, data, factor: 2 * plane.factor };
}

/** A window of the frame at full size, where a fine pattern needs it. */
export function cutPlane(picture: Picture, x0: number, y0: number, widthPx: number, heightPx: number): Plane {
  const data = new Float32Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y++) {
    let i = (y0 + y) * picture.widthPx + x0;
    for (let x = 0; x < widthPx; x++) data[y * widthPx + x] = picture.light[picture.samples[i++]];
  }
  return { widthPx, heightPx, data, factor: 1 };
}

/** The plane minus its mean over a square of 2 r + 1 px about each pixel: the light's own outline goes, fringes up to that size stay. */
export function withoutOutline(plane: Plane, r: number): Plane {
  const { widthPx: w, heightPx: h } = plane;
  const across = new Float32Array(w * h);
  const data = new Float32Array(w * h);
  for (let y = 0; y < h; y++) boxMeans(plane.data, across, y * w, w, r);
  // Down the columns with one running sum for each, row by row.
  const sums = new Float64Array(w);
  let count = 0;
  for (let y = -r; y < h; y++) {
    if (y + r < h) {
      const from = (y + r) * w;
      for (let x = 0; x < w; x++) sums[x] += across[from + x];
      count++;
    }
    if (y - r - 1 >= 0) {
      const from = (y - r - 1) * w;
      for (let x = 0; x < w; x++) sums[x] -= across[from + x];
      count--;
    }
    if (y < 0) continue;
    const scale = 1 / count;
    const at = y * w;
    for (let x = 0; x < w; x++) data[at + x] = plane.data[at + x] - sums[x] * scale;
  }
  return { ...plane, data };
}

/** Running means over up to 2 r + 1 samples of one row; at its ends over the samples there are. */
function boxMeans(from: Float32Array, to: Float32Array, start: number, n: number, r: number): void {
  let sum = 0;
  let count = 0;
  for (let i = 0; i < Math.min(r, n); i++) {
    sum += from[start + i];
    count++;
  }
  for (let i = 0; i < n; i++) {
    if (i + r < n) {
      sum += from[start + i + r];
      count++;
    }
    if (i - r - 1 >= 0) {
      sum -= from[start + i - r - 1];
      count--;
    }
    to[start + i] = sum / count;
  }
}
