import { LIMITS } from '@/lib/domain/limits';
import type {
  FitOptions,
  FrameAnswer,
  ReadingResult,
  Refusal,
  SetupValues,
  Timing,
} from '@/lib/domain/reading-result';
import { spreadOf } from '@/lib/fit/spread';
import { decodePicture } from '@/lib/imaging/decode';
import { angleBetween, findFringes, type FringePlace } from '@/lib/imaging/find-fringes';
import { coordinatesIn } from '@/lib/imaging/geometry';
import type { Picture } from '@/lib/imaging/picture';
import { Refused } from '@/lib/imaging/refused';
import { looksLikeRings } from '@/lib/imaging/rings';
import { countWideStripes } from '@/lib/imaging/wide-stripes';
import { refusalOf } from './answer';
import type { FrameStack } from './band-stack';
import { judgePlace, noFringes, ringsRefusal, tooFew } from './judge';
import { refuseByLight } from './light';
import { curvePrior, noTime, resultFromStack, type Clock } from './measure-stack';
import { growPlace, lookAtPlace, planFor, stackOf, type PlaceAsk, type PlaceFit } from './place';

const PLACES_TRIED = 4;
const CROSSING_ENERGY = 0.4;
const CROSSING_FRINGES = 4;
/** Misfit of a first look, relative to the fringes, up to which they are straight. */
const PLAIN_MISFIT = 0.05;

/** A frame that was measured, with the stack it was measured from. */
export interface MeasuredFrame {
  result: ReadingResult;
  stack: FrameStack;
}

/**
 * The whole way of one frame: bytes -> picture -> fringes found -> band stack -> fit -> wavelength and findings.
 * Bad input of any kind is an answer (`ok: false` with code and message), never an exception.
 */
export async function analyseFrame(
  bytes: Uint8Array,
  setup: SetupValues,
  options: FitOptions,
  clock: Clock = () => 0,
): Promise<FrameAnswer> {
  const answer = await measureFrame(bytes, setup, options, clock);
  return 'result' in answer ? answer.result : answer;
}

/** As `analyseFrame`, with the band stack beside the result. */
export async function measureFrame(
  bytes: Uint8Array,
  setup: SetupValues,
  options: FitOptions,
  clock: Clock = () => 0,
): Promise<MeasuredFrame | Refusal> {
  const ms = noTime();
  const start = clock();
  let picture: Picture | null = null;
  try {
    picture = await decodePicture(bytes, options.tone ?? 'auto', LIMITS);
    ms.decode = clock() - start;
    const measured = options.stack
      ? fromPlan(stackOf(picture, options.stack), setup, options, ms)
      : measureBest(picture, setup, options, ms, clock);
    ms.total = clock() - start;
    ms.fit = ms.total - ms.decode - ms.find - ms.profile;
    return measured;
  } catch (error) {
    if (!(error instanceof Refused)) throw error;
    ms.total = clock() - start;
    return refusalOf(error, picture, ms);
  }
}

function fromPlan(stack: FrameStack, setup: SetupValues, options: FitOptions, ms: Timing): MeasuredFrame {
  return { stack, result: resultFromStack(stack, setup, options, ms) };
}

/** Tries the likeliest places and keeps the first that stands; else the refusal of the likeliest. */
function measureBest(
  picture: Picture,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
  clock: Clock,
): MeasuredFrame {
  const start = clock();
  const places = findFringes(picture, options.region ?? null);
  ms.find = clock() - start;
  refuseCrossed(picture, places);
  let refused: Refused | null = null;
  for (const place of places.slice(0, PLACES_TRIED)) {
    try {
      const look = lookAt(picture, place, setup, options, ms, clock);
      // Straight fringes that fit where most light is are no rings, whatever else is in the frame.
      const plain = place === places[0] && look !== null && look.misfit < PLAIN_MISFIT;
      if (look !== null && !plain && looksLikeRings(picture)) throw ringsRefusal();
      if (look !== null) return measureLook(look, picture, setup, options, ms, clock);
    } catch (error) {
      if (!(error instanceof Refused)) throw error;
      refused = refused === null || refused.code === 'NO_FRINGES' ? error : refused;
    }
  }
  if (looksLikeRings(picture)) throw ringsRefusal();
  if (refused === null || refused.code === 'NO_FRINGES') {
    refuseByLight(picture);
    refuseTooFew(picture);
  }
  throw refused ?? noFringes();
}

interface GoodLook {
  ask: PlaceAsk;
  look: PlaceFit;
  misfit: number;
}

/** First look at one place and its region; null where nothing can be fitted. */
function lookAt(
  picture: Picture,
  place: FringePlace,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
  clock: Clock,
): GoodLook | null {
  const before = clock();
  const ask = { picture, rect: place.rect, spacingPx: place.spacingPx, prior: curvePrior(setup) };
  try {
    const quick = lookAtPlace(ask);
    if (quick === null) return null;
    const look = options.region ? quick : growPlace(ask, quick);
    return { ask, look, misfit: judgePlace(look, spreadOf(look.band)).misfit };
  } finally {
    ms.profile += clock() - before;
  }
}

/** The band stack of a good look and the measurement from it. */
function measureLook(
  { ask, look }: GoodLook,
  picture: Picture,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
  clock: Clock,
): MeasuredFrame {
  const before = clock();
  const stack = stackOf(picture, planFor(ask, look, options.region ?? null));
  ms.profile += clock() - before;
  return withZero(stack, setup, options, ms);
}

/** Measures once without a person's orders: what that finds is the zero order they are counted from. */
function withZero(stack: FrameStack, setup: SetupValues, options: FitOptions, ms: Timing): MeasuredFrame {
  const plainly = resultFromStack(stack, setup, { ...options, zeroShift: 0, leaveOut: [] }, ms);
  const { xPx, yPx } = plainly.zeroOrder;
  stack.plan.zeroPx = coordinatesIn(stack.plan.rect, xPx, yPx).u;
  const counted = options.zeroShift || options.leaveOut?.length;
  return counted ? fromPlan(stack, setup, options, ms) : { stack, result: plainly };
}

/** Fringes too wide to be found as a wave are named, not denied. */
function refuseTooFew(picture: Picture): void {
  const stripes = countWideStripes(picture);
  if (stripes !== null && stripes < 3) throw tooFew(Math.max(1, stripes));
}

/** Two systems of one spacing that cross: a chessboard, cloth, a pixel screen, but no two-slit pattern. */
function refuseCrossed(picture: Picture, places: FringePlace[]): void {
  const [first, ...others] = places;
  const crossing = others.some(
    (o) =>
      o.rect.lengthPx > CROSSING_FRINGES * o.spacingPx &&
      o.patch.energy > CROSSING_ENERGY * first.patch.energy &&
      Math.abs(Math.log(o.spacingPx / first.spacingPx)) < 0.15 &&
      angleBetween(o.rect.angleDeg, first.rect.angleDeg) > 30,
  );
  if (crossing) throw looksLikeRings(picture) ? ringsRefusal() : noFringes();
}
