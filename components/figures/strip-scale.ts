import type { Strip } from '@/lib/domain/reading-result';

export interface StripPlace {
  strip: Strip;
  /** Where the zero order lies on the strip's axis, px. */
  zeroAlongPx: number;
  scaleUmPerPx: number;
}

/** Ends of a strip in mm about the zero order. */
export function stripEndsMm({ strip, zeroAlongPx, scaleUmPerPx }: StripPlace): [number, number] {
  const mm = (px: number) => ((px - zeroAlongPx) * scaleUmPerPx) / 1000;
  return [mm(strip.fromPx), mm(strip.fromPx + strip.stepPx * strip.light.length)];
}

/** Width of the one scale of a list in mm: twice the longest side of any strip, rounded up to a whole even number. */
export function spanForMm(places: readonly StripPlace[]): number {
  const longest = Math.max(0, ...places.flatMap((p) => stripEndsMm(p).map(Math.abs)));
  return longest > 0 ? 2 * Math.ceil(longest) : 60;
}
