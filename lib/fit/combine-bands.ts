import { gainAt, LEFT, strayAt, type BandData, type BandState, type CommonGrid } from './cells';
import { varianceAt } from './noise';
import { averagingNodes, type Profile } from './profile';
import { normalise } from './regress-bands';

/**
 * Gains before there is a fit, where clipping takes different fringes from different bands: each band against the one
 * before it on the bins both show, by the ratio of their standard deviations (which noise does not pull to one side).
 */
export function chainGains(data: BandData, state: BandState): void {
  let gain = 1;
  for (let b = 1; b < data.bands; b++) {
    const s = { n: 0, x: 0, y: 0, xx: 0, yy: 0 };
    for (let j = 0; j < data.bins; j++) {
      const here = b * data.bins + j;
      const before = here - data.bins;
      if (
        data.pixels[here] === 0 ||
        data.pixels[before] === 0 ||
        state.left[here] !== LEFT.used ||
        state.left[before] !== LEFT.used
      )
        continue;
      s.n++;
      s.x += data.light[before];
      s.y += data.light[here];
      s.xx += data.light[before] ** 2;
      s.yy += data.light[here] ** 2;
    }
    const vx = s.xx - (s.x * s.x) / s.n;
    const vy = s.yy - (s.y * s.y) / s.n;
    if (s.n > 10 && vx > 0 && vy > 0) gain *= Math.sqrt(vy / vx);
    state.gain[b] = gain;
  }
  normalise(data, state);
}

/**
 * One profile from all bands: in each bin of the common coordinate the weighted mean of (light - offset - slope z)/gain
 * with weights pixels * gain^2 / variance(light of the fit), never of the observed light.
 * `expected` is the light the last fit expects on the same grid; absent before the first fit. The cells must be placed.
 */
export function combineBands(
  data: BandData,
  state: BandState,
  grid: CommonGrid,
  expected: Float64Array | null,
  spacingPx: number,
): Profile {
  const n = grid.bins;
  const sw = new Float64Array(n);
  const sz = new Float64Array(n);
  const su = new Float64Array(n);
  const suu = new Float64Array(n);
  const sv = new Float64Array(n);
  const { u: place, bin } = state.view;
  const { left, noise } = state;
  const perHalf = 1 / grid.half;
  for (let b = 0; b < data.bands; b++) {
    if (!(state.gain[b] > 0)) continue;
    for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
      const k = bin[cell];
      if (k < 0 || left[cell] !== LEFT.used) continue;
      const u = place[cell];
      const g = gainAt(state, b, data.dv[cell], u * perHalf);
      const extra = strayAt(state, b, u, u * perHalf);
      const variance = expected && noise ? varianceAt(noise, g * expected[k] + extra) : 1;
      // Weight over gain: what the light is to be multiplied by.
      const wg = (data.pixels[cell] * g) / variance;
      const w = wg * g;
      const wu = w * u;
      sw[k] += w;
      sz[k] += wg * (data.light[cell] - extra);
      su[k] += wu;
      suu[k] += wu * u;
      sv[k] += w * data.varU[cell];
    }
  }
  return profileFrom(data, { sw, sz, su, suu, sv }, spacingPx);
}

function profileFrom(
  data: BandData,
  sums: Record<'sw' | 'sz' | 'su' | 'suu' | 'sv', Float64Array>,
  spacingPx: number,
): Profile {
  const n = sums.sw.length;
  const profile: Profile = {
    u: new Float64Array(n),
    node: new Float64Array(n),
    nodeWeight: new Float64Array(n),
    light: new Float64Array(n),
    sigma: new Float64Array(n).fill(Infinity),
    size: n,
  };
  for (let k = 0; k < n; k++) {
    const w = sums.sw[k];
    if (!(w > 0)) continue;
    const u = sums.su[k] / w;
    const bin = Math.max(0, sums.suu[k] / w - u * u) + sums.sv[k] / w;
    profile.u[k] = u;
    profile.light[k] = sums.sz[k] / w;
    profile.sigma[k] = 1 / Math.sqrt(w);
    const { node, weight } = averagingNodes(
      data.pixelVar + bin,
      data.pixelFourth + 1.8 * bin * bin + 6 * data.pixelVar * bin,
      spacingPx,
    );
    profile.node[k] = node;
    profile.nodeWeight[k] = weight;
  }
  return profile;
}
