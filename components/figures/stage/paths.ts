export type Scale = (value: number) => number;

/** A line through all points. */
export function linePath<T>(points: readonly T[], x: (p: T) => number, y: (p: T) => number): string {
  return points.map((p, i) => `${i ? 'L' : 'M'}${x(p).toFixed(1)} ${y(p).toFixed(1)}`).join('');
}

/** Dots as one path: strokes of no length, made round by their caps. Cheaper than a circle each. */
export function dotsPath<T>(points: readonly T[], x: (p: T) => number, y: (p: T) => number): string {
  return points.map((p) => `M${x(p).toFixed(1)} ${y(p).toFixed(1)}h0`).join('');
}
