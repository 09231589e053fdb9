/**
 * Levenberg-Marquardt for sums of squares, with analytic Jacobian, scaling by the Jacobian's columns,
 * gain-ratio acceptance, bounds by an active set, and an evaluation limit.
 * Source of the method: J. J. More, "The Levenberg-Marquardt algorithm: implementation and theory" (1978);
 * damping update after H. B. Nielsen, IMM-REP-1999-05.
 */
import { inverseGram, qrReduce, solveUpper } from './qr';

export interface LeastSquaresProblem {
  /** Number of residuals, prior rows included. */
  residuals: number;
  /**
   * Fills the weighted residuals (data - model)/u into `r` and, where `jacobian` is given, d(model)/dp / u by columns:
   * jacobian[k * residuals + i]. Answers false where the model has no value.
   */
  evaluate(p: Float64Array, r: Float64Array, jacobian: Float64Array | null): boolean;
}

export interface LeastSquaresOptions {
  lower?: ArrayLike<number>;
  upper?: ArrayLike<number>;
  /** Model evaluations. */
  maxEvaluations?: number;
  /** Largest cosine between residuals and any Jacobian column at a solution. */
  gradientTolerance?: number;
  /** Relative reduction of the sum of squares below which a step counts as none. */
  reductionTolerance?: number;
  /** Reduction of the sum of squares that is not worth another step; for residuals in units of their own uncertainty. */
  enough?: number;
}

export type LeastSquaresStatus = 'converged' | 'evaluation-limit' | 'stalled' | 'singular' | 'no-value';

export interface LeastSquaresResult {
  status: LeastSquaresStatus;
  parameters: Float64Array;
  /** Sum of squared weighted residuals, and what it was at the start. */
  chiSquare: number;
  startChiSquare: number;
  /** Residuals minus free parameters. */
  dof: number;
  evaluations: number;
  /** Largest cosine between residuals and a free Jacobian column. */
  gradientNorm: number;
  boundsHit: number[];
  /** (J^T J)^-1, row-major, zero rows for parameters at a bound; not scaled by chi-square. Null with the reason. */
  covariance: Float64Array | null;
  noCovarianceBecause: string | null;
}

const SINGULAR = 1e-11;
/** A Jacobian column this far below its largest value so far: the fit ran onto a plain where the parameter has no effect. */
const COLLAPSED = 1e-8;

