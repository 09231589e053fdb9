import type { Picture } from './picture';

const BINS = 64;
const ROWS = 128;
/** A stripe stands out by this share of the whole swing on both sides. */
const PROMINENCE = 0.3;
/** Swing over the mean light from which there are stripes at all. */
const LEAST_SWING = 0.2;
/** Difference of the profiles of both halves, relative to the swing, up to which stripes are straight. */
const STRAIGHT = 0.06;

/**
 * Bright stripes right across a picture, upright or lying, that are too wide to be a wave of several periods: how many
 * maxima there are inside, where at least one dark stripe is seen with light on both its sides. Null where there is none, or
 * where the halves of the picture do not show the same.
 */
export function countWideStripes(picture: Picture): number | null {
  for (const upright of [true, false]) {
    const [a, b] = [0, 1].map((half) => profileOf(picture, upright, half));
    const both = a.map((v, i) => (v + b[i]) / 2);
    const swing = Math.max(...both) - Math.min(...both);
    const off = Math.sqrt(a.reduce((s, v, i) => s + (v - b[i]) ** 2, 0) / BINS);
    if (!(swing > LEAST_SWING) || off > STRAIGHT * swing) continue;
    const { maxima, minima } = turningPoints(both, PROMINENCE * swing);
    if (minima > 0) return maxima;
  }
  return null;
}

/** Light across the stripes in one half of the picture, relative to its mean. */
function profileOf(picture: Picture, upright: boolean, half: number): number[] {
  const { samples, light, widthPx, heightPx } = picture;
  const across = upright ? widthPx : heightPx;
  const along = upright ? heightPx : widthPx;
  const sums = new Float64Array(BINS);
  const counts = new Float64Array(BINS);
  const step = Math.max(1, Math.floor(along / (2 * ROWS)));
  const from = half === 0 ? 0 : Math.ceil(along / 2);
  const to = half === 0 ? Math.floor(along / 2) : along;
  for (let q = from; q < to; q += step) {
    for (let p = 0; p < across; p++) {
      const k = Math.floor((p * BINS) / across);
      sums[k] += light[samples[upright ? q * widthPx + p : p * widthPx + q]];
      counts[k]++;
    }
  }
  const profile = Array.from(sums, (s, k) => s / Math.max(1, counts[k]));
  const mean = profile.reduce((s, v) => s + v, 0) / BINS;
  return profile.map((v) => v / Math.max(mean, 1e-12));
}

/** Maxima and minima inside that stand out by at least `least` from what lies before and after them. */
function turningPoints(profile: number[], least: number): { maxima: number; minima: number } {
  let maxima = 0;
  let minima = 0;
  let low = profile[0];
  let high = profile[0];
  let rising: boolean | null = null;
  for (const v of profile) {
    low = Math.min(low, v);
    high = Math.max(high, v);
    if (rising !== false && high - v > least) {
      if (rising === true) maxima++;
      rising = false;
      low = v;
    } else if (rising !== true && v - low > least) {
      if (rising === false) minima++;
      rising = true;
      high = v;
    }
  }
  return { maxima, minima };
}
