import { LIMITS } from '@/lib/domain/limits';
import {
  REFUSALS,
  type FitOptions,
  type FrameAnswer,
  type OrderCentre,
  type ReadingResult,
  type Refusal,
  type SetupValues,
  type Timing,
} from '@/lib/domain/reading-result';
import { chooseTerms } from '@/lib/fit/choose-terms';
import { rebase, type CurvePrior } from '@/lib/fit/fit-profile';
import { listOrders } from '@/lib/fit/orders';
import { tableFor } from '@/lib/fit/bands';
import { spreadOf, type Spread } from '@/lib/fit/spread';
import { chooseZero, type ZeroChoice } from '@/lib/fit/zero-order';
import { decodePicture } from '@/lib/imaging/decode';
import { angleBetween, findFringes, type FringePlace } from '@/lib/imaging/find-fringes';
import { pointAlong, toRadians, wrapAngleDeg, type Rectangle } from '@/lib/imaging/geometry';
import type { Picture } from '@/lib/imaging/picture';
import { Refused } from '@/lib/imaging/refused';
import { curvesOf, stripOf } from './curves';
import { ENGINE_VERSION } from './engine-version';
import { findingsOf } from './findings';
import { judgePlace, noFringes, ringsRefusal } from './judge';
import { refuseByLight } from './light';
import type { Measured } from './measured';
import { fitPlace, growPlace, lookAtPlace, trimPlace, type PlaceFit } from './place';
import { frameEffects, wavelengthOf } from './wavelength';

/** Milliseconds from any fixed moment; time is an argument so that the engine itself has no clock. */
export type Clock = () => number;

const PLACES_TRIED = 4;
const CROSSING_ENERGY = 0.4;
const CROSSING_FRINGES = 4;
const TURNING_ENERGY = 0.1;
/** Only a system that is not weak itself says so. */
const TURNING_SHARE = 0.25;

/**
 * The whole way of one frame: bytes -> picture -> fringes found -> bands -> fit -> wavelength and findings.
 * Bad input of any kind is an answer (`ok: false` with code and message), never an exception.
 */
export async function analyseFrame(
  bytes: Uint8Array,
  setup: SetupValues,
  options: FitOptions,
  clock: Clock = () => 0,
): Promise<FrameAnswer> {
  const ms: Timing = { decode: 0, find: 0, profile: 0, fit: 0, total: 0 };
  const start = clock();
  let picture: Picture | null = null;
  try {
    picture = await decodePicture(bytes, options.tone ?? 'auto', LIMITS);
    const decoded = clock();
    ms.decode = decoded - start;
    const places = findFringes(picture, options.region ?? null);
    const found = clock();
    ms.find = found - decoded;
    const measured = measureBest(picture, places, setup, options, (profile) => (ms.profile = profile), clock);
    const result = resultOf(picture, measured, setup, options, ms);
    ms.fit = clock() - found - ms.profile;
    ms.total = clock() - start;
    return result;
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    ms.total = clock() - start;
    return refusal(error, picture, ms);
  }
}

/** Tries the likeliest places and keeps the first that stands; else the refusal of the likeliest. */
function measureBest(
  picture: Picture,
  places: FringePlace[],
  setup: SetupValues,
  options: FitOptions,
  timed: (profile: number) => void,
  clock: Clock,
): Measured {
  const prior = curvePrior(setup);
  refuseTurning(places);
  refuseCrossed(places);
  let refused: Refused | null = null;
  for (const place of places.slice(0, PLACES_TRIED)) {
    try {
      const before = clock();
      const ask = {
        picture,
        rect: place.rect,
        spacingPx: place.spacingPx,
        prior,
        leaveOut: () => false,
        zeroShift: options.zeroShift ?? 0,
      };
      const quick = lookAtPlace(ask);
      timed(clock() - before);
      if (quick === null) continue;
      const look = options.region ? quick : growPlace(ask, quick);
      judgePlace(look, spreadOf(look.band));
      return measurePlace(picture, look, prior, setup, options);
    } catch (error) {
      if (!(error instanceof Refused)) throw error;
      refused = refused === null || refused.code === 'NO_FRINGES' ? error : refused;
    }
  }
  if (refused === null || refused.code === 'NO_FRINGES') refuseByLight(picture);
  throw refused ?? noFringes();
}

/** One spacing at several angles to both sides: the fringes run round a centre. */
function refuseTurning(places: FringePlace[]): void {
  const most = Math.max(...places.map((p) => p.patch.energy));
  for (const place of places.filter((p) => p.patch.energy > TURNING_SHARE * most)) {
    const turned = places
      .filter(
        (o) =>
          o !== place &&
          Math.abs(Math.log(o.spacingPx / place.spacingPx)) < 0.1 &&
          o.patch.energy > TURNING_ENERGY * place.patch.energy,
      )
      .map((o) => wrapAngleDeg(o.rect.angleDeg - place.rect.angleDeg))
      .filter((a) => Math.abs(a) > 8 && Math.abs(a) < 80);
    if (turned.some((a) => a > 0) && turned.some((a) => a < 0)) throw ringsRefusal();
  }
}