/** Minimises the sum of squares from `start`. Not converging is a status, not an exception. */
export function leastSquares(
  problem: LeastSquaresProblem,
  start: ArrayLike<number>,
  options: LeastSquaresOptions = {},
): LeastSquaresResult {
  const n = start.length;
  const m = problem.residuals;
  const limit = options.maxEvaluations ?? 400;
  const gradientTolerance = options.gradientTolerance ?? 1e-10;
  const reductionTolerance = options.reductionTolerance ?? 1e-15;
  const enough = options.enough ?? 0;
  const lower = options.lower;
  const upper = options.upper;
  let p = clamp(Float64Array.from(start), lower, upper);
  let r = new Float64Array(m);
  let trialR = new Float64Array(m);
  let jacobian = new Float64Array(m * n);
  let trialJacobian = new Float64Array(m * n);
  const scale = new Float64Array(n);
  let evaluations = 1;
  let status: LeastSquaresStatus = 'evaluation-limit';
  if (!problem.evaluate(p, r, jacobian)) return emptyResult(p, 'no-value', evaluations, m - n);
  let cost = sumSquares(r);
  const startCost = cost;
  let damping = 1e-3;
  let growth = 2;
  let quiet = 0;
  let gradientNorm = Infinity;

  outer: while (evaluations < limit) {
    const gradient = columnDots(jacobian, r, m, n);
    const norms = columnNorms(jacobian, m, n);
    const free: number[] = [];
    const rNorm = Math.sqrt(cost);
    gradientNorm = 0;
    for (let k = 0; k < n; k++) {
      // The model's derivative is stored, so p moves along +gradient.
      if (lower && p[k] <= lower[k] && gradient[k] < 0) continue;
      if (upper && p[k] >= upper[k] && gradient[k] > 0) continue;
      free.push(k);
      scale[k] = Math.max(scale[k], norms[k]);
      if (norms[k] > 0 && rNorm > 0)
        gradientNorm = Math.max(gradientNorm, Math.abs(gradient[k]) / (norms[k] * rNorm));
    }
    if (free.some((k) => norms[k] < COLLAPSED * scale[k])) {
      status = 'singular';
      break;
    }
    if (gradientNorm <= gradientTolerance || cost === 0) {
      status = 'converged';
      break;
    }
    const { r: R, qtb } = factor(jacobian, r, m, free);
    for (;;) {
      const step = dampedStep(R, qtb, free, scale, damping);
      if (step === null) {
        status = 'singular';
        break outer;
      }
      const trial = p.slice();
      for (let i = 0; i < free.length; i++) trial[free[i]] += step[i];
      clamp(trial, lower, upper);
      const predicted = predictedReduction(R, qtb, free, p, trial);
      if (predicted >= 0 && predicted < enough && damping < 1e-2) {
        status = 'converged';
        break outer;
      }
      // Most steps are taken, so the derivatives come along at once.
      const ok = problem.evaluate(trial, trialR, trialJacobian);
      evaluations++;
      const trialCost = ok ? sumSquares(trialR) : Infinity;
      const actual = cost - trialCost;
      if (trialCost <= cost && predicted > 0) {
        const ratio = actual / predicted;
        const relative = actual / cost;
        p = trial;
        [r, trialR] = [trialR, r];
        [jacobian, trialJacobian] = [trialJacobian, jacobian];
        cost = trialCost;
        damping *= Math.max(1 / 3, 1 - (2 * ratio - 1) ** 3);
        growth = 2;
        quiet =
          relative <= reductionTolerance && predicted / cost <= 1e3 * reductionTolerance ? quiet + 1 : 0;
        if (quiet >= 2) {
          status = 'converged';
          break outer;
        }
        continue outer;
      }
      if (!(predicted > reductionTolerance * cost) && damping < 1) {
        // Nothing left to gain at the precision of the arithmetic.
        status = 'converged';
        break outer;
      }
      damping *= growth;
      growth *= 2;
      if (damping > 1e20) {
        status = 'stalled';
        break outer;
      }
      if (evaluations >= limit) break outer;
    }
  }
  return finish(p, r, jacobian, cost, startCost, status, evaluations, gradientNorm, lower, upper);
}

/**
 * Sum of squares that one undamped step from `p` promises by the linear model: |r|^2 - |Q^T r|^2 with J = Q R. Bounds are not
 * looked at. Infinite where the model has no value.
 */
export function foreseenSumOfSquares(problem: LeastSquaresProblem, p: Float64Array): number {
  const m = problem.residuals;
  const n = p.length;
  const r = new Float64Array(m);
  const jacobian = new Float64Array(m * n);
  if (!problem.evaluate(p, r, jacobian)) return Infinity;
  const cost = sumSquares(r);
  return cost - sumSquares(qrReduce(jacobian, m, n, r).qtb);
}

function finish(
  p: Float64Array,
  r: Float64Array,
  jacobian: Float64Array,
  cost: number,
  startCost: number,
  status: LeastSquaresStatus,
  evaluations: number,
  gradientNorm: number,
  lower: ArrayLike<number> | undefined,
  upper: ArrayLike<number> | undefined,
): LeastSquaresResult {
  const n = p.length;
  const m = r.length;
  const boundsHit: number[] = [];
  const free: number[] = [];
  for (let k = 0; k < n; k++) {
    if ((lower && p[k] <= lower[k]) || (upper && p[k] >= upper[k])) boundsHit.push(k);
    else free.push(k);
  }
  const covariance = covarianceOf(jacobian, r, m, n, free);
  const settled = status === 'converged' && covariance === null ? 'singular' : status;
  return {
    status: settled,
    parameters: p,
    chiSquare: cost,
    startChiSquare: startCost,
    dof: m - free.length,
    evaluations,
    gradientNorm,
    boundsHit,
    covariance,
    noCovarianceBecause:
      covariance === null ? 'The data do not fix every parameter: the Jacobian is singular.' : null,
  };
}

