import type { Picture } from './camera';

/**
 * The classic hand method, for comparison only: average the columns, take the middle of every bright fringe,
 * lay a straight line through them. Assumes upright fringes whose spacing is known to within a third.
 * Returns the spacing in px, or null when fewer than three middles are found.
 */
export function handSpacingPx(picture: Picture, aboutPx: number): number | null {
  const { widthPx, heightPx, channels } = picture;
  const profile = new Float64Array(widthPx);
  for (let r = 0; r < heightPx; r += 1) {
    for (let c = 0; c < widthPx; c += 1) profile[c] += picture.samples[channels * (r * widthPx + c)];
  }
  const reach = Math.max(1, Math.round(aboutPx / 3));
  const top = profile.reduce((a, b) => Math.max(a, b), 0);
  const floor = profile.reduce((a, b) => Math.min(a, b), Infinity);
  const middles: number[] = [];
  for (let c = reach; c < widthPx - reach; c += 1) {
    if (profile[c] < floor + 0.1 * (top - floor)) continue;
    let isTop = true;
    for (let k = -reach; k <= reach && isTop; k += 1)
      isTop = k === 0 || profile[c + k] < profile[c] || (profile[c + k] === profile[c] && k > 0);
    if (isTop) middles.push(centroid(profile, c, reach));
  }
  if (middles.length < 3) return null;
  const orders = middles.map((x) => Math.round((x - middles[0]) / aboutPx));
  const n = middles.length;
  const mo = orders.reduce((a, b) => a + b, 0) / n;
  const mx = middles.reduce((a, b) => a + b, 0) / n;
  let top2 = 0;
  let bottom = 0;
  for (let i = 0; i < n; i += 1) {
    top2 += (orders[i] - mo) * (middles[i] - mx);
    bottom += (orders[i] - mo) ** 2;
  }
  return bottom > 0 ? top2 / bottom : null;
}

/** Vertex of the parabola through the fringe's upper part. */
function centroid(profile: Float64Array, at: number, reach: number): number {
  const half = Math.max(1, Math.round(reach / 2));
  let sum = 0;
  let weight = 0;
  let least = Infinity;
  for (let k = -half; k <= half; k += 1) least = Math.min(least, profile[at + k]);
  for (let k = -half; k <= half; k += 1) {
    sum += (at + k + 0.5) * (profile[at + k] - least);
    weight += profile[at + k] - least;
  }
  return weight > 0 ? sum / weight : at + 0.5;
}
