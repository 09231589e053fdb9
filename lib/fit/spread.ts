import { gainAt, LEFT, strayAt } from './cells';
import type { BandFit } from './band-fit';
import { AveragedModel } from './fit-profile';
import { expectedOn, viewCells } from './fit-table';
import { varianceAt } from './noise';
import { ModelPoint } from './two-slit-model';

/** How sure the parameters are: covariance in model units with its degrees of freedom. */
export interface Spread {
  /** Row-major, size x size, model units. */
  covariance: Float64Array;
  /** Degrees of freedom of the spacing's uncertainty; null is infinite. */
  dof: number | null;
  /** Where it comes from: the noise model, the scatter of the bands, or structure along the profile. */
  from: 'noise' | 'bands' | 'profile';
  /** Spacing uncertainties of each kind, model units. */
  byNoise: number;
  byBands: number;
  byProfile: number;
  /** Groups of bands that count as independent. */
  groups: number;
}

const FEWEST_GROUPS = 8;

/**
 * Covariance of the fitted parameters. The noise model's is the floor; the scatter of bands (cluster-robust: sum over
 * bands of the squared influence of each) replaces it where neighbouring pixels go together; where the profile misses the
 * model by more than its noise, segments along the profile give a third.
 */
export function spreadOf(band: BandFit): Spread | null {
  const { fit } = band;
  const c = fit.result.covariance;
  if (c === null) return null;
  const n = fit.layout.size;
  const gradients = gradientsOnGrid(band);
  const influences = bandInfluences(band, gradients, c, n);
  const { groups, members } = groupBands(influences, n);
  const byBandsMatrix = sumOuter(members, n, groups > 1 ? groups / (groups - 1) : 1);
  const segments = profileInfluences(band, gradients, c, n);
  const chi = fit.result.chiSquare / Math.max(1, fit.result.dof);
  const misfit = chi > 1 + 3 * Math.sqrt(2 / Math.max(1, fit.result.dof));
  const bySegments = sumOuter(
    segments,
    n,
    segments.length / Math.max(1, segments.length - Math.min(n, segments.length / 2)),
  );
  const byNoise = Math.sqrt(c[0]);
  const byBands = Math.sqrt(byBandsMatrix[0]);
  const byProfile = misfit ? Math.sqrt(bySegments[0]) : 0;
  const common = { byNoise, byBands, byProfile, groups };
  if (byProfile > byNoise && byProfile > byBands) {
    return {
      ...common,
      covariance: floored(bySegments, c, n),
      dof: Math.max(2, segments.length - Math.min(n, segments.length / 2)),
      from: 'profile',
    };
  }
  if (byBands > byNoise)
    return {
      ...common,
      covariance: floored(byBandsMatrix, c, n),
      dof: Math.max(1, groups - 1),
      from: 'bands',
    };
  return { ...common, covariance: Float64Array.from(c), dof: null, from: 'noise' };
}

/** Keeps correlations of `a` but lets no variance fall below the noise model's. */
function floored(a: Float64Array, noise: Float64Array, n: number): Float64Array {
  const out = Float64Array.from(a);
  for (let i = 0; i < n; i++) {
    const lift = a[i * n + i] > 0 ? Math.max(1, Math.sqrt(noise[i * n + i] / a[i * n + i])) : 1;
    for (let j = 0; j < n; j++) {
      out[i * n + j] *= lift;
      out[j * n + i] *= lift;
    }
  }
  return out;
}

/** Influence of each band on the parameters: C * sum over its cells of weight * residual * gradient. */
function bandInfluences(band: BandFit, gradients: Float64Array, c: Float64Array, n: number): Float64Array[] {
  const { data, state, grid, table, fit } = band;
  const { u: place, bin, light: fitted } = viewCells(data, state, grid, table);
  const expected = expectedOn(grid, table);
  const out: Float64Array[] = [];
  for (let b = 0; b < data.bands; b++) {
    const score = new Float64Array(n);
    if (!(state.gain[b] > 0) || state.noise === null) continue;
    for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
      const k = bin[cell];
      if (k < 0 || state.left[cell] !== LEFT.used) continue;
      const u = place[cell];
      const z = u / grid.half;
      const g = gainAt(state, b, data.dv[cell], z);
      const extra = strayAt(state, b, u, z);
      const w = (data.pixels[cell] * g) / varianceAt(state.noise, g * expected[k] + extra);
      const wr = w * (data.light[cell] - extra - g * fitted[cell]) * fit.unitLight;
      for (let i = 0; i < n; i++) score[i] += wr * gradients[k * n + i];
    }
    out.push(multiply(c, score, n));
  }
  return out;
}

