import type { CurvePrior } from '@/lib/fit/fit-profile';
import { fitBands, fitTilt, type BandFit, type LightLimits, type TiltFit } from '@/lib/fit/fit-bands';
import { spreadOf } from '@/lib/fit/spread';
import type { StartValues } from '@/lib/fit/start-values';
import { leanOfBands } from '@/lib/fit/lean';
import {
  coordinatesIn,
  pointAlong,
  toDegrees,
  toRadians,
  wrapAngleDeg,
  type Rectangle,
} from '@/lib/imaging/geometry';
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
  const rowStep = quick
    ? Math.max(
        1,
        Math.min(Math.floor(rowsPerBand / 2), Math.floor((rect.lengthPx * rect.heightPx) / QUICK_PIXELS)),
      )
    : 1;
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

export interface PlaceAsk {
  picture: Picture;
  rect: Rectangle;
  spacingPx: number;
  prior: CurvePrior | null;
  leaveOut: (u: number) => boolean;
  zeroShift: number;
}

/** A first look: coarse bands, few rows, one round. Null where nothing can be fitted. */
export function lookAtPlace(ask: PlaceAsk): PlaceFit | null {
  const { picture, spacingPx, prior, leaveOut, zeroShift } = ask;
  const rect = leanIn(picture, ask.rect, spacingPx);
  const stack = straighten(picture, rect, gridFor(rect, spacingPx, true));
  const band = fitBands(stack, spacingPx, prior, lightLimits(picture), leaveOut, {
    from: null,
    asItIs: false,
    rounds: 2,
    zeroShift,
  });
  if (band === null) return null;
  return { rect, stack, band, tilt: fitTilt(band) };
}

/** Shares of the way from the region that was found to the frame's edge that are tried, longest first. */
const GROWTHS = [1, 0.35];
/** A longer region must not make the spacing less sure than this ratio. */
const NOT_WORSE = 1.02;

/**
 * Tries the same pattern in a longer region, up to the frame's edges: weak outer fringes and the light beside the pattern
 * make the spacing surer, clutter makes it less sure. What counts is the honest uncertainty, misfit included.
 */
export function growPlace(ask: PlaceAsk, look: PlaceFit): PlaceFit {
  const sure = relativeU(look);
  for (const share of GROWTHS) {
    const rect = lengthened(ask.picture, look.rect, share);
    if (rect.lengthPx < 1.06 * look.rect.lengthPx) continue;
    const from = startFrom(look, rect);
    const stack = straighten(ask.picture, rect, gridFor(rect, from.spacing, true));
    const band = fitBands(stack, from.spacing, ask.prior, lightLimits(ask.picture), ask.leaveOut, {
      from,
      asItIs: false,
      rounds: 2,
      zeroShift: ask.zeroShift,
    });
    if (band === null) continue;
    const longer: PlaceFit = { rect, stack, band, tilt: fitTilt(band) };
    const spacing = band.fit.result.parameters[0] * band.fit.unitPx;
    if (Math.abs(spacing / from.spacing - 1) < 0.03 && relativeU(longer) < NOT_WORSE * sure) return longer;
  }
  return look;
}

function relativeU(place: PlaceFit): number {
  const spread = spreadOf(place.band);
  return spread === null ? Infinity : Math.sqrt(spread.covariance[0]) / place.band.fit.result.parameters[0];
}

/** The rectangle lengthened at both ends by a share of what is missing to the frame's edge. */
function lengthened(picture: Picture, rect: Rectangle, share: number): Rectangle {
  const corners = [
    [0, 0],
    [picture.widthPx, 0],
    [0, picture.heightPx],
    [picture.widthPx, picture.heightPx],
  ].map(([x, y]) => coordinatesIn(rect, x, y).u);
  const from = -rect.lengthPx / 2;
  const to = rect.lengthPx / 2;
  const u0 = from + share * Math.min(0, Math.min(...corners) - from);
  const u1 = to + share * Math.max(0, Math.max(...corners) - to);
  const centre = pointAlong(rect, (u0 + u1) / 2);
  return { ...rect, cxPx: centre.xPx, cyPx: centre.yPx, lengthPx: u1 - u0 };
}

/** Straightens and fits from a first look, turning the region until the fringes stand square in it. */
export function fitPlace(ask: PlaceAsk, look: PlaceFit): PlaceFit | null {
  const { picture, prior, leaveOut, zeroShift } = ask;
  const limits = lightLimits(picture);
  let here = { ...ask.rect, angleDeg: turned(look.rect.angleDeg, look.tilt) };
  let before = look;
  let last: PlaceFit | null = null;
  for (let turn = 0; turn < STRAIGHTENINGS; turn++) {
    const from = startFrom(before, here);
    const options = gridFor(here, from.spacing, false);
    // A large frame is turned square on part of its rows; all of them are read once it stands.
    const thin = turn === 0 ? thinning(here, options.bands) : 1;
    const stack = straighten(picture, here, { ...options, rowStep: thin });
    const band = fitBands(stack, from.spacing, prior, limits, leaveOut, {
      from,
      asItIs: true,
      rounds: turn === 0 ? 2 : 1,
      zeroShift,
    });
    if (band === null) return last;
    const tilt = fitTilt(band);
    last = { rect: here, stack, band, tilt };
    before = last;
    const lean = toDegrees(Math.atan(tilt.slope));
    const known = toDegrees(tilt.uSlope);
    if (thin === 1 && !(Math.abs(lean) >= Math.max(TILT_STEP_DEG, 0.3 * known) && Math.abs(lean) <= 20))
      break;
    here = { ...here, angleDeg: turned(here.angleDeg, tilt) };
  }
  return last;
}