/** Covariance with zero rows for parameters that are held. */
function covarianceOf(
  jacobian: Float64Array,
  r: Float64Array,
  m: number,
  n: number,
  free: number[],
): Float64Array | null {
  const nf = free.length;
  // Columns are scaled to unit length first, so that singular means dependent and not merely small.
  const scales = new Float64Array(nf);
  const a = new Float64Array(m * nf);
  for (let i = 0; i < nf; i++) {
    const col = jacobian.subarray(free[i] * m, free[i] * m + m);
    let s = 0;
    for (let j = 0; j < m; j++) s += col[j] * col[j];
    scales[i] = Math.sqrt(s);
    if (!(scales[i] > 0) || !Number.isFinite(scales[i])) return null;
    for (let j = 0; j < m; j++) a[i * m + j] = col[j] / scales[i];
  }
  const { r: R } = qrReduce(a, m, nf, r.slice());
  const small = inverseGram(R, nf, SINGULAR);
  if (small === null) return null;
  const cov = new Float64Array(n * n);
  for (let i = 0; i < nf; i++)
    for (let j = 0; j < nf; j++) cov[free[i] * n + free[j]] = small[i * nf + j] / (scales[i] * scales[j]);
  return cov;
}

function factor(
  jacobian: Float64Array,
  r: Float64Array,
  m: number,
  free: number[],
): { r: Float64Array; qtb: Float64Array } {
  const a = new Float64Array(m * free.length);
  for (let i = 0; i < free.length; i++) a.set(jacobian.subarray(free[i] * m, free[i] * m + m), i * m);
  return qrReduce(a, m, free.length, r.slice());
}

/** Solves (J^T J + damping D^2) step = J^T r through the factor R, stacked with sqrt(damping) D. */
function dampedStep(
  R: Float64Array,
  qtb: Float64Array,
  free: number[],
  scale: Float64Array,
  damping: number,
): Float64Array | null {
  const n = free.length;
  const rows = 2 * n;
  const a = new Float64Array(rows * n);
  const b = new Float64Array(rows);
  const root = Math.sqrt(damping);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i <= j; i++) a[j * rows + i] = R[j * n + i];
    const s = scale[free[j]];
    a[j * rows + n + j] = root * (s > 0 ? s : 1);
    b[j] = qtb[j];
  }
  const { r, qtb: y } = qrReduce(a, rows, n, b);
  return solveUpper(r, n, y);
}

/** |r|^2 - |r - J step|^2 of the linear model for the step actually taken. */
function predictedReduction(
  R: Float64Array,
  qtb: Float64Array,
  free: number[],
  p: Float64Array,
  trial: Float64Array,
): number {
  const n = free.length;
  let before = 0;
  let after = 0;
  for (let i = 0; i < n; i++) {
    let s = 0;
    for (let j = i; j < n; j++) s += R[j * n + i] * (trial[free[j]] - p[free[j]]);
    before += qtb[i] * qtb[i];
    after += (qtb[i] - s) * (qtb[i] - s);
  }
  return before - after;
}

function clamp(
  p: Float64Array,
  lower: ArrayLike<number> | undefined,
  upper: ArrayLike<number> | undefined,
): Float64Array<ArrayBuffer> {
  for (let k = 0; k < p.length; k++) {
    if (lower && p[k] < lower[k]) p[k] = lower[k];
    if (upper && p[k] > upper[k]) p[k] = upper[k];
  }
  return p as Float64Array<ArrayBuffer>;
}

function sumSquares(r: Float64Array): number {
  let s = 0;
  for (let i = 0; i < r.length; i++) s += r[i] * r[i];
  return s;
}

function columnDots(jacobian: Float64Array, r: Float64Array, m: number, n: number): Float64Array {
  const dots = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    let s = 0;
    const col = k * m;
    for (let i = 0; i < m; i++) s += jacobian[col + i] * r[i];
    dots[k] = s;
  }
  return dots;
}

function columnNorms(jacobian: Float64Array, m: number, n: number): Float64Array {
  const norms = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    let s = 0;
    const col = k * m;
    for (let i = 0; i < m; i++) s += jacobian[col + i] * jacobian[col + i];
    norms[k] = Math.sqrt(s);
  }
  return norms;
}

function emptyResult(
  p: Float64Array,
  status: LeastSquaresStatus,
  evaluations: number,
  dof: number,
): LeastSquaresResult {
  return {
    status,
    parameters: p,
    chiSquare: Infinity,
    startChiSquare: Infinity,
    dof,
    evaluations,
    gradientNorm: Infinity,
    boundsHit: [],
    covariance: null,
    noCovarianceBecause: 'The model has no value at the start.',
  };
}