/** Two systems of one spacing that cross: a chessboard, cloth, a pixel screen, but no two-slit pattern. */
function refuseCrossed(places: FringePlace[]): void {
  const [first, ...others] = places;
  const crossing = others.some(
    (o) =>
      o.rect.lengthPx > CROSSING_FRINGES * o.spacingPx &&
      o.patch.energy > CROSSING_ENERGY * first.patch.energy &&
      Math.abs(Math.log(o.spacingPx / first.spacingPx)) < 0.15 &&
      angleBetween(o.rect.angleDeg, first.rect.angleDeg) > 30,
  );
  if (crossing) throw noFringes();
}

/** The full measurement of a place that the quick look found good. */
function measurePlace(
  picture: Picture,
  quick: PlaceFit,
  prior: CurvePrior | null,
  setup: SetupValues,
  options: FitOptions,
): Measured {
  const spacingPx = quick.band.fit.result.parameters[0] * quick.band.fit.unitPx;
  const rect = options.region ? quick.rect : trimPlace(picture, quick);
  const place = fitPlace(
    {
      picture,
      rect,
      spacingPx,
      prior,
      leaveOut: leftOutBy(options, quick),
      zeroShift: options.zeroShift ?? 0,
    },
    quick,
  );
  if (place === null) throw noFringes();
  const plainSpacingPx = place.band.fit.result.parameters[0] * place.band.fit.unitPx;
  place.band = chooseTerms(place.band, { curve: !setup.distanceMm, tone: true, chirp: true });
  const zero = settleZero(place, options);
  const spread = withZeroDoubt(spreadOf(place.band), zero);
  const evidence = judgePlace(place, spread);
  if (spread === null) throw noFringes();
  return { zero, place, spread, evidence, plainSpacingPx };
}

/** The zero order by envelope and geometry; a person's own choice stands. */
function settleZero(place: PlaceFit, options: FitOptions): ZeroChoice {
  const { fit, profile } = place.band;
  if (fit.layout.chirp >= 0 && !options.zeroShift) {
    // A fitted perspective takes up what the geometry would say about the zero order: only the envelope tells.
    const nearest = rebase(profile, fit, 0);
    place.band = {
      ...place.band,
      fit: nearest,
      table: tableFor(place.stack, place.band.grid, nearest),
      zeroShift: 0,
    };
    return { ...chooseZero(profile, nearest), fit: nearest };
  }
  const choice = chooseZero(profile, fit);
  if (options.zeroShift) return { ...choice, fit: place.band.fit, probability: 1, next: 0, uSpacing: 0 };
  if (choice.fit !== place.band.fit) {
    place.band = {
      ...place.band,
      fit: choice.fit,
      table: tableFor(place.stack, place.band.grid, choice.fit),
    };
  }
  return choice;
}

/** What doubt about the zero order adds to the spacing's uncertainty. */
function withZeroDoubt(spread: Spread | null, zero: ZeroChoice): Spread | null {
  if (spread === null || zero.uSpacing === 0) return spread;
  const covariance = Float64Array.from(spread.covariance);
  covariance[0] += zero.uSpacing * zero.uSpacing;
  return { ...spread, covariance };
}

/** Places near orders the person wants left out, as the quick fit sees them. */
function leftOutBy(options: FitOptions, quick: PlaceFit): (u: number) => boolean {
  const orders = options.leaveOut ?? [];
  if (orders.length === 0) return () => false;
  const { fit } = quick.band;
  const p = fit.result.parameters;
  const spacing = p[0] * fit.unitPx;
  const places = orders.map(
    (m) => fit.originPx + (p[1] + (m - (options.zeroShift ?? 0)) * p[0]) * fit.unitPx,
  );
  return (u) => places.some((at) => Math.abs(u - at) < 0.5 * spacing);
}

/** Wide-angle curvature s/L from the bench's values, with the uncertainty they have. */
export function curvePrior(setup: SetupValues): CurvePrior | null {
  const { scaleUmPerPx: s, distanceMm: l } = setup;
  if (!s || !l) return null;
  const value = s.value / 1000 / l.value;
  const known = s.u !== null && l.u !== null;
  return { value, u: known ? value * Math.hypot((s.u ?? 0) / s.value, (l.u ?? 0) / l.value) : null };
}

