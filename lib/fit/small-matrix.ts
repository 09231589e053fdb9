/** Solves a x = b for a small symmetric system by elimination with pivoting on the diagonal's order; null when singular. */
export function solveSymmetric(a: Float64Array, b: Float64Array, n: number): Float64Array | null {
  const m = Float64Array.from(a);
  const x = Float64Array.from(b);
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
