import type { Profile } from './profile';
import { AveragedModel, type ProfileFit } from './fit-profile';
import { ModelPoint, orderAt, placeOfOrder } from './two-slit-model';

/** Centre of one order on the common coordinate, px. */
export interface OrderPlace {
  m: number;
  kind: 'bright' | 'dark';
  u: number;
  /** Standard uncertainty of u, px. */
  uPx: number;
  /** Raw middle minus centre, px along +m; null where the data show no middle. */
  pullPx: number | null;
}

const MOST_ORDERS = 800;

export const toPx = (fit: ProfileFit, x: number) => fit.originPx + x * fit.unitPx;
export const toModel = (fit: ProfileFit, u: number) => (u - fit.originPx) / fit.unitPx;

/** Extent over which a middle is seen: half distance of the outer averaging nodes (px) and their weight. */
export interface Extent {
  node: number;
  weight: number;
}

/** A point of a frame's profile is about one pixel long. */
function pixelExtent(fit: ProfileFit): Extent {
  return { node: fit.result.parameters[0] * fit.unitPx > 8 ? 0.4 : 0.3, weight: 1 / 6 };
}

/** All bright and dark orders between two places of the profile. */
export function listOrders(
  fit: ProfileFit,
  profile: Profile,
  covariance: Float64Array,
  from: number,
  to: number,
  extent: Extent = pixelExtent(fit),
): OrderPlace[] {
  const p = fit.result.parameters;
  const first = Math.ceil(2 * orderAt(fit.layout, fit.fixed, p, toModel(fit, from)));
  const last = Math.floor(2 * orderAt(fit.layout, fit.fixed, p, toModel(fit, to)));
  const orders: OrderPlace[] = [];
  if (!Number.isFinite(first) || !Number.isFinite(last)) return orders;
  for (let h = first; h <= last && orders.length < MOST_ORDERS; h++) {
    const x = placeOfOrder(fit.layout, fit.fixed, p, h / 2);
    if (!Number.isFinite(x)) continue;
    const u = toPx(fit, x);
    const bright = h % 2 === 0;
    orders.push({
      m: h / 2,
      kind: bright ? 'bright' : 'dark',
      u,
      uPx: placeUncertainty(fit, covariance, h / 2) * fit.unitPx,
      pullPx: pullOf(fit, profile, u, bright, extent),
    });
  }
  return orders;
}

/** u of the place of an order: the gradient by differences, through the covariance. */
function placeUncertainty(fit: ProfileFit, covariance: Float64Array, m: number): number {
  const n = fit.layout.size;
  const gradient = new Float64Array(n);
  for (const k of [0, 1, fit.layout.curve, fit.layout.chirp]) {
    if (k < 0) continue;
    const h = 1e-6 * Math.max(1e-3, Math.abs(fit.result.parameters[k]));
    const up = fit.result.parameters.slice();
    const down = fit.result.parameters.slice();
    up[k] += h;
    down[k] -= h;
    gradient[k] =
      (placeOfOrder(fit.layout, fit.fixed, up, m) - placeOfOrder(fit.layout, fit.fixed, down, m)) / (2 * h);
  }
  let s = 0;
  for (let i = 0; i < n; i++)
    for (let j = 0; j < n; j++) s += gradient[i] * covariance[i * n + j] * gradient[j];
  return Math.sqrt(Math.max(0, s));
}

/** Window for the slope of the data about the fit, as a share of the spacing, and the least prominence in sigmas. */
const WINDOW = 0.22;
const LEAST_PROMINENCE = 4;

/** Steps a spacing in which a curve's own maximum is looked for, this many at first. */
const STEPS = 40;
const COARSE = 6;

/** The step with the highest value within half a spacing, coarse first and then one by one; null at an end. */
function highest(valueAt: (step: number) => number): number | null {
  const end = 3 * COARSE;
  let best = 0;
  let most = valueAt(0);
  const look = (i: number) => {
    const value = valueAt(i);
    if (!(value > most)) return;
    most = value;
    best = i;
  };
  for (let i = -end; i <= end; i += COARSE) if (i !== 0) look(i);
  const coarse = best;
  for (let d = 1 - COARSE; d < COARSE; d++) if (d !== 0) look(coarse + d);
  return Math.abs(best) > end ? null : best;
}

/**
 * Raw middle by the data: the fitted curve's own maximum (minimum), moved by what the data's slope about the fit there
 * says. Null where the curve has no maximum inside the fringe or it does not stand out of the noise.
 */
function pullOf(
  fit: ProfileFit,
  profile: Profile,
  u: number,
  bright: boolean,
  { node, weight }: Extent,
): number | null {
  const spacing = fit.result.parameters[0] * fit.unitPx;
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const light = (x: number) =>
    model.evaluate(fit.result.parameters, toModel(fit, x), node / fit.unitPx, weight, false)
      ? model.light
      : NaN;
  const sign = bright ? 1 : -1;
  const step = spacing / STEPS;
  const best = highest((i) => sign * light(u + i * step));
  if (best === null) return null;
  const [l, c, r] = [light(u + (best - 1) * step), light(u + best * step), light(u + (best + 1) * step)];
  const second = (l - 2 * c + r) / (step * step);
  if (!(sign * second < 0)) return null;
  const peak = u + best * step - (r - l) / (2 * step) / second;
  const sums = { w: 0, x: 0, y: 0, xx: 0, xy: 0 };
  for (let k = 0; k < profile.size; k++) {
    const d = profile.u[k] - peak;
    if (!Number.isFinite(profile.sigma[k]) || Math.abs(d) > WINDOW * spacing) continue;
    const w = 1 / profile.sigma[k] ** 2;
    const rest = profile.light[k] / fit.unitLight - light(profile.u[k]);
    sums.w += w;
    sums.x += w * d;
    sums.y += w * rest;
    sums.xx += w * d * d;
    sums.xy += w * d * rest;
  }
  if (!(sums.w > 0)) return null;
  const spread = sums.xx - (sums.x * sums.x) / sums.w;
  if (!(spread > 0)) return null;
  const slope = (sums.xy - (sums.x * sums.y) / sums.w) / spread;
  const uLight = 1 / Math.sqrt(sums.w);
  const prominence = Math.abs(c - light(peak + (peak < u ? -0.5 : 0.5) * spacing));
  if (!(prominence > LEAST_PROMINENCE * (uLight / fit.unitLight))) return null;
  const pull = peak - slope / second - u;
  return Math.abs(pull) < 0.45 * spacing ? pull : null;
}
