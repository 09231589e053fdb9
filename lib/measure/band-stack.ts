import type { StackPlan } from '@/lib/domain/reading-result';
import type { BandData } from '@/lib/fit/cells';
import type { LightLimits } from '@/lib/fit/band-fit';
import { coordinatesIn, toRadians, wrapAngleDeg, type Rectangle } from '@/lib/imaging/geometry';
import type { SourceFacts } from '@/lib/imaging/picture';
import type { BandStack } from '@/lib/imaging/straighten';

/** What the checks and the answer need of a picture beside its light. */
export interface PictureFacts {
  widthPx: number;
  heightPx: number;
  bits: 8 | 16;
  source: SourceFacts;
}

/**
 * Everything a fit needs, without the picture: the straightened surroundings of a region as bands, made once on the
 * server. The same stack gives the same digits wherever it is measured.
 */
export interface FrameStack {
  /** Version of the engine that made it. */
  engine: string;
  plan: StackPlan;
  picture: PictureFacts;
  limits: LightLimits;
  bands: BandStack;
}

/** A region may be turned this far against the one its stack was made for. */
const MOST_TURN_DEG = 0.1;
/** Regions are kept to hundredths of a px. */
const EDGE_SLACK_PX = 0.5;

/** Can this region be measured from the stack: inside its rectangle (as far as it is inside the frame) and hardly turned? */
export function stackCovers(stack: Pick<FrameStack, 'plan' | 'picture'>, region: Rectangle): boolean {
  const { plan, picture } = stack;
  if (Math.abs(wrapAngleDeg(region.angleDeg - plan.region.angleDeg)) > MOST_TURN_DEG) return false;
  const wanted = extentIn(plan.rect, region);
  const frame = frameExtent(plan.rect, picture.widthPx, picture.heightPx);
  const halfLength = plan.rect.lengthPx / 2 + EDGE_SLACK_PX;
  const halfHeight = plan.rect.heightPx / 2 + EDGE_SLACK_PX;
  return (
    Math.max(wanted.u0, frame.u0) >= -halfLength &&
    Math.min(wanted.u1, frame.u1) <= halfLength &&
    Math.max(wanted.v0, frame.v0) >= -halfHeight &&
    Math.min(wanted.v1, frame.v1) <= halfHeight
  );
}

interface Extent {
  u0: number;
  u1: number;
  v0: number;
  v1: number;
}

/** Extent of a region in the coordinates of a rectangle to whose angle it is cut. */
function extentIn(rect: Rectangle, region: Rectangle): Extent {
  const c = coordinatesIn(rect, region.cxPx, region.cyPx);
  return {
    u0: c.u - region.lengthPx / 2,
    u1: c.u + region.lengthPx / 2,
    v0: c.v - region.heightPx / 2,
    v1: c.v + region.heightPx / 2,
  };
}

/** Extent of the whole frame in the coordinates of a rectangle. */
export function frameExtent(rect: Rectangle, widthPx: number, heightPx: number): Extent {
  const corners = [
    [0, 0],
    [widthPx, 0],
    [0, heightPx],
    [widthPx, heightPx],
  ].map(([x, y]) => coordinatesIn(rect, x, y));
  const u = corners.map((k) => k.u);
  const v = corners.map((k) => k.v);
  return { u0: Math.min(...u), u1: Math.max(...u), v0: Math.min(...v), v1: Math.max(...v) };
}

/**
 * The bands of one region, with u and v from its own centre. Its ends along the bands fall between bins; its edges along
 * the fringes snap to the nearest edge of a band, and one band at least stays.
 */
export function cutStack(stack: FrameStack, region: Rectangle): { rect: Rectangle; data: BandData } {
  const { bands: s, plan } = stack;
  const { u0, u1, v0, v1 } = extentIn(plan.rect, region);
  const uc = (u0 + u1) / 2;
  const vc = (v0 + v1) / 2;
  const bandHeight = plan.rect.heightPx / s.bands;
  const edge = (v: number) => Math.round((v + plan.rect.heightPx / 2) / bandHeight);
  const middle = Math.floor((vc + plan.rect.heightPx / 2) / bandHeight);
  let firstBand = Math.max(0, Math.min(s.bands, edge(v0)));
  let lastBand = Math.max(0, Math.min(s.bands, edge(v1)));
  if (lastBand <= firstBand) {
    firstBand = Math.max(0, Math.min(s.bands - 1, middle));
    lastBand = firstBand + 1;
  }
  const firstBin = Math.max(0, Math.min(s.bins - 1, Math.ceil((u0 - s.fromPx) / s.pitchPx - 1e-9)));
  const lastBin = Math.max(
    firstBin + 1,
    Math.min(s.bins, Math.floor((u1 - s.fromPx) / s.pitchPx + 1e-9) + 1),
  );
  const rect = {
    ...region,
    heightPx: (lastBand - firstBand) * bandHeight,
    angleDeg: plan.rect.angleDeg,
  };
  return { rect, data: cutBands(s, { firstBand, lastBand, firstBin, lastBin, uc, vc }) };
}

interface Cut {
  firstBand: number;
  lastBand: number;
  firstBin: number;
  lastBin: number;
  uc: number;
  vc: number;
}

function cutBands(s: BandStack, cut: Cut): BandData {
  const bands = cut.lastBand - cut.firstBand;
  const bins = cut.lastBin - cut.firstBin;
  const c = Math.cos(toRadians(s.rect.angleDeg)) ** 2;
  const line = () => new Float64Array(bins * bands);
  const data: BandData = {
    bins,
    bands,
    pitchPx: s.pitchPx,
    bandV: Float64Array.from({ length: bands }, (_, b) => s.bandV[cut.firstBand + b] - cut.vc),
    light: line(),
    pixels: line(),
    u: line(),
    varU: line(),
    dv: line(),
    pixelVar: 1 / 12,
    // A square seen at the angle is two boxes of widths |cos| and |sin|: fourth moments a^4/80 each, and 6 times the
    // product of the variances.
    pixelFourth: (c * c + (1 - c) * (1 - c)) / 80 + (6 * c * (1 - c)) / 144,
    meanVarU: 0,
  };
  let spread = 0;
  let filled = 0;
  for (let b = 0; b < bands; b++) {
    const from = (cut.firstBand + b) * s.bins + cut.firstBin;
    const to = b * bins;
    data.light.set(s.light.subarray(from, from + bins), to);
    data.pixels.set(s.pixels.subarray(from, from + bins), to);
    data.varU.set(s.varU.subarray(from, from + bins), to);
    data.dv.set(s.dv.subarray(from, from + bins), to);
    for (let j = 0; j < bins; j++) {
      data.u[to + j] = s.fromPx - cut.uc + (cut.firstBin + j) * s.pitchPx + s.offset[from + j];
      if (data.pixels[to + j] === 0) continue;
      spread += data.varU[to + j];
      filled++;
    }
  }
  data.meanVarU = filled > 0 ? spread / filled : 0;
  return data;
}

/** A whole stack as data of a fit, where it was made for one region only. */
export function wholeStack(s: BandStack): BandData {
  return cutBands(s, { firstBand: 0, lastBand: s.bands, firstBin: 0, lastBin: s.bins, uc: 0, vc: 0 });
}
