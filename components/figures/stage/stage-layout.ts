/** Where the four bands of the stage lie, px from its upper edge. */
export interface StageLayout {
  band: [number, number];
  profile: [number, number];
  misfit: [number, number];
  ladder: [number, number];
  /** Upper edges of the bright and the dark row. */
  brightY: number;
  darkY: number;
}

export function stageLayout(height: number, goggles: boolean): StageLayout {
  const tall = height > 700;
  const extra = goggles ? 4 : 0;
  const gap = (tall ? 31 : 27) + extra;
  const bandTop = gap + 6;
  const bandEnd = bandTop + (tall ? 84 : 70);
  const profileTop = bandEnd + gap;
  const ladderHeight = (tall ? 116 : 108) + extra;
  const misfitHeight = tall ? 104 : 88;
  const axis = 34 + extra;
  const profileEnd = Math.max(profileTop + 120, height - axis - ladderHeight - gap - misfitHeight - gap);
  const misfitTop = profileEnd + gap;
  const ladderTop = misfitTop + misfitHeight + gap;
  return {
    band: [bandTop, bandEnd],
    profile: [profileTop, profileEnd],
    misfit: [misfitTop, misfitTop + misfitHeight],
    ladder: [ladderTop, ladderTop + ladderHeight],
    brightY: ladderTop + 4,
    darkY: ladderTop + 4 + 40 + (tall ? 28 : 24) + extra,
  };
}

/** The part of the axis that is shown, mm about the zero order. */
export interface AxisView {
  fromMm: number;
  toMm: number;
}

/** Steps of an axis: 1, 2 or 5 times a power of ten, at least `least` apart. */
export function niceStep(least: number): number {
  const power = 10 ** Math.floor(Math.log10(least));
  const lead = least / power;
  return power * (lead <= 1 ? 1 : lead <= 2 ? 2 : lead <= 5 ? 5 : 10);
}

/** Multiples of `step` inside the view. */
export function ticks(view: AxisView, step: number): number[] {
  const list = [];
  for (let i = Math.ceil(view.fromMm / step); i * step <= view.toMm + 1e-9; i += 1) list.push(i * step);
  return list;
}
