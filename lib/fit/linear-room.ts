import { AveragedModel, type ProfileFit } from './fit-profile';
import { leastSquares } from './least-squares';
import type { Profile } from './profile';
import { ModelPoint, orderAt } from './two-slit-model';

/** One more column beside the fit's own: change of the light (units of unitLight) by it, at u with what the model says there. */
export type ExtraColumn = (at: { u: number; light: number; m: number; swing: number }) => number;

export interface LinearRoom {
  /** Least-squares values of the extra columns and their covariance (row-major over fit parameters, then extras). */
  values: Float64Array;
  covariance: Float64Array;
  size: number;
}

/**
 * What the data leave open for effects the model has not: one linear step from the solution with extra columns, all free
 * parameters of the fit beside them. Null where the data do not fix them. Noise as the profile states it.
 */
export function linearRoom(profile: Profile, fit: ProfileFit, extras: ExtraColumn[]): LinearRoom | null {
  const { layout, fixed } = fit;
  const p = fit.result.parameters;
  const model = new AveragedModel(new ModelPoint(layout, fixed));
  const free = Array.from(p.keys()).filter((k) => !fit.result.boundsHit.includes(k));
  const n = free.length + extras.length;
  const rows: Float64Array[] = [];
  const rest: number[] = [];
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const x = (profile.u[k] - fit.originPx) / fit.unitPx;
    if (!model.evaluate(p, x, profile.node[k] / fit.unitPx, profile.nodeWeight[k], true)) continue;
    const w = fit.unitLight / profile.sigma[k];
    const row = new Float64Array(n);
    free.forEach((j, i) => (row[i] = model.gradient[j] * w));
    const at = {
      u: profile.u[k],
      light: model.light,
      m: orderAt(layout, fixed, p, x),
      swing: p[5] * model.gradient[5],
    };
    extras.forEach((extra, i) => (row[free.length + i] = extra(at) * w));
    rows.push(row);
    rest.push((profile.light[k] / fit.unitLight - model.light) * w);
  }
  const problem = {
    residuals: rows.length,
    evaluate(q: Float64Array, r: Float64Array, jacobian: Float64Array | null) {
      rows.forEach((row, i) => {
        let s = rest[i];
        for (let j = 0; j < n; j++) s -= row[j] * q[j];
        r[i] = s;
        if (jacobian) for (let j = 0; j < n; j++) jacobian[j * rows.length + i] = row[j];
      });
      return true;
    },
  };
  const { parameters, covariance } = leastSquares(problem, new Float64Array(n), { maxEvaluations: 20 });
  if (covariance === null) return null;
  return { values: parameters.slice(free.length), covariance, size: n };
}

/**
 * How much fading of the contrast with order the data leave room for: f in fade = 1 - f m^2 / 2 and its standard uncertainty.
 * f = width^2 may come out negative, which is noise.
 */
export function fadeRoom(profile: Profile, fit: ProfileFit): { f: number; u: number } | null {
  const room = linearRoom(profile, fit, [({ m, swing }) => -0.5 * m * m * swing]);
  if (room === null) return null;
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  return { f: room.values[0], u: Math.sqrt(room.covariance[room.size * room.size - 1] * scale) };
}
