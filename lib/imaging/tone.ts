/** Tone curves: from stored codes (0 to 1) to linear light (0 to 1). */

/** sRGB decoding: c/12.92 up to 0.04045, else ((c + 0.055)/1.055)^2.4. Source: CSS Color 4, IEC 61966-2-1. */
export function srgbToLinear(c: number): number {
  return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
}

/** sRGB encoding: 12.92 l up to 0.0031308, else 1.055 l^(1/2.4) - 0.055. Source as above. */
export function linearToSrgb(l: number): number {
  return l <= 0.0031308 ? 12.92 * l : 1.055 * l ** (1 / 2.4) - 0.055;
}

export interface ToneCurve {
  kind: 'linear' | 'srgb';
  because: string;
  toLinear: (c: number) => number;
}

export const LINEAR = (because: string): ToneCurve => ({ kind: 'linear', because, toLinear: (c) => c });
export const SRGB = (because: string): ToneCurve => ({ kind: 'srgb', because, toLinear: srgbToLinear });

/** A plain exponent: light = code^exponent. */
export function exponentCurve(exponent: number, because: string): ToneCurve {
  if (Math.abs(exponent - 1) < 0.01) return LINEAR(because);
  return { kind: 'srgb', because, toLinear: (c) => c ** exponent };
}

/** Table code -> light with light 1 at `whiteCode`; codes above go on beyond 1. */
export function lightTable(curve: ToneCurve, bits: 8 | 16, whiteCode: number): Float32Array {
  const size = bits === 8 ? 256 : 65536;
  const full = size - 1;
  // A linear camera that fills only part of the range keeps its shape; a curve is defined on the file's full range.
  const white = curve.toLinear(whiteCode / full);
  const table = new Float32Array(size);
  for (let i = 0; i < size; i++) table[i] = curve.toLinear(i / full) / white;
  return table;
}
