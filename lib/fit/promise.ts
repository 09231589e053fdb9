import { AveragedModel, type ProfileFit } from './fit-profile';
import type { Profile } from './profile';
import { solveSymmetric } from './small-matrix';
import { layoutOf, ModelPoint, type ModelLayout, type ModelTerms } from './two-slit-model';

/** Step for terms in which the light is even, so that their slope at nothing says nothing: their square is the parameter. */
const EVEN_STEP = 0.05;

/**
 * How much of chi-square further terms may take away, from one linear step (the score test of Rao, 1948): Gram matrix G and
 * gradient g of the residuals with all terms there are, then g' G^-1 g over the columns of each choice. One pass over the
 * profile in place of a fit for each choice. Infinite where it cannot be said.
 */
export function promiseOf(profile: Profile, fit: ProfileFit): (terms: ModelTerms) => number {
  const { terms: now } = fit.layout;
  const all = layoutOf({
    background: now.background + 2,
    curve: now.curve,
    chirp: true,
    tone: true,
    fade: true,
    unequal: true,
  });
  const sums = gramOf(profile, fit, all);
  return (terms) => (sums === null ? Infinity : gainOf(sums, columnsOf(terms, all), all.size));
}

interface Gram {
  g: Float64Array;
  gram: Float64Array;
}

function columnsOf(terms: ModelTerms, all: ModelLayout): number[] {
  const columns = [0, 1, 2, 3, 4, 5];
  for (let k = 0; k < terms.background; k++) columns.push(6 + k);
  if (terms.curve) columns.push(all.curve);
  if (terms.chirp) columns.push(all.chirp);
  if (terms.tone) columns.push(all.tone);
  if (terms.fade) columns.push(all.fade);
  if (terms.unequal) columns.push(all.unequal);
  return columns;
}

/** The fit's parameters in the layout of all terms; terms it has not stand where they have no effect. */
function spreadOut(fit: ProfileFit, all: ModelLayout): Float64Array {
  const { layout, fixed, result } = fit;
  const p = new Float64Array(all.size);
  p.set(result.parameters.subarray(0, 6 + layout.terms.background));
  const take = (to: number, from: number, neutral: number) => {
    if (to >= 0) p[to] = from >= 0 ? result.parameters[from] : neutral;
  };
  take(all.curve, layout.curve, fixed.curve);
  take(all.chirp, layout.chirp, 0);
  take(all.tone, layout.tone, 1);
  take(all.fade, layout.fade, 0);
  take(all.unequal, layout.unequal, 0);
  return p;
}

function gramOf(profile: Profile, fit: ProfileFit, all: ModelLayout): Gram | null {
  const n = all.size;
  const p = spreadOut(fit, all);
  const model = new AveragedModel(new ModelPoint(all, fit.fixed));
  const even = [all.fade, all.unequal].filter((k) => p[k] === 0);
  const moved = even.map((k) => {
    const q = Float64Array.from(p);
    q[k] = EVEN_STEP;
    return q;
  });
  const g = new Float64Array(n);
  const gram = new Float64Array(n * n);
  const row = new Float64Array(n);
  for (let i = 0; i < profile.size; i++) {
    if (!Number.isFinite(profile.sigma[i])) continue;
    const x = (profile.u[i] - fit.originPx) / fit.unitPx;
    const node = profile.node[i] / fit.unitPx;
    if (!model.evaluate(p, x, node, profile.nodeWeight[i], true)) return null;
    row.set(model.gradient);
    const light = model.light;
    for (let e = 0; e < even.length; e++) {
      if (!model.evaluate(moved[e], x, node, profile.nodeWeight[i], false)) return null;
      row[even[e]] = (model.light - light) / (EVEN_STEP * EVEN_STEP);
    }
    const w = (fit.unitLight / profile.sigma[i]) ** 2;
    const r = profile.light[i] / fit.unitLight - light;
    for (let j = 0; j < n; j++) {
      const wj = w * row[j];
      g[j] += wj * r;
      for (let k = j; k < n; k++) gram[j * n + k] += wj * row[k];
    }
  }
  for (let j = 0; j < n; j++) for (let k = 0; k < j; k++) gram[j * n + k] = gram[k * n + j];
  return { g, gram };
}

function gainOf({ g, gram }: Gram, columns: number[], n: number): number {
  const m = columns.length;
  const scale = columns.map((k) => 1 / Math.sqrt(Math.max(1e-300, gram[k * n + k])));
  const a = new Float64Array(m * m);
  const b = new Float64Array(m);
  for (let i = 0; i < m; i++) {
    b[i] = g[columns[i]] * scale[i];
    for (let j = 0; j < m; j++)
      a[i * m + j] = gram[columns[i] * n + columns[j]] * scale[i] * scale[j] + (i === j ? RIDGE : 0);
  }
  const x = solveSymmetric(a, b, m);
  if (x === null) return Infinity;
  let gain = 0;
  for (let i = 0; i < m; i++) gain += x[i] * b[i];
  return gain;
}

/** Keeps columns that depend on each other from being a singular matrix. */
const RIDGE = 1e-10;
