/** From a measured region to the answer that is stored and shown. */
import {
  REFUSALS,
  type Curves,
  type FitOptions,
  type OrderCentre,
  type ReadingResult,
  type Refusal,
  type SetupValues,
  type Timing,
} from '@/lib/domain/reading-result';
import { ratioU } from '@/lib/fit/fit-profile';
import { listOrders } from '@/lib/fit/orders';
import { pointAlong, toDegrees, toRadians, wrapAngleDeg, type Rectangle } from '@/lib/imaging/geometry';
import type { Refused } from '@/lib/imaging/refused';
import type { FrameStack, PictureFacts } from './band-stack';
import { curvesOf, stripOf } from './curves';
import { ENGINE_VERSION } from './engine-version';
import { findingsOf, messageFor } from './findings';
import { bandwidthOf, slitOf, wordsOf } from './further-results';
import type { Measured } from './measured';
import type { PlaceFit } from './place';
import { frameEffects, wavelengthOf } from './wavelength';

export interface AnswerParts {
  stack: FrameStack;
  region: Rectangle;
  measured: Measured;
  setup: SetupValues;
  options: FitOptions;
  ms: Timing;
}

export function resultOf({ stack, region, measured, setup, options, ms }: AnswerParts): ReadingResult {
  const { place, spread, evidence } = measured;
  const { picture } = stack;
  const { fit } = place.band;
  const p = fit.result.parameters;
  const zeroU = fit.originPx + p[1] * fit.unitPx;
  // Bands are laid along the stack's axis; what the zero order still leans against it shortens the way square to it. Fringes
  // that fan out each have a lean of their own.
  const leanDeg = toDegrees(Math.atan(place.tilt.slope + place.band.state.fan * zeroU));
  const square = Math.cos(toRadians(leanDeg));
  const spacingPx = p[0] * fit.unitPx * square;
  const uSpacingPx = Math.sqrt(spread.covariance[0]) * fit.unitPx * square;
  const toAlong = alongIn(region, place);
  const orders = ordersOf(measured, region, toAlong, options);
  const zeroPlace = orders.find((o) => o.m === 0);
  const zero = zeroPlace ?? pointAlong(region, toAlong(zeroU));
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
    tiltDeg: wrapAngleDeg(place.rect.angleDeg - leanDeg),
    uTiltDeg: toDegrees(Math.atan(place.tilt.uSlope)),
    visibility: Math.min(1, evidence.visibility),
    uVisibility: finiteOrNull(ratioU(p, spread.covariance, fit.layout.size)),
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
    stack: stack.plan,
    picture: {
      widthPx: picture.widthPx,
      heightPx: picture.heightPx,
      bits: picture.bits,
      format: picture.source.format,
      channel: picture.source.channel,
      tone: picture.source.tone,
      toneBecause: picture.source.toneBecause,
    },
    peakShare: peakOf(measured, curves),
    clippedShare: clippedShare(place),
    envelopeZeroOrder: p[2] > 0.02 && p[2] < 0.9 ? 1 / p[2] : null,
    envelopeCentrePx: toAlong(fit.originPx + (p[1] + p[3] * p[0]) * fit.unitPx),
    rows: Math.round(place.rect.heightPx),
    chiSquareReduced: fit.result.chiSquare / Math.max(1, fit.result.dof),
    curves,
    strip: stripOf(curves),
    ms,
  };
  result.bandwidth = bandwidthOf(place.band, spread.covariance, wavelength.airNm);
  result.findings = findingsOf({ take: 'frame', result, measured, picture, setup });
  result.words = wordsOf(result.findings);
  result.slit = result.words.width === 'stop' ? null : slitOf(place, spread, setup);
  result.message = messageFor('frame', result.findings);
  return result;
}

/** Where the fringe line at u of the bands crosses the region's long axis, px from its centre (which is theirs as well). */
function alongIn(region: Rectangle, place: PlaceFit): (u: number) => number {
  const turn = toRadians(region.angleDeg - place.rect.angleDeg);
  const scale = 1 / (Math.cos(turn) - place.tilt.slope * Math.sin(turn));
  return (u) => u * scale;
}

function ordersOf(
  measured: Measured,
  region: Rectangle,
  toAlong: (u: number) => number,
  options: FitOptions,
): OrderCentre[] {
  const { fit, profile, grid } = measured.place.band;
  const left = options.leaveOut ?? [];
  const to = grid.from + grid.bins * grid.pitchPx;
  return listOrders(fit, profile, measured.spread.covariance, grid.from, to).map((o) => {
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
  });
}

/** Brightest fringe of the brightest band: the region may be taller than the light. */
function peakOf({ place }: Measured, curves: Curves): number {
  const brightest = Math.max(0, ...curves.fit.filter((_, i) => curves.left[i] === 0));
  return brightest * Math.max(1, ...place.band.state.gain);
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

export function refusalOf(error: Refused, picture: PictureFacts | null, ms: Timing): Refusal {
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

const finiteOrNull = (v: number) => (Number.isFinite(v) ? v : null);
