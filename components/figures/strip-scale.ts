import type { PlacedStrip } from '@/lib/domain/placed-strip';

/** Width of the one scale of a list in mm: twice the longest side of any strip, rounded up to a whole even number. */
export function spanForMm(places: readonly { strip: PlacedStrip }[]): number {
  const longest = Math.max(
    0,
    ...places.flatMap(({ strip }) => [Math.abs(strip.fromMm), Math.abs(strip.toMm)]),
  );
  return longest > 0 ? 2 * Math.ceil(longest) : 60;
}
