/** A rectangle that may be turned: its long axis (length) runs across the fringes. Degrees, positive clockwise on screen. */
export interface Rectangle {
  cxPx: number;
  cyPx: number;
  lengthPx: number;
  heightPx: number;
  angleDeg: number;
}

export const toRadians = (degrees: number) => (degrees * Math.PI) / 180;
export const toDegrees = (radians: number) => (radians * 180) / Math.PI;

/** The same line direction with -90 < angle <= 90. */
export function wrapAngleDeg(angle: number): number {
  let a = angle % 180;
  if (a > 90) a -= 180;
  if (a <= -90) a += 180;
  return a;
}

/** Point at u along the rectangle's long axis. */
export function pointAlong(rect: Rectangle, u: number, v = 0): { xPx: number; yPx: number } {
  const c = Math.cos(toRadians(rect.angleDeg));
  const s = Math.sin(toRadians(rect.angleDeg));
  return { xPx: rect.cxPx + u * c - v * s, yPx: rect.cyPx + u * s + v * c };
}

/** Coordinates along (u) and across (v) the rectangle of a point of the frame. */
export function coordinatesIn(rect: Rectangle, x: number, y: number): { u: number; v: number } {
  const c = Math.cos(toRadians(rect.angleDeg));
  const s = Math.sin(toRadians(rect.angleDeg));
  return { u: (x - rect.cxPx) * c + (y - rect.cyPx) * s, v: -(x - rect.cxPx) * s + (y - rect.cyPx) * c };
}
