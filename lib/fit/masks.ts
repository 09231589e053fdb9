import { LEFT } from './cells';
import type { AgreedLight } from './agreed-light';
import type { BandFit } from './band-fit';
import { lightOn } from './fit-profile';
import { varianceAt, type Noise } from './noise';
import type { Profile } from './profile';

const OUTLIER_SIGMAS = 5;
const NEIGHBOUR_SIGMAS = 3.5;

/** Marks cells that are clipped, at the floor, or differ from what the other bands show there. */
export function maskCells(band: BandFit, agreed: AgreedLight): void {
  const { data, state, limits } = band;
  const { noise, left } = state;
  if (noise === null) return;
  const { bin } = state.view;
  const black = limits.floor + 4 * Math.sqrt(varianceAt({ ...noise, grain: 0 }, Math.max(0, limits.floor)));
  const far = new Float32Array(data.light.length);
  let outliers = 0;
  for (let b = 0; b < data.bands; b++) {
    for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
      if (bin[cell] < 0 || left[cell] === LEFT.person) continue;
      left[cell] = LEFT.used;
      if (!(state.gain[b] > 0)) continue;
      const expected = agreed.inCell(b, cell);
      if (reachesWhite(noise, expected, limits.clip)) left[cell] = LEFT.clipped;
      else if (expected < black) left[cell] = LEFT.floor;
      else {
        const off = data.light[cell] - expected;
        far[cell] = (off * off * data.pixels[cell]) / varianceAt(noise, expected);
        if (far[cell] > OUTLIER_SIGMAS ** 2) outliers++;
      }
    }
  }
  if (outliers > 0) leaveOut(far, left, data.bins);
}

/** Outliers and what lies beside them in the same band; `far` is the squared distance in standard deviations. */
function leaveOut(far: Float32Array, left: Uint8Array, bins: number): void {
  for (let cell = 0; cell < far.length; cell++) {
    if (!(far[cell] > OUTLIER_SIGMAS ** 2)) continue;
    left[cell] = LEFT.outlier;
    const from = cell - (cell % bins);
    for (let d = -1; d <= 1; d += 2) {
      for (let k = cell + d; k >= from && k < from + bins && far[k] > NEIGHBOUR_SIGMAS ** 2; k += d)
        left[k] = LEFT.outlier;
    }
  }
}

/**
 * Would some pixels of this mean be clipped? Four standard deviations of the camera's noise; two of grain, whose own
 * scatter is so much larger that what is cut off does not matter beside it.
 */
function reachesWhite(noise: Noise, light: number, clip: number): boolean {
  if (!Number.isFinite(clip)) return false;
  const camera = 4 * Math.sqrt(varianceAt({ ...noise, grain: 0 }, light));
  return light + camera + 2 * Math.sqrt(noise.grain) * Math.max(0, light) > clip;
}

const LONGEST_RUN_FRINGES = 1.2;
const MOST_BINS_LEFT = 0.25;
/** A run ends where the misfit has fallen to this share of its peak. */
const RUN_EDGE = 0.1;

/**
 * Leaves out what all bands show in one place and the fit does not: a dead column, a pen line. Only where most of the profile
 * follows the fit (the yardstick is the median misfit), so that a wrong model does not mask the data that speak against it.
 * The cells must be placed.
 */
export function maskBins(band: Pick<BandFit, 'state' | 'grid' | 'fit'>, agreed: Profile): boolean {
  const { state, grid, fit } = band;
  const fitted = lightOn(agreed, fit);
  const z = new Float64Array(grid.bins);
  const sizes = new Float64Array(grid.bins);
  let filled = 0;
  for (let k = 0; k < grid.bins; k++) {
    if (!Number.isFinite(agreed.sigma[k])) continue;
    z[k] = Math.abs(agreed.light[k] - fitted[k]) / agreed.sigma[k];
    sizes[filled++] = z[k];
  }
  if (filled === 0) return false;
  const scale = Math.max(1, sizes.subarray(0, filled).sort()[filled >> 1] / 0.6745);
  const longest = (LONGEST_RUN_FRINGES * fit.result.parameters[0] * fit.unitPx) / grid.pitchPx;
  const out = new Uint8Array(grid.bins);
  let count = 0;
  for (let k = 0; k < grid.bins; k++) {
    if (!(z[k] > OUTLIER_SIGMAS * scale)) continue;
    let peak = k;
    while (peak + 1 < grid.bins && z[peak + 1] > z[peak]) peak++;
    // What a spike does to the fit beside it does not belong to it.
    const edge = Math.max(NEIGHBOUR_SIGMAS * 0.7 * scale, RUN_EDGE * z[peak]);
    let from = peak;
    let to = peak;
    while (from > 0 && z[from - 1] > edge) from--;
    while (to + 1 < grid.bins && z[to + 1] > edge) to++;
    if (to - from + 1 <= longest) {
      out.fill(1, Math.max(0, from - 1), Math.min(grid.bins, to + 2));
      count += to - from + 3;
    }
    k = Math.max(k, to);
  }
  if (count === 0 || count > MOST_BINS_LEFT * filled) return false;
  const { bin } = state.view;
  for (let cell = 0; cell < bin.length; cell++) {
    if (bin[cell] >= 0 && out[bin[cell]] === 1 && state.left[cell] === LEFT.used)
      state.left[cell] = LEFT.outlier;
  }
  return true;
}
