import { placeCells, type BandData, type BandState, type CellView, type CommonGrid } from './cells';
import { AveragedModel, type ProfileFit } from './fit-profile';
import { averagingNodes } from './profile';
import { ModelPoint } from './two-slit-model';

/** The fitted light and its derivative along u on an even grid, for quick look-up by cubic interpolation. */
export class FitTable {
  readonly light: Float64Array;
  readonly slope: Float64Array;
  private readonly step: number;
  /** Last index an interval may start at. */
  private readonly last: number;

  constructor(
    fit: ProfileFit,
    readonly from: number,
    to: number,
    pitchPx: number,
    extent: { variance: number; fourth: number },
  ) {
    const spacing = fit.result.parameters[0] * fit.unitPx;
    this.step = Math.min(pitchPx, spacing / 20);
    const n = Math.max(2, Math.ceil((to - from) / this.step) + 2);
    this.last = n - 2;
    this.light = new Float64Array(n);
    this.slope = new Float64Array(n);
    const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
    const { node, weight } = averagingNodes(extent.variance, extent.fourth, spacing);
    for (let i = 0; i < n; i++) {
      const x = (from + i * this.step - fit.originPx) / fit.unitPx;
      if (!model.evaluate(fit.result.parameters, x, node / fit.unitPx, weight, false)) continue;
      this.light[i] = model.light * fit.unitLight;
      this.slope[i] = (model.slope * fit.unitLight) / fit.unitPx;
    }
  }

  lightAt(u: number): number {
    const t = (u - this.from) / this.step;
    const i = t < 0 ? 0 : t > this.last ? this.last : t | 0;
    const f = t - i < 0 ? 0 : t - i > 1 ? 1 : t - i;
    const a = this.light[i];
    const b = this.light[i + 1];
    const c = this.slope[i] * this.step;
    const d = this.slope[i + 1] * this.step;
    // Cubic with the values and slopes at both ends.
    return a + f * (c + f * (3 * (b - a) - 2 * c - d + f * (2 * (a - b) + c + d)));
  }

  /** Light and slope at the place of every cell that lies in a bin. */
  fill(view: CellView): void {
    const { u, bin } = view;
    const { light, slope, step, last, from } = this;
    const scale = 1 / step;
    for (let cell = 0; cell < u.length; cell++) {
      if (bin[cell] < 0) continue;
      const t = (u[cell] - from) * scale;
      const i = t < 0 ? 0 : t > last ? last : t | 0;
      const f = t - i < 0 ? 0 : t - i > 1 ? 1 : t - i;
      const a = light[i];
      const b = light[i + 1];
      const s = slope[i];
      const e = slope[i + 1] - s;
      const c = s * step;
      const d = c + e * step;
      view.light[cell] = a + f * (c + f * (3 * (b - a) - 2 * c - d + f * (2 * (a - b) + c + d)));
      view.slope[cell] = s + f * e;
    }
  }
}

export function tableFor(data: BandData, grid: CommonGrid, fit: ProfileFit): FitTable {
  const bin = data.meanVarU;
  const margin = 3 * grid.pitchPx;
  return new FitTable(fit, grid.from - margin, grid.from + grid.bins * grid.pitchPx + margin, grid.pitchPx, {
    variance: data.pixelVar + bin,
    fourth: data.pixelFourth + 1.8 * bin * bin + 6 * data.pixelVar * bin,
  });
}

/** The fit's light in the middle of every bin. */
export function expectedOn(grid: CommonGrid, table: FitTable): Float64Array {
  const out = new Float64Array(grid.bins);
  for (let k = 0; k < grid.bins; k++) out[k] = table.lightAt(grid.from + (k + 0.5) * grid.pitchPx);
  return out;
}

/** Every cell with the light and the slope of a fit at its place. */
export function viewCells(data: BandData, state: BandState, grid: CommonGrid, table: FitTable): CellView {
  placeCells(data, state, grid);
  table.fill(state.view);
  return state.view;
}
