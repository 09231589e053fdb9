/** What a setup is made of, and what can be decided about one. */

/** What the ± of a value is: an expanded uncertainty with its k, the half width of limits, or a scatter (type A). */
export const UNCERTAINTY_SHAPES = ['expanded', 'rectangular', 'type-a'] as const;
export type UncertaintyShape = (typeof UNCERTAINTY_SHAPES)[number];
export const SHAPE_WORDS: Record<UncertaintyShape, string> = {
  expanded: 'expanded, with k',
  rectangular: 'limits, rectangular',
  'type-a': 'scatter, type A',
};

/**
 * What the stated ± is divided by for a standard uncertainty: its k, the square root of 3 for limits (JCGM 100:2008,
 * 4.3.7), 1 for a scatter that is a standard uncertainty already (4.2).
 */
export function divisorOf(shape: UncertaintyShape, k: number): number {
  if (shape === 'rectangular') return Math.sqrt(3);
  return shape === 'type-a' ? 1 : k;
}

/** Approved by somebody else, declined by somebody else, or taken back by whoever entered it. */
export const SETUP_DECISIONS = ['approved', 'declined', 'taken-back'] as const;
export type SetupDecision = (typeof SETUP_DECISIONS)[number];

/** The four values of a setup in the order every screen shows them. */
export const SETUP_VALUES = [
  { key: 'separationUm', name: 'Slit separation', symbol: 'd', unit: 'µm' },
  { key: 'widthUm', name: 'Slit width', symbol: 'w', unit: 'µm' },
  { key: 'distanceMm', name: 'Distance', symbol: 'L', unit: 'mm' },
  { key: 'scaleUmPerPx', name: 'Pixel scale', symbol: 's', unit: 'µm/px' },
] as const;
export type ValueKey = (typeof SETUP_VALUES)[number]['key'];

/** A value that looked odd, with the reason why it is right all the same. */
export interface ConfirmedValue {
  key: ValueKey;
  /** What looked odd, as it was shown. */
  seen: string;
  reason: string;
}

/** Largest certificate file. */
export const CERTIFICATE_BYTES = 20 * 1024 * 1024;
