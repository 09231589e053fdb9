/** Solves a x = b for a small symmetric system by elimination with pivoting on the diagonal's order; null when singular. */
export function solveSymmetric(a: Float64Array, b: Float64Array, n: number): Float64Array | null {
  const m = a.slice();
  const x = b.slice();
  for (let k = 0; k < n; k++) {
    let pivotRow = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(m[i * n + k]) > Math.abs(m[pivotRow * n + k])) pivotRow = i;
    const pivot = m[pivotRow * n + k];
    if (!(Math.abs(pivot) > 1e-13 * Math.abs(a[k * n + k]))) return null;
    if (pivotRow !== k) {
      for (let j = 0; j < n; j++) [m[k * n + j], m[pivotRow * n + j]] = [m[pivotRow * n + j], m[k * n + j]];
      [x[k], x[pivotRow]] = [x[pivotRow], x[k]];
    }
    for (let i = k + 1; i < n; i++) {
      const f = m[i * n + k] / m[k * n + k];
      if (f === 0) continue;
      for (let j = k; j < n; j++) m[i * n + j] -= f * m[k * n + j];
      x[i] -= f * x[k];
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let j = i + 1; j < n; j++) x[i] -= m[i * n + j] * x[j];
    x[i] /= m[i * n + i];
  }
  return x;
}

/** Inverse of a small symmetric positive matrix by its Cholesky factor, row-major; null when it is singular. */
export function inverseSymmetric(a: Float64Array, n: number): Float64Array | null {
  // The inverse of the lower factor L, row by row, built beside it.
  const l = new Float64Array(n * n);
  const inverse = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let s = a[i * n + j];
      for (let k = 0; k < j; k++) s -= l[i * n + k] * l[j * n + k];
      if (j < i) l[i * n + j] = s / l[j * n + j];
      else if (!(s > 1e-13 * a[i * n + i])) return null;
      else l[i * n + i] = Math.sqrt(s);
    }
    const d = 1 / l[i * n + i];
    for (let j = 0; j < i; j++) {
      let s = 0;
      for (let k = j; k < i; k++) s += l[i * n + k] * inverse[k * n + j];
      inverse[i * n + j] = -s * d;
    }
    inverse[i * n + i] = d;
  }
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let s = 0;
      for (let k = i; k < n; k++) s += inverse[k * n + i] * inverse[k * n + j];
      out[i * n + j] = s;
      out[j * n + i] = s;
    }
  }
  return out;
}

/** Weighted straight line y = a + b t: coefficients and their standard uncertainties for weights 1/u^2. */
export function weightedLine(
  t: ArrayLike<number>,
  y: ArrayLike<number>,
  w: ArrayLike<number>,
): { a: number; b: number; ub: number; chiSquare: number; n: number } {
  let sw = 0;
  let st = 0;
  let sy = 0;
  let n = 0;
  for (let i = 0; i < t.length; i++) {
    sw += w[i];
    st += w[i] * t[i];
    sy += w[i] * y[i];
    if (w[i] > 0) n++;
  }
  const mt = st / sw;
  const my = sy / sw;
  let stt = 0;
  let sty = 0;
  for (let i = 0; i < t.length; i++) {
    stt += w[i] * (t[i] - mt) ** 2;
    sty += w[i] * (t[i] - mt) * (y[i] - my);
  }
  const b = stt > 0 ? sty / stt : 0;
  let chiSquare = 0;
  for (let i = 0; i < t.length; i++) chiSquare += w[i] * (y[i] - my - b * (t[i] - mt)) ** 2;
  return { a: my - b * mt, b, ub: stt > 0 ? Math.sqrt(1 / stt) : Infinity, chiSquare, n };
}
