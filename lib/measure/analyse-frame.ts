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
import { coordinatesIn, wrapAngleDeg } from '@/lib/imaging/geometry';
import type { Picture } from '@/lib/imaging/picture';
import { Refused } from '@/lib/imaging/refused';
import { refusalOf } from './answer';
import type { FrameStack } from './band-stack';
import { judgePlace, noFringes, ringsRefusal } from './judge';
import { refuseByLight } from './light';
import { curvePrior, noTime, resultFromStack, type Clock } from './measure-stack';
import { growPlace, lookAtPlace, planFor, stackOf } from './place';

const PLACES_TRIED = 4;
const CROSSING_ENERGY = 0.4;
const CROSSING_FRINGES = 4;
const TURNING_ENERGY = 0.1;
/** Only a system that is not weak itself says so. */
const TURNING_SHARE = 0.25;

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
  refuseTurning(places);
  refuseCrossed(places);
  let refused: Refused | null = null;
  for (const place of places.slice(0, PLACES_TRIED)) {
    try {
      const measured = measureAt(picture, place, setup, options, ms, clock);
      if (measured !== null) return measured;
    } catch (error) {
      if (!(error instanceof Refused)) throw error;
      refused = refused === null || refused.code === 'NO_FRINGES' ? error : refused;
    }
  }
  if (refused === null || refused.code === 'NO_FRINGES') refuseByLight(picture);
  throw refused ?? noFringes();
}

/** First look, region, band stack and the measurement of one place; null where nothing can be fitted. */
function measureAt(
  picture: Picture,
  place: FringePlace,
  setup: SetupValues,
  options: FitOptions,
  ms: Timing,
  clock: Clock,
): MeasuredFrame | null {
  const before = clock();
  const ask = { picture, rect: place.rect, spacingPx: place.spacingPx, prior: curvePrior(setup) };
  const quick = lookAtPlace(ask);
  if (quick === null) return null;
  const look = options.region ? quick : growPlace(ask, quick);
  judgePlace(look, spreadOf(look.band));
  const plan = planFor(ask, look, options.region ?? null);
  const stack = stackOf(picture, plan);
  ms.profile += clock() - before;
  return withZero(stack, setup, options, ms);
}

/** Measures once without a person's shift: what that finds is the zero order a shift counts from. */
function withZero(stack: FrameStack, setup: SetupValues, options: FitOptions, ms: Timing): MeasuredFrame {
  const plainly = resultFromStack(stack, setup, { ...options, zeroShift: 0 }, ms);
  const { xPx, yPx } = plainly.zeroOrder;
  stack.plan.zeroPx = coordinatesIn(stack.plan.rect, xPx, yPx).u;
  return options.zeroShift ? fromPlan(stack, setup, options, ms) : { stack, result: plainly };
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
