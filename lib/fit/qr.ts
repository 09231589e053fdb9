/**
 * Householder QR of a tall matrix, column-major, in place.
 * Kept apart from the solver so that covariance and steps share one factorisation.
 */

/** R (upper triangle, column-major n x n) and Q^T b (first n entries) of the m x n matrix `a`, both overwritten. */
export function qrReduce(
  a: Float64Array,
  m: number,
  n: number,
  b: Float64Array,
): { r: Float64Array; qtb: Float64Array } {
  for (let k = 0; k < n; k++) {
    const col = k * m;
    let norm = 0;
    for (let i = k; i < m; i++) norm += a[col + i] * a[col + i];
    norm = Math.sqrt(norm);
    if (norm === 0) continue;
    const alpha = a[col + k] > 0 ? -norm : norm;
    const v0 = a[col + k] - alpha;
    // v = (v0, a[k+1..m)); H = I - v v^T / (norm (norm + |a_kk|)) = I - v v^T / (-alpha v0)
    const beta = 1 / (-alpha * v0);
    for (let j = k + 1; j < n; j++) reflect(a, col, j * m, k, m, v0, beta);
    let s = v0 * b[k];
    for (let i = k + 1; i < m; i++) s += a[col + i] * b[i];
    s *= beta;
    b[k] -= s * v0;
    for (let i = k + 1; i < m; i++) b[i] -= s * a[col + i];
    a[col + k] = alpha;
  }
  const r = new Float64Array(n * n);
  for (let j = 0; j < n; j++) for (let i = 0; i <= j && i < m; i++) r[j * n + i] = a[j * m + i];
  return { r, qtb: b.slice(0, n) };
}

function reflect(
  a: Float64Array,
  col: number,
  other: number,
  k: number,
  m: number,
  v0: number,
  beta: number,
): void {
  let s = v0 * a[other + k];
  for (let i = k + 1; i < m; i++) s += a[col + i] * a[other + i];
  s *= beta;
  a[other + k] -= s * v0;
  for (let i = k + 1; i < m; i++) a[other + i] -= s * a[col + i];
}

/** Solves R x = y by back substitution; null when a diagonal entry vanishes. */
export function solveUpper(r: Float64Array, n: number, y: Float64Array): Float64Array | null {
  const x = new Float64Array(n);
  for (let i = n - 1; i >= 0; i--) {
    let s = y[i];
    for (let j = i + 1; j < n; j++) s -= r[j * n + i] * x[j];
    const d = r[i * n + i];
    if (d === 0) return null;
    x[i] = s / d;
  }
  return x;
}

/** Inverse of R^T R (row-major n x n) from the upper triangle R; null when R is singular to `tolerance` of its column norms. */
export function inverseGram(r: Float64Array, n: number, tolerance: number): Float64Array | null {
  for (let j = 0; j < n; j++) {
    let norm = 0;
    for (let i = 0; i <= j; i++) norm += r[j * n + i] * r[j * n + i];
    if (!(Math.abs(r[j * n + j]) > tolerance * Math.sqrt(norm))) return null;
  }
  const inv = new Float64Array(n * n);
  const e = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    e.fill(0);
    e[k] = 1;
    const x = solveUpper(r, n, e);
    if (x === null) return null;
    for (let i = 0; i < n; i++) inv[k * n + i] = x[i];
  }
  // inv holds R^-1 by columns (inv[k*n+i] = (R^-1)_ik); cov = R^-1 R^-T
  const cov = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = i; j < n; j++) {
      let s = 0;
      for (let k = j; k < n; k++) s += inv[k * n + i] * inv[k * n + j];
      cov[i * n + j] = s;
      cov[j * n + i] = s;
    }
  }
  return cov;
}
