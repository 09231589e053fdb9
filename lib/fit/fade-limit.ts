import { AveragedModel, type ProfileFit } from './fit-profile';
import { leastSquares } from './least-squares';
import type { Profile } from './profile';
import { ModelPoint, orderAt } from './two-slit-model';

/**
 * How much fading of the contrast with order the data leave room for: least-squares value of f in fade = 1 - f m^2 / 2 and
 * its standard uncertainty, with all parameters of the fit free beside it (one linear step from the solution). f = width^2
 * may come out negative, which is noise. Null where the data do not fix it.
 */
export function fadeRoom(profile: Profile, fit: ProfileFit): { f: number; u: number } | null {
  const { layout, fixed } = fit;
  const p = fit.result.parameters;
  const model = new AveragedModel(new ModelPoint(layout, fixed));
  const free = Array.from(p.keys()).filter((k) => !fit.result.boundsHit.includes(k));
  const n = free.length + 1;
  const rows: Float64Array[] = [];
  const rest: number[] = [];
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const x = (profile.u[k] - fit.originPx) / fit.unitPx;
    if (!model.evaluate(p, x, profile.node[k] / fit.unitPx, profile.nodeWeight[k], true)) continue;
    const w = fit.unitLight / profile.sigma[k];
    const m = orderAt(layout, fixed, p, x);
    const row = new Float64Array(n);
    free.forEach((j, i) => (row[i] = model.gradient[j] * w));
    // The light swings with B: d(light)/df = -m^2/2 * B * d(light)/dB.
    row[n - 1] = -0.5 * m * m * p[5] * model.gradient[5] * w;
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
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  return { f: parameters[n - 1], u: Math.sqrt(covariance[n * n - 1] * scale) };
}
