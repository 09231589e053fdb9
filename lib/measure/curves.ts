import type { Curves, Strip } from '@/lib/domain/reading-result';
import { AveragedModel, type ProfileFit } from '@/lib/fit/fit-profile';
import type { Profile } from '@/lib/fit/profile';
import { toModel } from '@/lib/fit/orders';
import { ModelPoint } from '@/lib/fit/two-slit-model';
import type { PlaceFit } from './place';

const MOST_POINTS = 1500;
const MOST_STRIP = 480;

/** The curves of the stage, thinned to at most 1500 points by averaging neighbours. */
export function curvesOf(place: PlaceFit, alongFromU: (u: number) => number): Curves {
  const { fit, profile, table, grid } = place.band;
  const leftOut = (from: number, to: number): LeftPoint => {
    const u = grid.from + ((from + to) / 2) * grid.pitchPx;
    return { u, light: table.lightAt(u), sigma: 0 };
  };
  return profileCurves(fit, profile, leftOut, alongFromU);
}

/** What is drawn where a group of points has no part in the fit. */
export interface LeftPoint {
  u: number;
  light: number;
  sigma: number;
}

/** The curves of any fitted profile; `leftOut` answers for points from..to that were left out. */
export function profileCurves(
  fit: ProfileFit,
  profile: Profile,
  leftOut: (from: number, to: number) => LeftPoint,
  alongFromU: (u: number) => number,
): Curves {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const group = Math.max(1, Math.ceil(profile.size / MOST_POINTS));
  const out: Curves = { alongPx: [], data: [], uData: [], fit: [], envelope: [], misfit: [], left: [] };
  for (let from = 0; from < profile.size; from += group) {
    const to = Math.min(profile.size, from + group);
    let w = 0;
    let wu = 0;
    let wy = 0;
    for (let k = from; k < to; k++) {
      if (!Number.isFinite(profile.sigma[k])) continue;
      const wk = 1 / profile.sigma[k] ** 2;
      w += wk;
      wu += wk * profile.u[k];
      wy += wk * profile.light[k];
    }
    const left = w === 0;
    const { u, light, sigma } = left
      ? leftOut(from, to)
      : { u: wu / w, light: wy / w, sigma: 1 / Math.sqrt(w) };
    if (
      !model.evaluate(
        fit.result.parameters,
        toModel(fit, u),
        profile.node[from] / fit.unitPx,
        profile.nodeWeight[from],
        false,
      )
    )
      continue;
    out.alongPx.push(alongFromU(u));
    out.data.push(light);
    out.uData.push(sigma);
    out.fit.push(model.light * fit.unitLight);
    out.envelope.push(model.envelope * fit.unitLight);
    out.misfit.push(left ? 0 : (light - model.light * fit.unitLight) / sigma);
    out.left.push(left ? 1 : 0);
  }
  return out;
}

/** The averaged region for lists, 0 to 1 of its own maximum; left-out places take the fit's light. */
export function stripOf(curves: Curves): Strip {
  const n = curves.alongPx.length;
  if (n === 0) return { fromPx: 0, stepPx: 1, light: [] };
  const count = Math.min(MOST_STRIP, n);
  const from = curves.alongPx[0];
  const stepPx = (curves.alongPx[n - 1] - from) / Math.max(1, count - 1) || 1;
  const light: number[] = [];
  for (let i = 0, k = 0; i < count; i++) {
    const u = from + i * stepPx;
    while (k + 2 < n && curves.alongPx[k + 1] < u) k++;
    const f = Math.min(
      1,
      Math.max(0, (u - curves.alongPx[k]) / (curves.alongPx[k + 1] - curves.alongPx[k] || 1)),
    );
    light.push(curves.data[k] + f * ((curves.data[k + 1] ?? curves.data[k]) - curves.data[k]));
  }
  const top = Math.max(...light, 1e-12);
  return { fromPx: from, stepPx, light: light.map((v) => Math.min(1, Math.max(0, v / top))) };
}
