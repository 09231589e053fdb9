import type { Picture } from './picture';
import { reducePicture } from './pyramid';

const SIDE = 220;
const ROUNDS = 12;
/** Shares of the frame's short side: how near the lines of steepest change must pass to one point. */
const FIRST_REACH = 0.3;
const LAST_REACH = 0.03;
/** Least share of the frame's change whose lines meet there, and how evenly it must stand around the point. */
const LEAST_SHARE = 0.42;
const LEAST_ROUNDNESS = 0.15;

/**
 * Do the lines of steepest change meet in one point, from all sides? Then the light runs in rings. Each place votes with its
 * gradient g: its line passes the centre c at the distance |g x (x - c)| / |g|; least squares with weights that fall with
 * that distance find c (the robust loss of Cauchy), closing in round by round.
 */
export function looksLikeRings(picture: Picture): boolean {
  const factor = Math.max(1, Math.floor(Math.max(picture.widthPx, picture.heightPx) / SIDE));
  const { widthPx: w, heightPx: h, data } = reducePicture(picture, factor);
  if (w < 16 || h < 16) return false;
  const short = Math.min(w, h);
  let best = false;
  // Rings may stand anywhere: starts over the frame, of which the one that gathers most decides.
  let most = 0;
  for (const sx of [0.5, 0.2, 0.8]) {
    for (const sy of [0.5, 0.2, 0.8]) {
      const found = closeIn(data, w, h, sx * w, sy * h, short);
      if (found.share > most) {
        most = found.share;
        best = found.share > LEAST_SHARE && found.roundness > LEAST_ROUNDNESS;
      }
    }
  }
  return best;
}

function closeIn(
  data: Float32Array,
  w: number,
  h: number,
  x0: number,
  y0: number,
  short: number,
): { share: number; roundness: number } {
  let cx = x0;
  let cy = y0;
  let share = 0;
  let roundness = 0;
  for (let round = 0; round < ROUNDS; round++) {
    const reach = short * FIRST_REACH * (LAST_REACH / FIRST_REACH) ** (round / (ROUNDS - 1));
    const s = { xx: 0, xy: 0, yy: 0, bx: 0, by: 0, all: 0, near: 0 };
    for (let y = 1; y < h - 1; y += 1) {
      for (let x = 1; x < w - 1; x += 1) {
        const i = y * w + x;
        const gx = data[i + 1] - data[i - 1];
        const gy = data[i + w] - data[i - w];
        const g2 = gx * gx + gy * gy;
        if (!(g2 > 0)) continue;
        // Unit normal of the line along the gradient, and its distance from the centre so far.
        const g = Math.sqrt(g2);
        const nx = -gy / g;
        const ny = gx / g;
        const dx = x - cx;
        const dy = y - cy;
        const off = (nx * dx + ny * dy) / reach;
        const weight = g / (1 + off * off);
        s.all += g;
        s.near += weight;
        const at = nx * x + ny * y;
        s.xx += weight * nx * nx;
        s.xy += weight * nx * ny;
        s.yy += weight * ny * ny;
        s.bx += weight * nx * at;
        s.by += weight * ny * at;
      }
    }
    const det = s.xx * s.yy - s.xy * s.xy;
    const sum = s.xx + s.yy;
    if (!(det > 1e-9 * sum * sum)) return { share: 0, roundness: 0 };
    cx = (s.yy * s.bx - s.xy * s.by) / det;
    cy = (s.xx * s.by - s.xy * s.bx) / det;
    share = s.near / s.all;
    // Smaller over larger eigenvalue of the normals' scatter: 1 where they stand evenly all round.
    const root = Math.sqrt(Math.max(0, sum * sum - 4 * det));
    roundness = (sum - root) / (sum + root);
  }
  return { share, roundness };
}
