import { gainAt, LEFT, strayAt, strideOver } from './cells';
import type { BandFit } from './band-fit';
import { medianWithin } from './median';
import { fitNoise } from './noise';

const FEWEST_BANDS = 3;

/**
 * Light the bands agree on: in each bin the median of what they show beside the fit, so that what only some of them show
 * (dust, marks) does not count; the fit's own light where fewer than three bands say anything. The cells must be viewed.
 */
export class AgreedLight {
  /** Agreed light minus the fit's, bin by bin. */
  private readonly beside: Float64Array;

  constructor(private readonly band: BandFit) {
    const { data, state, grid } = band;
    const { bin, light: fitted, u: place } = state.view;
    const { left } = state;
    const counted = (cell: number) =>
      bin[cell] >= 0 && (left[cell] === LEFT.used || left[cell] === LEFT.outlier);
    const ends = new Int32Array(grid.bins + 1);
    for (let b = 0; b < data.bands; b++) {
      if (!(state.gain[b] > 0)) continue;
      for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++)
        if (counted(cell)) ends[bin[cell] + 1]++;
    }
    for (let k = 0; k < grid.bins; k++) ends[k + 1] += ends[k];
    const values = new Float64Array(ends[grid.bins]);
    const next = ends.slice(0, grid.bins);
    const perHalf = 1 / grid.half;
    for (let b = 0; b < data.bands; b++) {
      if (!(state.gain[b] > 0)) continue;
      for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
        if (!counted(cell)) continue;
        const u = place[cell];
        const z = u * perHalf;
        values[next[bin[cell]]++] =
          (data.light[cell] - strayAt(state, b, u, z)) / gainAt(state, b, data.dv[cell], z) - fitted[cell];
      }
    }
    this.beside = new Float64Array(grid.bins);
    for (let k = 0; k < grid.bins; k++)
      if (ends[k + 1] - ends[k] >= FEWEST_BANDS) this.beside[k] = medianWithin(values, ends[k], ends[k + 1]);
  }

  /** The agreed light as a cell of a band should show it: at its own place, with the band's gain and stray light. */
  inCell(b: number, cell: number): number {
    const { data, state, grid } = this.band;
    const { view } = state;
    const u = view.u[cell];
    const z = u / grid.half;
    return (
      strayAt(state, b, u, z) +
      gainAt(state, b, data.dv[cell], z) * (this.beside[view.bin[cell]] + view.light[cell])
    );
  }
}

const NOISE_CELLS = 4000;

/** The camera's noise from what the cells show beside the agreed light, put into the state. */
export function measureNoise(band: BandFit, agreed: AgreedLight): void {
  const { data, state, limits } = band;
  const { bin } = state.view;
  const step = strideOver(data.bins * data.bands, NOISE_CELLS, data.bins);
  const most = Math.ceil(data.light.length / step);
  const light = new Float64Array(most);
  const q = new Float64Array(most);
  let n = 0;
  // Each band spends five parameters on its bins, each bin of the profile one on its bands.
  const rest = Math.max(0.2, 1 - 5 / data.bins - 1 / Math.max(2, data.bands));
  for (let cell = 0; cell < data.light.length; cell += step) {
    const b = Math.floor(cell / data.bins);
    if (bin[cell] < 0 || state.left[cell] !== LEFT.used || !(state.gain[b] > 0)) continue;
    const expected = agreed.inCell(b, cell);
    const r = data.light[cell] - expected;
    light[n] = expected;
    q[n++] = (r * r * data.pixels[cell]) / rest;
  }
  state.noise = fitNoise(light.subarray(0, n), q.subarray(0, n), limits.leastVariance);
}
