import type { BandData } from './cells';

/**
 * Tangent of the angle by which fringes of a known spacing lean in the bands: the phase of each band at that spacing,
 * followed from band to band. Needs no model and stands any lean that moves less than half a fringe between bands.
 * Null where no phase holds together.
 */
export function leanOfBands(data: BandData, spacingPx: number): number | null {
  const re = new Float64Array(data.bands);
  const im = new Float64Array(data.bands);
  const width = Math.max(1, Math.round(spacingPx / data.pitchPx));
  for (let b = 0; b < data.bands; b++) bandPhasor(data, b, width, spacingPx, re, im);
  const step = data.bands > 1 ? (data.bandV[data.bands - 1] - data.bandV[0]) / (data.bands - 1) : 0;
  if (step === 0) return null;
  // Longer and longer baselines, each unwrapped by the one before.
  let turnsPerBand = 0;
  let coherent = false;
  for (let lag = 1; lag <= Math.max(1, data.bands / 2); lag *= 2) {
    let cr = 0;
    let ci = 0;
    let size = 0;
    for (let b = lag; b < data.bands; b++) {
      const r = re[b] * re[b - lag] + im[b] * im[b - lag];
      const i = im[b] * re[b - lag] - re[b] * im[b - lag];
      cr += r;
      ci += i;
      size += Math.hypot(r, i);
    }
    const together = size > 0 ? Math.hypot(cr, ci) / size : 0;
    if (together < 0.5) break;
    coherent = true;
    const turns = Math.atan2(ci, cr) / (2 * Math.PI);
    const expected = turnsPerBand * lag;
    turnsPerBand = (expected + (turns - expected - Math.round(turns - expected))) / lag;
  }
  // The phasor turns backwards when the fringes move to larger u.
  return coherent ? (-turnsPerBand * spacingPx) / step : null;
}

/** Phasor of one band at the spacing, its running mean over one spacing removed. */
function bandPhasor(
  data: BandData,
  band: number,
  width: number,
  spacingPx: number,
  re: Float64Array,
  im: Float64Array,
): void {
  const { bins } = data;
  const at = band * bins;
  let sum = 0;
  let pixels = 0;
  let from = 0;
  const half = Math.floor(width / 2);
  let to = 0;
  for (let j = 0; j < bins; j++) {
    while (to < Math.min(bins, j + half + 1)) {
      if (data.pixels[at + to] > 0) {
        sum += data.light[at + to];
        pixels++;
      }
      to++;
    }
    while (from < j - half) {
      if (data.pixels[at + from] > 0) {
        sum -= data.light[at + from];
        pixels--;
      }
      from++;
    }
    if (data.pixels[at + j] === 0 || pixels < width * 0.8) continue;
    const d = data.light[at + j] - sum / pixels;
    const phase = (2 * Math.PI * data.u[at + j]) / spacingPx;
    re[band] += d * Math.cos(phase);
    im[band] -= d * Math.sin(phase);
  }
}
