import type { CurvePrior } from '@/lib/fit/fit-profile';
import { fitBands, fitTilt, type BandFit, type LightLimits, type TiltFit } from '@/lib/fit/fit-bands';
import { toDegrees, toRadians, wrapAngleDeg, type Rectangle } from '@/lib/imaging/geometry';
import type { Picture } from '@/lib/imaging/picture';
import { straighten, type BandStack, type StraightenOptions } from '@/lib/imaging/straighten';

/** One place of the frame, straightened and fitted. */
export interface PlaceFit {
  rect: Rectangle;
  stack: BandStack;
  band: BandFit;
  tilt: TiltFit;
}

const MOST_BANDS = 64;
const ROWS_PER_BAND = 3;
const QUICK_PIXELS = 400_000;
const POINTS_PER_FRINGE = 24;
/** Straightening stops when the tilt moves less than this or less than a fifth of its own uncertainty. */
const TILT_STEP_DEG = 0.002;
const STRAIGHTENINGS = 3;

/** How finely a region is cut: bands along the fringes, bins across them. */
export function gridFor(rect: Rectangle, spacingPx: number, quick: boolean): StraightenOptions {
  const c = Math.abs(Math.cos(toRadians(rect.angleDeg)));
  const pitch = Math.max(c, Math.sqrt(1 - c * c));
  const bands = Math.max(1, Math.min(quick ? 24 : MOST_BANDS, Math.floor(rect.heightPx / ROWS_PER_BAND)));
  const lanes = spacingPx < 7 ? 4 : spacingPx < 14 ? 2 : 1;
  const merge = Math.max(1, Math.floor((spacingPx / POINTS_PER_FRINGE / pitch) * lanes));
  const rowsPerBand = rect.heightPx / bands;
  const rowStep = quick ? Math.max(1, Math.min(Math.floor(rowsPerBand / 2), Math.floor((rect.lengthPx * rect.heightPx) / QUICK_PIXELS))) : 1;
  return { bands, lanes, merge, rowStep };
}

export function lightLimits(picture: Picture): LightLimits {
  const codes = picture.light.length;
  const clip = picture.clipCode < codes ? picture.light[picture.clipCode] : Infinity;
  const floor = picture.floorCode >= 0 ? picture.light[picture.floorCode] : -Infinity;
  // Rounding to codes: variance 1/12 of a step, at the table's slope near a tenth of full scale.
  const at = Math.floor(codes / 3);
  const step = picture.light[at + 1] - picture.light[at];
  return { clip, floor, leastVariance: (step * step) / 12 };
}

/** Straightens and fits, turning the region until the fringes stand square in it. Null where nothing can be fitted. */
export function fitPlace(picture: Picture, rect: Rectangle, spacingPx: number, prior: CurvePrior | null, leaveOut: (u: number) => boolean, quick: boolean): PlaceFit | null {
  const limits = lightLimits(picture);
  let here = rect;
  let around = spacingPx;
  let last: PlaceFit | null = null;
  for (let turn = 0; turn < STRAIGHTENINGS; turn++) {
    const stack = straighten(picture, here, gridFor(here, around, quick));
    const band = fitBands(stack, around, prior, limits, leaveOut);
    if (band === null) return last;
    const tilt = fitTilt(stack, band.shifts);
    last = { rect: here, stack, band, tilt };
    around = band.fit.result.parameters[0] * band.fit.unitPx;
    const lean = toDegrees(Math.atan(tilt.slope));
    const known = toDegrees(tilt.uSlope);
    if (!Number.isFinite(lean) || Math.abs(lean) < Math.max(TILT_STEP_DEG, 0.2 * known) || Math.abs(lean) > 20) break;
    here = { ...here, angleDeg: wrapAngleDeg(here.angleDeg - lean) };
    if (quick && turn === 1) break;
  }
  return last;
}
