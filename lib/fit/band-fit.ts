import type { BandData, BandState, CommonGrid } from './cells';
import type { ProfileFit } from './fit-profile';
import type { FitTable } from './fit-table';
import type { Profile } from './profile';
import type { BandShifts } from './regress-bands';

/** Limits of the camera in linear light; a limit that does not occur is infinite. */
export interface LightLimits {
  clip: number;
  floor: number;
  /** Smallest variance of a pixel: rounding to codes. */
  leastVariance: number;
}

/** All bands of a region fitted with one pattern. */
export interface BandFit {
  data: BandData;
  fit: ProfileFit;
  profile: Profile;
  state: BandState;
  grid: CommonGrid;
  table: FitTable;
  shifts: BandShifts;
  limits: LightLimits;
  /** A zero order that is settled, px; null follows the envelope. */
  zeroAtPx: number | null;
  /** In the last round no bin was left out, no band moved, and the fit it began with was this one but for noise. */
  settled: boolean;
}
