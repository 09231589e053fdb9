import type { StackPlan } from '@/lib/domain/reading-result';
import type { CurvePrior } from '@/lib/fit/fit-profile';
import type { BandFit, LightLimits } from '@/lib/fit/band-fit';
import { fitBands, fitTilt, type TiltFit } from '@/lib/fit/fit-bands';
import { spreadOf } from '@/lib/fit/spread';
import type { StartValues } from '@/lib/fit/start-values';
import type { BandData } from '@/lib/fit/cells';
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
import { straighten, type StraightenOptions } from '@/lib/imaging/straighten';
import { frameExtent, wholeStack, type FrameStack } from './band-stack';
import { ENGINE_VERSION } from './engine-version';

/** One place of the frame, straightened and fitted. */
export interface PlaceFit {
  rect: Rectangle;
  band: BandFit;
  tilt: TiltFit;
}

const MOST_BANDS = 64;
const ROWS_PER_BAND = 3;
const QUICK_PIXELS = 400_000;
const POINTS_PER_FRINGE = 16;
const FEWEST_POINTS = 10;
const MOST_POINTS = 500;
const LOOK_ROUNDS = 2;
/** A lean that blurs a band of a few rows by no more than a hundredth of a px. */
const SQUARE_ENOUGH_DEG = 0.05;
const TURNS = 3;

/** How finely a region is cut: bands along the fringes, bins across them. */
export function gridFor(rect: Rectangle, spacingPx: number, quick: boolean): StraightenOptions {
  const c = Math.abs(Math.cos(toRadians(rect.angleDeg)));
  const pitch = Math.max(c, Math.sqrt(1 - c * c));
  const bands = Math.max(1, Math.min(quick ? 24 : MOST_BANDS, Math.floor(rect.heightPx / ROWS_PER_BAND)));
  const lanes = spacingPx < 7 ? 4 : spacingPx < 14 ? 2 : 1;
  // Where there are many fringes, fewer points each say as much; the model is averaged over what a point covers.
  const fringes = rect.lengthPx / spacingPx;
  const points = Math.max(FEWEST_POINTS, Math.min(POINTS_PER_FRINGE, MOST_POINTS / fringes));
  const merge = Math.max(1, Math.floor((spacingPx / points / pitch) * lanes));
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
}

const nothing = () => false;

/** A first look: coarse bands, few rows, two rounds. Null where nothing can be fitted. */
export function lookAtPlace(ask: PlaceAsk): PlaceFit | null {
  const { rect, data } = leanIn(ask.picture, ask.rect, ask.spacingPx);
  return fitLook(ask, rect, data, ask.spacingPx, null);
}

function lookIn(
  ask: PlaceAsk,
  rect: Rectangle,
  spacingPx: number,
  from: StartValues | null,
  options: StraightenOptions,
): PlaceFit | null {
  return fitLook(ask, rect, wholeStack(straighten(ask.picture, rect, options)), spacingPx, from);
}

