/**
 * What one fit of one line scan gives: a reading like that of a frame, with every length in mm along the scan.
 * Positions are those of the file; a number that does not exist is null, never NaN.
 */
import type { FitOptions, ReadingResult, Refusal, Region } from './reading-result';

/** The region of a scan: the part of it that is fitted. */
export interface ScanRegion {
  fromMm: number;
  toMm: number;
}

/** What a person may choose for one fit of a scan. */
export interface ScanOptions extends Pick<FitOptions, 'zeroShift' | 'leaveOut'> {
  /** The person's region; absent: the whole scan. */
  region?: ScanRegion;
  /** Width of the detector, over which the model is averaged; null: a point. */
  detectorMm: number | null;
}

/** The scan as the file holds it. */
export interface ScanFacts extends ScanRegion {
  /** Positions, repeats taken together. */
  points: number;
  /** Middle distance of neighbouring positions. */
  stepMm: number;
}

export interface ScanOrder {
  m: number;
  kind: 'bright' | 'dark';
  xMm: number;
  /** Standard uncertainty of the centre. */
  uMm: number;
  /** Raw middle minus order centre, along +m; null where there is no raw middle. */
  pullMm: number | null;
  used: boolean;
}

/** The curves of the stage, as those of a frame, at positions of the scan. Light is in the file's own unit. */
export interface ScanCurves {
  xMm: number[];
  data: number[];
  uData: number[];
  fit: number[];
  envelope: number[];
  misfit: number[];
  left: number[];
}

/** What the readings of a frame and of a scan have alike. */
type Alike =
  | 'ok'
  | 'code'
  | 'message'
  | 'dofSpacing'
  | 'visibility'
  | 'uVisibility'
  | 'slit'
  | 'bandwidth'
  | 'words'
  | 'medium'
  | 'wavelengthNm'
  | 'wavelengthVacuumNm'
  | 'uWavelengthNm'
  | 'expandedNm'
  | 'k'
  | 'dofWavelength'
  | 'budget'
  | 'findings'
  | 'engine'
  | 'envelopeZeroOrder'
  | 'chiSquareReduced'
  | 'ms';

export interface ScanResult extends Pick<ReadingResult, Alike> {
  spacingMm: number;
  uSpacingMm: number;
  zeroOrder: { xMm: number };
  orders: ScanOrder[];
  region: ScanRegion;
  scan: ScanFacts;
  detectorMm: number | null;
  /** Light of the brightest fringe by the fit, in the file's own unit. */
  peak: number;
  /** Middle of the envelope. */
  envelopeCentreMm: number;
  curves: ScanCurves;
  /** The region for a list: at most 480 samples of light, 0 to 1 of its own maximum. */
  strip: ScanStrip;
}

export interface ScanStrip {
  fromMm: number;
  stepMm: number;
  light: number[];
}

export interface ScanRefusal extends Refusal {
  /** null where the file gives no scan. */
  scan: ScanFacts | null;
}

export type ScanAnswer = ScanResult | ScanRefusal;

/** A whole scan to be drawn: at most 1200 points, lowest and highest of neighbours kept. */
export interface ScanDrawing extends ScanRegion {
  xMm: number[];
  light: number[];
}

/** One fit, of a frame or of a scan. */
export type FitResult = ReadingResult | ScanResult;

export function isScanResult(result: FitResult): result is ScanResult {
  return 'spacingMm' in result;
}

export function isScanRegion(region: Region | ScanRegion): region is ScanRegion {
  return 'fromMm' in region;
}

/** Media type of a scan in the store. */
export const SCAN_MEDIA_TYPE = 'text/csv';
