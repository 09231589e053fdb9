/** One channel of a frame as the camera stored it, with the table that turns codes into linear light. */
export interface Picture {
  widthPx: number;
  heightPx: number;
  /** Row-major codes, pixel (column c, row r) at r * widthPx + c, after the orientation tag. */
  samples: Uint8Array | Uint16Array;
  bits: 8 | 16;
  /** Code -> linear light, 1 at the white level. Length 256 or 65536. */
  light: Float32Array;
  /** Codes at or above this one are clipped; above every code where nothing is. */
  clipCode: number;
  /** Lowest code that holds a pile of pixels, at or below which light is unknown; -1 where there is none. */
  floorCode: number;
  /** Where the file gave it almost for nothing: the picture by block means of codes, to look for fringes on and nothing else. */
  small?: { samples: Uint8Array; factor: number } | null;
  source: SourceFacts;
}

/** What is known about where the codes come from; shown beside the reading and used by the checks. */
export interface SourceFacts {
  format: string;
  channel: string;
  tone: 'linear' | 'srgb';
  toneBecause: string;
  /** True where the file has three colour channels that differ. */
  colour: boolean;
  /** 1 to 100 after the quantisation tables; null where the file is not a JPEG. */
  jpegQuality: number | null;
  chromaSubsampling: string | null;
  lossy: boolean;
}

/** Planes are made whole up to this size when fringes are looked for; of finer levels only tiles are read. */
export const COARSE_PIXELS = 400_000;

/** A picture of linear light, reduced by block averages. */
export interface Plane {
  widthPx: number;
  heightPx: number;
  data: Float32Array;
  /** Side of one of its pixels in px of the frame. */
  factor: number;
  /** Its corner in the frame, px; 0 but for a window. */
  x0Px: number;
  y0Px: number;
}
