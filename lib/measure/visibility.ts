/**
 * Standard uncertainty of the visibility B/A from the parameters A = p[4], B = p[5] and their covariance (n x n, row-major);
 * null where the fit does not say.
 */
export function visibilityU(p: Float64Array, c: Float64Array, n: number): number | null {
  if (!(p[4] > 0)) return null;
  const v = p[5] / p[4];
  const variance = (c[5 * n + 5] + v * v * c[4 * n + 4] - 2 * v * c[4 * n + 5]) / (p[4] * p[4]);
  return variance >= 0 && Number.isFinite(variance) ? Math.sqrt(variance) : null;
}
