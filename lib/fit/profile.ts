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
  /** A detector too wide for three nodes, the same at every point (px about its middle): it takes the place of `node`. */
  detector?: { offset: Float64Array; weight: Float64Array };
}

/** Extents below this share of a fringe need two nodes only: what they miss is below 1e-6 of the visibility. */
const SMALL_EXTENT = 0.012;

/**
 * Averaging nodes for a symmetric extent with variance v and fourth moment f: 0 and +-sqrt(f/v), the outer two with
 * weight v^2/(2 f) each; exact up to the fifth moment (Gauss quadrature). For an extent that is small against the spacing
 * +-sqrt(v) with weight 1/2 each, exact up to the third.
 */
export function averagingNodes(v: number, f: number, spacing: number): { node: number; weight: number } {
  if (!(v > 0)) return { node: 0, weight: 0 };
  if (v < (SMALL_EXTENT * spacing) ** 2) return { node: Math.sqrt(v), weight: 0.5 };
  return { node: Math.sqrt(f / v), weight: (v * v) / (2 * f) };
}
