import type { SecondSystem } from '@/lib/fit/second-system';
import type { Spread } from '@/lib/fit/spread';
import type { ZeroChoice } from '@/lib/fit/zero-order';
import type { Evidence } from './judge';
import type { PlaceFit } from './place';

/** A place that has been fitted and found to hold two-slit fringes. */
export interface Measured {
  place: PlaceFit;
  spread: Spread;
  evidence: Evidence;
  zero: ZeroChoice;
  /** A second fringe system that was divided out of the light, or null. */
  second: SecondSystem | null;
  /** Spacing along the bands, px, before optional terms were added to the model. */
  plainSpacing: number;
}
