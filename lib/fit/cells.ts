import type { Noise } from './noise';

/** Bands along the fringes, each a profile of its own. Cells are [band * bins + bin]. */
export interface BandData {
  bins: number;
  bands: number;
  pitchPx: number;
  bandV: Float64Array;
  light: Float64Array;
  pixels: Float64Array;
  u: Float64Array;
  varU: Float64Array;
  dv: Float64Array;
  pixelVar: number;
  pixelFourth: number;
  /** Mean of varU over the cells with pixels. */
  meanVarU: number;
}

/** Every cell in the common coordinate: its place, its bin there, and the fit's light and slope at it. */
export interface CellView {
  u: Float64Array;
  /** Bin of the common grid; -1 for a cell without pixels or outside. */
  bin: Int32Array;
  light: Float64Array;
  slope: Float64Array;
}

/** How each band differs from the common profile P: light = offset + slope z + gain P(u - shift). */
export interface BandState {
  gain: Float64Array;
  /** Change of the gain along the fringes, per px: cells of a band do not all have its mean v. */
  gainSlope: Float64Array;
  /** Change of the gain along the band, per half length: the edge of the light need not run along the bands. */
  gainAlong: Float64Array;
  offset: Float64Array;
  slope: Float64Array;
  /** Share of the fitted background's bend that this band has beyond its gain; the bend itself is `bendOf`. */
  bend: Float64Array;
  bendOf: ((u: number) => number) | null;
  shift: Float64Array;
  stretch: Float64Array;
  /** Tangent of the lean that `shift` undoes so far: shift = lean * v. */
  lean: number;
  /** Relative change of spacing per px along the fringes that `stretch` undoes so far: stretch = fan * v. */
  fan: number;
  /** Why a cell is left out; 0 is used. */
  left: Uint8Array;
  /** The cells as the last fit sees them. */
  view: CellView;
  noise: Noise | null;
}

export const LEFT = { used: 0, clipped: 1, floor: 2, outlier: 3, person: 4, outside: 5 } as const;

export function freshState(data: BandData): BandState {
  const line = (v: number) => new Float64Array(data.bands).fill(v);
  const cells = data.bins * data.bands;
  return {
    gain: line(1),
    gainSlope: line(0),
    gainAlong: line(0),
    offset: line(0),
    slope: line(0),
    bend: line(0),
    bendOf: null,
    shift: line(0),
    stretch: line(0),
    lean: 0,
    fan: 0,
    left: new Uint8Array(cells),
    view: {
      u: new Float64Array(cells),
      bin: new Int32Array(cells),
      light: new Float64Array(cells),
      slope: new Float64Array(cells),
    },
    noise: null,
  };
}

/** Where the bands' common coordinate runs: u of the first bin's lower edge and the half length, px. */
export interface CommonGrid {
  from: number;
  half: number;
  bins: number;
  pitchPx: number;
}

export function gridOf(data: BandData): CommonGrid {
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < data.u.length; i++) {
    if (!(data.pixels[i] > 0)) continue;
    if (data.u[i] < low) low = data.u[i];
    if (data.u[i] > high) high = data.u[i];
  }
  const bins = Math.max(1, Math.ceil((high - low) / data.pitchPx) + 1);
  return {
    from: low - data.pitchPx / 2,
    half: Math.max(1e-9, (high - low) / 2),
    bins,
    pitchPx: data.pitchPx,
  };
}

/**
 * Puts every cell into the common coordinate: shift and stretch undone at the cell's own place along the fringes, which is
 * not quite its band's, for rows of pixels enter and leave a band on its way.
 */
export function placeCells(data: BandData, state: BandState, grid: CommonGrid): void {
  const { u, bin } = state.view;
  const scale = 1 / grid.pitchPx;
  for (let b = 0; b < data.bands; b++) {
    const shift = state.shift[b];
    const squeeze = 1 / (1 + state.stretch[b]);
    const fan = state.fan * squeeze;
    for (let cell = b * data.bins, end = cell + data.bins; cell < end; cell++) {
      const dv = data.dv[cell];
      // 1 / (stretch of the band + fan dv), whose square does not matter: fan dv is below 1e-4.
      const at = (data.u[cell] - shift - state.lean * dv) * squeeze * (1 - fan * dv);
      const k = Math.floor((at - grid.from) * scale);
      u[cell] = at;
      bin[cell] = data.pixels[cell] > 0 && k >= 0 && k < grid.bins ? k : -1;
    }
  }
}

/** The gain at a cell's own place: dv from the band's middle along the fringes, z across them (half lengths). */
export function gainAt(state: BandState, band: number, dv: number, z: number): number {
  const g = state.gain[band];
  return Math.max(0.05 * g, g + state.gainSlope[band] * dv + state.gainAlong[band] * z);
}

/** Stray light of a band at u (z in half lengths) beyond its share of the common profile. */
export function strayAt(state: BandState, band: number, u: number, z: number): number {
  const plain = state.offset[band] + state.slope[band] * z;
  return state.bendOf === null ? plain : plain + state.bend[band] * state.bendOf(u);
}

/** Every how many cells are looked at: no common factor with the bins, or only some places would ever be seen. */
export function strideOver(cells: number, wanted: number, bins: number): number {
  const common = (a: number, b: number): number => (b === 0 ? a : common(b, a % b));
  let every = Math.max(1, Math.floor(cells / wanted));
  while (common(bins, every) > 1) every++;
  return every;
}
