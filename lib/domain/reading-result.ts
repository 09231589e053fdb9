/**
 * What one fit of one frame gives: the engine's answer, the same on the command line, in the database and on
 * the screens. Positions in px follow one rule: pixel (c, r) covers [c, c+1) x [r, r+1), after the orientation
 * tag. Angles are degrees, positive clockwise on screen. A number that does not exist is null, never NaN.
 */

/** The region of interest: a rectangle that may be turned. `lengthPx` runs across the fringes. */
export interface Region {
  cxPx: number;
  cyPx: number;
  lengthPx: number;
  heightPx: number;
  angleDeg: number;
}

/** What is known of a value inside ± its half width, where that is no normal or t distribution. */
export type Shape = 'rectangular' | 'triangular' | 'u-shaped';

/** One value of a setup with its standard uncertainty (null when none is stated). */
export interface Estimate {
  value: number;
  u: number | null;
  /** How it is known, for the budget: "certificate, k = 2". */
  known?: string;
  /** Degrees of freedom of u; null is infinite. */
  dof?: number | null;
  /** Absent: normal, or Student's t where dof is finite. */
  shape?: Shape;
}

/** An effect a bench states as a share of the wavelength: sensor yaw, cover glass, tone curve, background, expansion. */
export interface StatedEffect {
  key: string;
  name: string;
  /** Standard uncertainty in parts per million of the wavelength. */
  uPpm: number;
  known: string;
  shape?: Shape;
  dof?: number | null;
}

/** The bench's air, each with its standard uncertainty (null where none is stated). */
export interface MeasuredAir {
  temperatureC: number;
  pressurePa: number;
  humidityPercent: number;
  co2Ppm: number;
  uTemperatureC?: number | null;
  uPressurePa?: number | null;
  uHumidityPercent?: number | null;
  uCo2Ppm?: number | null;
}

/** The constants a wavelength needs. */
export interface SetupValues {
  scaleUmPerPx?: Estimate;
  separationUm?: Estimate;
  widthUm?: Estimate;
  distanceMm?: Estimate;
  /** Re-mount scatter of the bench as a standard uncertainty in nm, with degrees of freedom. */
  remountNm?: { u: number; dof: number | null };
  /** Temperature and so on of the bench's air; standard air of the bench when absent. */
  air?: MeasuredAir;
  /** The plate stands square to the beam to within so many degrees. */
  plateYawDeg?: number;
  /** Between two mountings the plate's yaw differs by no more than so many degrees. */
  yawDifferenceDeg?: number;
  /** Further effects the bench states for itself. */
  effects?: StatedEffect[];
  /** Temperature of the unit or source in °C while the frame was taken. */
  sourceTemperature?: Estimate;
}

/**
 * From which part of a frame its band stack is made, and how. The same bytes and plan give the same stack, so that a
 * reading can be computed again.
 */
export interface StackPlan {
  /** The straightened surroundings of `region`, long axis square to the fringes. */
  rect: Region;
  /** The region it was made for. */
  region: Region;
  bands: number;
  /** Bins per px of the row, and bins put together. */
  lanes: number;
  merge: number;
  /** The pattern as it was first seen: places in px along `rect` from its centre, light relative to full scale. */
  start: {
    spacingPx: number;
    zeroPx: number;
    middlePx: number;
    ratio: number;
    a: number;
    b: number;
    background: number;
    slope: number;
  };
  /** The zero order that a person's shift counts from, px along `rect`. */
  zeroPx: number;
}

export type ToneChoice = 'auto' | 'linear' | 'srgb';

/** What a person may choose for one fit. */
export interface FitOptions {
  /** The person's region; absent: the engine finds it. */
  region?: Region;
  tone?: ToneChoice;
  /** Whole orders added to every order number the engine would give: a person's zero order. */
  zeroShift?: number;
  /** Bright (integer) or dark (half-integer) orders whose surroundings are left out of the fit. */
  leaveOut?: number[];
  /** The band stack to measure from; absent: one is made for the region. */
  stack?: StackPlan;
}

export type FindingWord = 'clear' | 'look' | 'stop';
export type Measurand = 'wavelength' | 'width' | 'visibility';

/** One check of the frame, in four parts. `message` is the first two parts as one short text. */
export interface Finding {
  /** Stable lower-case id: clipping, dim, tone, compression, demosaic, pixels, tilt, chirp, ... */
  check: string;
  /** The word for the wavelength. */
  word: FindingWord;
  message: string;
  seen: string;
  size: string;
  done: string;
  remedy: string;
  /** Size for this reading's wavelength in nm, where it is known. */
  sizeNm: number | null;
  /** The word for other measurands, where it differs. */
  width?: FindingWord;
  visibility?: FindingWord;
}

export interface OrderCentre {
  m: number;
  kind: 'bright' | 'dark';
  xPx: number;
  yPx: number;
  /** Standard uncertainty of the centre along the fringe normal, px. */
  uPx: number;
  /** Raw middle minus order centre, px along +m; null where there is no raw middle. */
  pullPx: number | null;
  /** Coordinate along the region's long axis, px, 0 at its centre. */
  alongPx: number;
  used: boolean;
}

