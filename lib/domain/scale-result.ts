/** What a photographed scale gives. */
export const SCALE_KINDS = ['lines', 'grid', 'chessboard'] as const;
export type ScaleKind = (typeof SCALE_KINDS)[number];
export const SCALE_WORDS: Record<ScaleKind, string> = {
  lines: 'Ruler or line scale',
  grid: 'Square grid',
  chessboard: 'Chessboard',
};

export interface ScaleAnswer {
  ok: true;
  kind: ScaleKind;
  pitchMm: number;
  /** Pitch at the picture's middle: along the scale for lines, along the picture's x for a grid. */
  pitchPx: number;
  uPitchPx: number;
  dof: number;
  scaleUmPerPx: number;
  uScaleUmPerPx: number;
  /** Direction of the scale, degrees, positive clockwise on screen. */
  angleDeg: number;
  /** Lines (their middles) or corners used, with their misfit. */
  points: { xPx: number; yPx: number; misfitPx: number }[];
  largestMisfitPx: number;
  /** Relative change of the pitch across the scale (lines) or the picture (grid); null where none shows. */
  changeAcross: number | null;
  /** Angle between the line of sight and the grid's normal; null for lines. */
  viewAngleDeg: number | null;
  /** Radial distortion at half the picture's width, relative; null where none shows. */
  distortion: number | null;
  widthPx: number;
  heightPx: number;
}

/** Why the picture gives no scale, in a sentence. */
export interface ScaleRefusal {
  ok: false;
  message: string;
}

/** What the page is given: the scale, and the picture's fingerprint under which it is kept. */
export interface ScaleReading {
  scale: ScaleAnswer;
  sha256: string;
}