function fitLook(
  ask: PlaceAsk,
  rect: Rectangle,
  data: BandData,
  spacingPx: number,
  from: StartValues | null,
): PlaceFit | null {
  const how = { from, asItIs: false, rounds: LOOK_ROUNDS, zeroAtPx: null };
  const band = fitBands(data, spacingPx, ask.prior, lightLimits(ask.picture), nothing, how);
  return band === null ? null : { rect, band, tilt: fitTilt(band) };
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
    const longer = lookIn(ask, rect, from.spacing, from, gridFor(rect, from.spacing, true));
    if (longer === null) continue;
    const spacing = longer.band.fit.result.parameters[0] * longer.band.fit.unitPx;
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

/**
 * Turns the region until the fringes stand nearly square in it, on part of its rows. What lean is left then is measured and
 * allowed for; it only must not blur a band.
 */
function squareUp(ask: PlaceAsk, look: PlaceFit, region: Rectangle): PlaceFit {
  let last = look;
  for (let turn = 0; turn < TURNS; turn++) {
    const lean = Math.abs(toDegrees(Math.atan(last.tilt.slope)));
    if (turn > 0 && !(lean > SQUARE_ENOUGH_DEG && lean < 20)) break;
    if (turn === 0 && lean < SQUARE_ENOUGH_DEG && toDegrees(last.tilt.uSlope) < SQUARE_ENOUGH_DEG / 3) break;
    const here = { ...region, angleDeg: turned(last.rect.angleDeg, last.tilt) };
    const from = startFrom(last, here);
    const options = gridFor(here, from.spacing, false);
    const rowStep = thinning(here, options.bands);
    const next = lookIn(ask, here, from.spacing, from, { ...options, rowStep });
    if (next === null) break;
    last = next;
  }
  return last;
}

/** How far around the region its stack reaches, as a share of its length and height to each side. */
const MARGIN = 0.25;
const MOST_CELLS = 400_000;

/** The stack for a place that was found good: its region (or the person's) and what lies around it. */
export function planFor(ask: PlaceAsk, look: PlaceFit, wanted: Rectangle | null): StackPlan {
  const trimmed = wanted ?? trimPlace(ask.picture, look);
  const fitted = squareUp(ask, look, trimmed);
  const angleDeg = turned(fitted.rect.angleDeg, fitted.tilt);
  const region = wanted ?? { ...trimmed, angleDeg };
  const spacing = fitted.band.fit.result.parameters[0] * fitted.band.fit.unitPx;
  const core = { ...region, angleDeg };
  const grid = gridFor(core, spacing, false);
  const bandHeight = core.heightPx / grid.bands;
  const { widthPx, heightPx } = ask.picture;
  const frame = frameExtent(core, widthPx, heightPx);
  const cells = ((core.lengthPx / grid.merge) * grid.lanes * grid.bands) / MOST_CELLS;
  const margin = Math.max(0, Math.min(MARGIN, (1 / Math.sqrt(Math.max(cells, 1e-9)) - 1) / 2));
  const half = core.lengthPx / 2;
  const u0 = Math.min(-half, Math.max(-half - margin * core.lengthPx, frame.u0));
  const u1 = Math.max(half, Math.min(half + margin * core.lengthPx, frame.u1));
  // Whole bands above and below, so that the region's own edges stay edges of bands.
  const room = (free: number) => Math.max(0, Math.ceil(Math.min(margin * core.heightPx, free) / bandHeight));
  const above = room(-core.heightPx / 2 - frame.v0);
  const below = room(frame.v1 - core.heightPx / 2);
  const centre = pointAlong(core, (u0 + u1) / 2, ((below - above) * bandHeight) / 2);
  const bands = grid.bands + above + below;
  const rect = {
    cxPx: centre.xPx,
    cyPx: centre.yPx,
    lengthPx: u1 - u0,
    heightPx: bands * bandHeight,
    angleDeg,
  };
  const s = startFrom(fitted, rect);
  return {
    rect,
    region,
    bands,
    lanes: grid.lanes,
    merge: grid.merge,
    start: {
      spacingPx: s.spacing,
      zeroPx: s.zero,
      middlePx: s.middle,
      ratio: s.ratio,
      a: s.a,
      b: s.b,
      background: s.background,
      slope: s.slope,
    },
    zeroPx: s.zero,
  };
}

/** The band stack of a plan: every row of its rectangle is read. */
export function stackOf(picture: Picture, plan: StackPlan): FrameStack {
  const { bands, lanes, merge } = plan;
  return {
    engine: ENGINE_VERSION,
    plan,
    picture: {
      widthPx: picture.widthPx,
      heightPx: picture.heightPx,
      bits: picture.bits,
      source: picture.source,
    },
    limits: lightLimits(picture),
    bands: straighten(picture, plan.rect, { bands, lanes, merge, rowStep: 1 }),
  };
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
function leanIn(picture: Picture, rect: Rectangle, spacingPx: number): { rect: Rectangle; data: BandData } {
  let here = rect;
  for (let i = 0; ; i++) {
    const data = wholeStack(straighten(picture, here, gridFor(here, spacingPx, true)));
    const lean = i < LEANINGS ? leanOfBands(data, spacingPx) : null;
    if (lean === null) return { rect: here, data };
    const degrees = toDegrees(Math.atan(lean));
    // What is left is measured with the fit.
    if (Math.abs(degrees) < LEAN_ENOUGH_DEG) return { rect: here, data };
    here = { ...here, angleDeg: wrapAngleDeg(here.angleDeg - degrees) };
  }
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