export interface BudgetRow {
  key: string;
  name: string;
  symbol: string;
  value: number | null;
  unit: string;
  /** Standard uncertainty in `unit`. */
  u: number;
  known: string;
  dof: number | null;
  /** nm per unit of this input. */
  sensitivity: number;
  /** Absent: normal, or Student's t where dof is finite. */
  shape?: Shape;
  /** Rows with the same input go back to one quantity and are combined into one first. */
  input?: string;
  /** Contribution in nm at k = 1. */
  contributionNm: number;
  /** Share of the variance, 0 to 1. */
  share: number;
}

/** Slit width beside the wavelength, where the frame allows it. */
export interface SlitResult {
  /** w/d and its standard uncertainty. */
  ratio: number;
  uRatio: number;
  /** Degrees of freedom; null is infinite. */
  dof: number | null;
  /** Mean width of the two slits; null where the setup states no separation. */
  widthUm: number | null;
  uWidthUm: number | null;
  /** (w1 - w2)/w where the slits differ so much that it shows, else null. */
  difference: number | null;
  uDifference: number | null;
}

/** Width of the source's line (full width at half maximum of a Gaussian line). */
export interface BandwidthResult {
  /** null where the contrast does not fade: then only the limit stands. */
  fwhmNm: number | null;
  uFwhmNm: number | null;
  /** A wider line (95 %) would have been seen; null where the frame sets no limit or a width is stated. */
  limitNm: number | null;
}

/** The curves a stage draws, on the region's long axis (px from its centre). At most 1500 points. */
export interface Curves {
  /** Coordinates along the long axis, px. */
  alongPx: number[];
  /** Data, fit and envelope in linear light relative to full scale. */
  data: number[];
  uData: number[];
  fit: number[];
  envelope: number[];
  /** (data - fit) / u */
  misfit: number[];
  /** 1 where the point was left out. */
  left: number[];
}

/** The averaged region for a list: at most 480 samples of linear light, 0 to 1 of its own maximum. */
export interface Strip {
  fromPx: number;
  stepPx: number;
  light: number[];
}

export interface Timing {
  decode: number;
  find: number;
  profile: number;
  fit: number;
  total: number;
}

export interface ReadingResult {
  ok: true;
  code: 'OK';
  message: string;
  spacingPx: number;
  uSpacingPx: number;
  /** null is infinite. */
  dofSpacing: number | null;
  tiltDeg: number;
  uTiltDeg: number;
  visibility: number;
  uVisibility: number | null;
  /** Null where a check stops the slit width; absent in readings of engines before 0.6. */
  slit?: SlitResult | null;
  /** Null where nothing can be said. */
  bandwidth?: BandwidthResult | null;
  /** The gravest word of the checks for each measurand. */
  words?: Record<Measurand, FindingWord>;
  zeroOrder: { xPx: number; yPx: number };
  orders: OrderCentre[];
  region: Region;
  medium: 'air';
  wavelengthNm: number | null;
  wavelengthVacuumNm: number | null;
  uWavelengthNm: number | null;
  expandedNm: number | null;
  k: number | null;
  dofWavelength: number | null;
  budget: BudgetRow[];
  findings: Finding[];
  engine: string;
  /** The band stack these numbers were measured from; absent in readings of engines before 0.6. */
  stack?: StackPlan;
  picture: {
    widthPx: number;
    heightPx: number;
    bits: 8 | 16;
    format: string;
    /** Which channel(s) carry the measurement: "grey", "red", ... */
    channel: string;
    tone: 'linear' | 'srgb';
    toneBecause: string;
  };
  /** Brightest fringe as a share of full scale; clipped share of the region. */
  peakShare: number;
  clippedShare: number;
  /** Order at which the envelope has its first zero (d/w); null where the frame does not say. */
  envelopeZeroOrder: number | null;
  /** Middle of the envelope on the long axis, px. */
  envelopeCentrePx: number;
  /** Rows averaged along the fringes. */
  rows: number;
  chiSquareReduced: number;
  curves: Curves;
  strip: Strip;
  ms: Timing;
}

/** A frame the engine will not answer: `unreadable` files and frames without a two-slit answer. */
export interface Refusal {
  ok: false;
  /** Stable upper-case code, see REFUSALS. */
  code: RefusalCode;
  message: string;
  engine: string;
  /** True when the file itself is at fault (unreadable), false when the picture is good (refused). */
  fileAtFault: boolean;
  picture: { widthPx: number; heightPx: number; format: string } | null;
  ms: Timing;
}

export type FrameAnswer = ReadingResult | Refusal;

/** Refusal codes; the second value tells whether the file itself is at fault. */
export const REFUSALS = {
  NOT_A_PICTURE: true,
  BROKEN_FILE: true,
  TRUNCATED_FILE: true,
  TOO_LARGE: true,
  TOO_MANY_PIXELS: true,
  TOO_SMALL: true,
  HEIC: true,
  PALETTE: true,
  CMYK: true,
  ANIMATED: true,
  FLOAT_SAMPLES: true,
  ALPHA_ONLY: true,
  TOO_DARK: false,
  BURNT_OUT: false,
  NO_FRINGES: false,
  ONE_SLIT: false,
  MANY_SLITS: false,
  RINGS: false,
  TOO_FEW_FRINGES: false,
  TOO_FINE: false,
  PATTERN_CUT: false,
  NOT_CONVERGED: false,
} as const;
export type RefusalCode = keyof typeof REFUSALS;
