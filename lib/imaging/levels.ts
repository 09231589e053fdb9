/** White level and floor of a channel, from the histogram of its codes. */

export interface Levels {
  /** Code that stands for full scale. */
  whiteCode: number;
  /** Codes from here on are clipped; above every code where no pile-up is seen. */
  clipCode: number;
  /** A pile of pixels at the lowest code; -1 where there is none. */
  floorCode: number;
  /** Share of pixels at or above clipCode. */
  clippedShare: number;
}

/** Usual full scales of cameras stored in 16 bits: 10, 12, 14 bits plain and shifted up. */
const USUAL_FULL_SCALES = [255, 1023, 4095, 16383, 65472, 65520, 65532, 65535];
/** Fringes alone pile up almost fourfold at their maxima where nothing is clipped, so an unusual code must show more. */
const PILE_RATIO_USUAL = 4;
const PILE_RATIO = 12;
const PILE_SHARE = 2e-5;

/** A picture's levels are known well enough from this many of its pixels. */
const COUNTED_PIXELS = 2_000_000;

/**
 * Number of pixels at each code. Of a large picture every n-th pixel is counted, n without a divisor in common with the
 * width, so that all columns and rows have their turn.
 */
export function histogram(samples: Uint8Array | Uint16Array, bits: 8 | 16, widthPx: number): Uint32Array {
  const counts = new Uint32Array(bits === 8 ? 256 : 65536);
  let step = Math.max(1, Math.floor(samples.length / COUNTED_PIXELS));
  while (commonDivisor(step, widthPx) > 1) step++;
  for (let i = 0; i < samples.length; i += step) counts[samples[i]]++;
  return counts;
}

function commonDivisor(a: number, b: number): number {
  return b === 0 ? a : commonDivisor(b, a % b);
}

/**
 * Finds clipping by the pile of pixels at the top: the last used code holds more than four times what the codes below
 * it hold on average. Lossy pictures ring around clipped areas, so there the last few codes count as clipped.
 */
export function findLevels(counts: Uint32Array, bits: 8 | 16, lossy: boolean): Levels {
  const full = counts.length - 1;
  let total = 0;
  let top = 0;
  let bottom = full;
  for (let i = 0; i <= full; i++) {
    total += counts[i];
    if (counts[i] > 0) {
      top = i;
      if (i < bottom) bottom = i;
    }
  }
  const none: Levels = { whiteCode: full, clipCode: full + 1, floorCode: -1, clippedShare: 0 };
  if (total === 0) return none;
  const floorCode = piledUp(counts, bottom, 1, total) ? bottom : -1;
  if (lossy && bits === 8) {
    const from = 251;
    let clipped = 0;
    for (let i = from; i <= full; i++) clipped += counts[i];
    const piled = clipped > Math.max(16, PILE_SHARE * total);
    return {
      whiteCode: full,
      clipCode: piled ? from : full + 1,
      floorCode,
      clippedShare: piled ? clipped / total : 0,
    };
  }
  if (piledUp(counts, top, -1, total) || (top === full && counts[top] > 0)) {
    return { whiteCode: top, clipCode: top, floorCode, clippedShare: counts[top] / total };
  }
  const white = bits === 8 ? 255 : (USUAL_FULL_SCALES.find((v) => v >= top && v > 255) ?? full);
  return { ...none, whiteCode: white, floorCode };
}

/** True where code `at`, the last one used, holds far more pixels than its neighbours inwards. */
function piledUp(counts: Uint32Array, at: number, inward: 1 | -1, total: number): boolean {
  const here = counts[at];
  if (here < Math.max(8, PILE_SHARE * total)) return false;
  // Neighbouring used codes: a camera's codes may be multiples of 4 or 16.
  let seen = 0;
  let sum = 0;
  for (let i = at + inward; i >= 0 && i < counts.length && seen < 6 && Math.abs(i - at) < 400; i += inward) {
    if (counts[i] === 0) continue;
    seen++;
    sum += counts[i];
  }
  const ratio = inward === 1 || USUAL_FULL_SCALES.includes(at) ? PILE_RATIO_USUAL : PILE_RATIO;
  return seen === 0 || here > (ratio * sum) / seen;
}