const LARGE_PIXELS = 1_500_000;

/** Every how many rows of a large region are enough to turn it square: at least two a band stay. */
function thinning(rect: Rectangle, bands: number): number {
  const rows = Math.floor(rect.heightPx / bands / 2);
  return Math.max(1, Math.min(rows, Math.floor((rect.lengthPx * rect.heightPx) / LARGE_PIXELS)));
}

function turned(angleDeg: number, tilt: TiltFit): number {
  const lean = toDegrees(Math.atan(tilt.slope));
  return Number.isFinite(lean) && Math.abs(lean) < 20 ? wrapAngleDeg(angleDeg - lean) : angleDeg;
}

/** The fitted pattern as a start in another rectangle. */
function startFrom(fitted: PlaceFit, rect: Rectangle): StartValues {
  const { fit } = fitted.band;
  const p = fit.result.parameters;
  const spacing = p[0] * fit.unitPx;
  const zero = pointAlong(fitted.rect, fit.originPx + p[1] * fit.unitPx);
  const there = coordinatesIn(rect, zero.xPx, zero.yPx).u;
  return {
    spacing,
    zero: there,
    ratio: p[2],
    middle: there + p[3] * spacing,
    a: p[4] * fit.unitLight,
    b: p[5] * fit.unitLight,
    background: p[6] * fit.unitLight,
    slope: p[7] * fit.unitLight,
    rest: 0,
  };
}

const LEANINGS = 4;
const LEAN_ENOUGH_DEG = 0.15;

/** Turns the region by the phase of its bands until the fringes stand nearly square in it. */
function leanIn(picture: Picture, rect: Rectangle, spacingPx: number): Rectangle {
  let here = rect;
  for (let i = 0; i < LEANINGS; i++) {
    const lean = leanOfBands(straighten(picture, here, gridFor(here, spacingPx, true)), spacingPx);
    if (lean === null) return here;
    const degrees = toDegrees(Math.atan(lean));
    here = { ...here, angleDeg: wrapAngleDeg(here.angleDeg - degrees) };
    if (Math.abs(degrees) < LEAN_ENOUGH_DEG) return here;
  }
  return here;
}

/** The region cut to the bands that carry the pattern and to the frame. */
export function trimPlace(picture: Picture, place: PlaceFit): Rectangle {
  const { rect, band } = place;
  const { gain } = band.state;
  const weight = band.shifts.shiftWeight;
  const most = Math.max(...weight);
  let first = gain.length;
  let last = -1;
  for (let b = 0; b < gain.length; b++) {
    if (!(weight[b] > LEAST_INFORMATION * most)) continue;
    first = Math.min(first, b);
    last = b;
  }
  if (last < first) return rect;
  const bandHeight = rect.heightPx / gain.length;
  const v0 = -rect.heightPx / 2 + Math.max(0, first - 1) * bandHeight;
  const v1 = -rect.heightPx / 2 + Math.min(gain.length, last + 2) * bandHeight;
  return cutToFrame(picture, rect, v0, v1);
}

/** Bands with less than this share of the best band's information on the fringes' place are cut off at the ends. */
const LEAST_INFORMATION = 0.002;

function cutToFrame(picture: Picture, rect: Rectangle, v0: number, v1: number): Rectangle {
  const corners = [
    [0, 0],
    [picture.widthPx, 0],
    [0, picture.heightPx],
    [picture.widthPx, picture.heightPx],
  ].map(([x, y]) => coordinatesIn(rect, x, y));
  const from = Math.max(-rect.lengthPx / 2, Math.min(...corners.map((k) => k.u)));
  const to = Math.min(rect.lengthPx / 2, Math.max(...corners.map((k) => k.u)));
  const low = Math.max(v0, Math.min(...corners.map((k) => k.v)));
  const high = Math.min(v1, Math.max(...corners.map((k) => k.v)));
  if (!(to > from) || !(high > low)) return rect;
  const centre = pointAlong(rect, (from + to) / 2, (low + high) / 2);
  return {
    cxPx: centre.xPx,
    cyPx: centre.yPx,
    lengthPx: to - from,
    heightPx: high - low,
    angleDeg: rect.angleDeg,
  };
}