function resultOf(
  picture: Picture,
  measured: Measured,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
): ReadingResult {
  const { place, spread, evidence } = measured;
  const { fit } = place.band;
  const p = fit.result.parameters;
  const spacingPx = p[0] * fit.unitPx;
  const uSpacingPx = Math.sqrt(spread.covariance[0]) * fit.unitPx;
  const size = fit.layout.size;
  const region: Rectangle = options.region ?? place.rect;
  const toAlong = alongIn(region, place.rect);
  const orders = ordersOf(place, spread, region, toAlong, options);
  const zeroPlace = orders.find((o) => o.m === 0);
  const zero = zeroPlace ?? pointAlong(region, toAlong(fit.originPx + p[1] * fit.unitPx));
  const visibility = Math.min(1, evidence.visibility);
  const uVisibility = visibilityU(p, spread.covariance, size);
  const curves = curvesOf(place, toAlong);
  const known =
    spread.from === 'noise' ? 'noise model' : `type A, scatter of ${Math.round(spread.groups)} bands`;
  const wavelength = wavelengthOf(
    { spacingPx, uSpacingPx, dof: spread.dof, known },
    setup,
    frameEffects(picture, setup, spacingPx),
  );
  const result: ReadingResult = {
    ok: true,
    code: 'OK',
    message: '',
    spacingPx,
    uSpacingPx,
    dofSpacing: spread.dof,
    tiltDeg: place.rect.angleDeg,
    uTiltDeg: (Math.atan(place.tilt.uSlope) * 180) / Math.PI,
    visibility,
    uVisibility,
    zeroOrder: { xPx: zero.xPx, yPx: zero.yPx },
    orders,
    region,
    medium: 'air',
    wavelengthNm: wavelength.airNm,
    wavelengthVacuumNm: wavelength.vacuumNm,
    uWavelengthNm: wavelength.uNm,
    expandedNm: wavelength.expandedNm,
    k: wavelength.k,
    dofWavelength: wavelength.dof,
    budget: wavelength.budget,
    findings: [],
    engine: ENGINE_VERSION,
    picture: {
      widthPx: picture.widthPx,
      heightPx: picture.heightPx,
      bits: picture.bits,
      format: picture.source.format,
      channel: picture.source.channel,
      tone: picture.source.tone,
      toneBecause: picture.source.toneBecause,
    },
    peakShare: Math.max(0, ...curves.fit.filter((_, i) => curves.left[i] === 0)),
    clippedShare: clippedShare(place),
    envelopeZeroOrder: p[2] > 0.02 && p[2] < 0.9 ? 1 / p[2] : null,
    envelopeCentrePx: toAlong(fit.originPx + (p[1] + p[3] * p[0]) * fit.unitPx),
    rows: Math.round(place.rect.heightPx),
    chiSquareReduced: fit.result.chiSquare / Math.max(1, fit.result.dof),
    curves,
    strip: stripOf(curves),
    ms,
  };
  result.findings = findingsOf({ result, measured, picture, setup });
  result.message = messageFor(result);
  return result;
}

/** Coordinate on the region's long axis of the order line at u in the straightened rectangle (same centre). */
function alongIn(region: Rectangle, rect: Rectangle): (u: number) => number {
  const turn = Math.cos(toRadians(region.angleDeg - rect.angleDeg));
  return (u) => u / turn;
}

function ordersOf(
  place: PlaceFit,
  spread: Spread,
  region: Rectangle,
  toAlong: (u: number) => number,
  options: FitOptions,
): OrderCentre[] {
  const { fit, profile, grid } = place.band;
  const left = options.leaveOut ?? [];
  return listOrders(fit, profile, spread.covariance, grid.from, grid.from + grid.bins * grid.pitchPx).map(
    (o) => {
      const alongPx = toAlong(o.u);
      return {
        m: o.m,
        kind: o.kind,
        ...pointAlong(region, alongPx),
        uPx: o.uPx,
        pullPx: o.pullPx,
        alongPx,
        used: !left.includes(o.m),
      };
    },
  );
}

function visibilityU(p: Float64Array, c: Float64Array, n: number): number | null {
  if (!(p[4] > 0)) return null;
  const v = p[5] / p[4];
  const variance = (c[5 * n + 5] + v * v * c[4 * n + 4] - 2 * v * c[4 * n + 5]) / (p[4] * p[4]);
  return variance >= 0 && Number.isFinite(variance) ? Math.sqrt(variance) : null;
}

function clippedShare(place: PlaceFit): number {
  const { state, data } = place.band;
  let clipped = 0;
  let all = 0;
  for (let i = 0; i < state.left.length; i++) {
    if (data.pixels[i] === 0) continue;
    all++;
    if (state.left[i] === 1) clipped++;
  }
  return all > 0 ? clipped / all : 0;
}

function messageFor(result: ReadingResult): string {
  const worst =
    result.findings.find((f) => f.word === 'stop') ?? result.findings.find((f) => f.word === 'look');
  return worst ? worst.message : 'The frame is fit for use.';
}

function refusal(error: Refused, picture: Picture | null, ms: Timing): Refusal {
  const brief =
    error.picture ??
    (picture
      ? { widthPx: picture.widthPx, heightPx: picture.heightPx, format: picture.source.format }
      : null);
  return {
    ok: false,
    code: error.code,
    message: error.message,
    engine: ENGINE_VERSION,
    fileAtFault: REFUSALS[error.code],
    picture: brief,
    ms,
  };
}
