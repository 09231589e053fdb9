/** Why a frame gets no answer. The sentence belonging to each is written where the reason is found. */
export type RefusedCode =
  | 'NOT_A_PICTURE'
  | 'BROKEN_FILE'
  | 'TRUNCATED_FILE'
  | 'TOO_LARGE'
  | 'TOO_MANY_PIXELS'
  | 'TOO_SMALL'
  | 'HEIC'
  | 'PALETTE'
  | 'CMYK'
  | 'ANIMATED'
  | 'FLOAT_SAMPLES'
  | 'ALPHA_ONLY'
  | 'TOO_DARK'
  | 'BURNT_OUT'
  | 'NO_FRINGES'
  | 'ONE_SLIT'
  | 'MANY_SLITS'
  | 'RINGS'
  | 'TOO_FEW_FRINGES'
  | 'TOO_FINE'
  | 'PATTERN_CUT'
  | 'NOT_CONVERGED';

export interface PictureBrief {
  widthPx: number;
  heightPx: number;
  format: string;
}

/**
 * A frame that will not be answered: a stable code and the sentence a person reads (what, why, what to do).
 * Thrown by a stage, turned into an answer in one place, lib/measure/analyse-frame.ts.
 */
export class Refused extends Error {
  constructor(
    readonly code: RefusedCode,
    message: string,
    readonly picture: PictureBrief | null = null,
  ) {
    super(message);
    this.name = 'Refused';
  }
}
