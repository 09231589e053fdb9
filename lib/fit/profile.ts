/** The averaged light across the fringes: one point a bin, with what is needed to compare it with a model. */
export interface Profile {
  /** Mean place (px), its extent: half distance of the outer averaging nodes and their weight. */
  u: Float64Array;
  node: Float64Array;
  nodeWeight: Float64Array;
  light: Float64Array;
  /** Standard uncertainty by the noise model. */
  sigma: Float64Array;
  size: number;
}

/**
 * Averaging nodes for a symmetric extent with variance v and fourth moment f: 0 and +-sqrt(f/v), the outer two with
 * weight v^2/(2 f) each; exact up to the fifth moment (Gauss quadrature).
 */
export function averagingNodes(v: number, f: number): { node: number; weight: number } {
  if (!(v > 0)) return { node: 0, weight: 0 };
  return { node: Math.sqrt(f / v), weight: (v * v) / (2 * f) };
}