/** Gradient of the model (light in units of unitLight) at every bin centre of the grid. */
function gradientsOnGrid(band: BandFit): Float64Array {
  const { fit, grid, profile } = band;
  const n = fit.layout.size;
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const out = new Float64Array(grid.bins * n);
  for (let k = 0; k < grid.bins; k++) {
    const u = Number.isFinite(profile.sigma[k]) ? profile.u[k] : grid.from + (k + 0.5) * grid.pitchPx;
    if (
      !model.evaluate(
        fit.result.parameters,
        (u - fit.originPx) / fit.unitPx,
        profile.node[k] / fit.unitPx,
        profile.nodeWeight[k],
        true,
      )
    )
      continue;
    out.set(model.gradient, k * n);
  }
  return out;
}

/** Neighbouring bands are put together until their influences on the spacing no longer go together. */
function groupBands(influences: Float64Array[], n: number): { groups: number; members: Float64Array[] } {
  let members = influences;
  while (members.length >= 2 * FEWEST_GROUPS && correlation(members) > 1.3 / Math.sqrt(members.length)) {
    const merged: Float64Array[] = [];
    for (let i = 0; i + 1 < members.length; i += 2) {
      const sum = Float64Array.from(members[i]);
      const last = i + 3 === members.length ? 2 : 1;
      for (let k = 1; k <= last; k++) for (let j = 0; j < n; j++) sum[j] += members[i + k][j];
      merged.push(sum);
    }
    members = merged;
  }
  return { groups: effectiveCount(members), members };
}

function correlation(members: Float64Array[]): number {
  let a = 0;
  let b = 0;
  for (let i = 0; i < members.length; i++) {
    a += members[i][0] ** 2;
    if (i > 0) b += members[i][0] * members[i - 1][0];
  }
  return a > 0 ? b / a : 0;
}

/** Bands of unequal weight count for fewer: (sum of squares)^2 / sum of fourth powers over the members, normal expectation undone. */
function effectiveCount(members: Float64Array[]): number {
  let two = 0;
  let four = 0;
  for (const m of members) {
    two += m[0] ** 2;
    four += m[0] ** 4;
  }
  if (!(four > 0)) return members.length;
  // For equal normal members sum^2/sum4 is n/3.
  return Math.min(members.length, Math.max(2, (3 * two * two) / four));
}

/** Influence of segments along the profile, about one fringe each. */
function profileInfluences(
  band: BandFit,
  gradients: Float64Array,
  c: Float64Array,
  n: number,
): Float64Array[] {
  const { fit, profile, grid } = band;
  const spacing = fit.result.parameters[0] * fit.unitPx;
  const out: Float64Array[] = [];
  let score = new Float64Array(n);
  let segment = 0;
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  for (let k = 0; k < grid.bins; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const here = Math.floor((profile.u[k] - grid.from) / spacing);
    if (here !== segment) {
      out.push(multiply(c, score, n));
      score = new Float64Array(n);
      segment = here;
    }
    model.evaluate(
      fit.result.parameters,
      (profile.u[k] - fit.originPx) / fit.unitPx,
      profile.node[k] / fit.unitPx,
      profile.nodeWeight[k],
      false,
    );
    const r = profile.light[k] - model.light * fit.unitLight;
    const wr = (r * fit.unitLight) / (profile.sigma[k] * profile.sigma[k]);
    for (let i = 0; i < n; i++) score[i] += wr * gradients[k * n + i];
  }
  out.push(multiply(c, score, n));
  return out;
}

function multiply(c: Float64Array, v: Float64Array, n: number): Float64Array {
  const out = new Float64Array(n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) out[i] += c[i * n + j] * v[j];
  return out;
}

function sumOuter(members: Float64Array[], n: number, factor: number): Float64Array {
  const out = new Float64Array(n * n);
  for (const m of members)
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) out[i * n + j] += factor * m[i] * m[j];
  return out;
}
