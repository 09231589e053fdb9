/**
 * Moving the calliper: plain geometry of a turned rectangle in px of the frame. Angles in degrees, positive
 * clockwise on screen (y runs down). Each move keeps the opposite part where it is, as a calliper does.
 */
import type { Region } from '@/lib/domain/reading-result';

export interface Picture {
  widthPx: number;
  heightPx: number;
}

export const SHORTEST_PX = 24;
export const LOWEST_PX = 2;
export const TILT_STEP_DEG = 0.02;

/** One press of a key: ten times as far with Shift, a tenth with Alt. */
export const STEPS = [0.1, 1, 10] as const;
export type StepSize = (typeof STEPS)[number];

export function stepSize(keys: { shiftKey: boolean; altKey: boolean }): StepSize {
  if (keys.altKey) return 0.1;
  return keys.shiftKey ? 10 : 1;
}

/** Unit vectors along the fringes' normal (the long axis) and across it. */
export function axes(angleDeg: number): { along: [number, number]; across: [number, number] } {
  const t = (angleDeg * Math.PI) / 180;
  return { along: [Math.cos(t), Math.sin(t)], across: [-Math.sin(t), Math.cos(t)] };
}

/** Coordinates of a point of the frame on the region's own axes, px from its centre. */
export function onRegion(region: Region, xPx: number, yPx: number): { alongPx: number; acrossPx: number } {
  const { along, across } = axes(region.angleDeg);
  const dx = xPx - region.cxPx;
  const dy = yPx - region.cyPx;
  return { alongPx: dx * along[0] + dy * along[1], acrossPx: dx * across[0] + dy * across[1] };
}

const between = (v: number, low: number, high: number) => Math.min(high, Math.max(low, v));

/** Into (-180, 180]. */
export function wrapDeg(deg: number): number {
  const wrapped = ((((deg + 180) % 360) + 360) % 360) - 180;
  return wrapped === -180 ? 180 : wrapped;
}

/** Centre inside the picture, length and height between the least and the picture's diagonal. */
export function kept(region: Region, picture: Picture): Region {
  const diagonal = Math.hypot(picture.widthPx, picture.heightPx);
  return {
    cxPx: between(region.cxPx, 0, picture.widthPx),
    cyPx: between(region.cyPx, 0, picture.heightPx),
    lengthPx: between(region.lengthPx, SHORTEST_PX, diagonal),
    heightPx: between(region.heightPx, LOWEST_PX, diagonal),
    angleDeg: wrapDeg(region.angleDeg),
  };
}

/** A jaw moves by `px` along the long axis; the other jaw stays. `side` is +1 for the right jaw. */
export function moveJaw(region: Region, side: 1 | -1, px: number): Region {
  const lengthPx = Math.max(SHORTEST_PX, region.lengthPx + side * px);
  const half = (side * (lengthPx - region.lengthPx)) / 2;
  const { along } = axes(region.angleDeg);
  return { ...region, lengthPx, cxPx: region.cxPx + half * along[0], cyPx: region.cyPx + half * along[1] };
}

/** A blade moves by `px` across the long axis; the other blade stays. `side` is +1 for the lower blade. */
export function moveBlade(region: Region, side: 1 | -1, px: number): Region {
  const heightPx = Math.max(LOWEST_PX, region.heightPx + side * px);
  const half = (side * (heightPx - region.heightPx)) / 2;
  const { across } = axes(region.angleDeg);
  return { ...region, heightPx, cxPx: region.cxPx + half * across[0], cyPx: region.cyPx + half * across[1] };
}

export function moveCentre(region: Region, dxPx: number, dyPx: number): Region {
  return { ...region, cxPx: region.cxPx + dxPx, cyPx: region.cyPx + dyPx };
}

export function turn(region: Region, deg: number): Region {
  return { ...region, angleDeg: wrapDeg(region.angleDeg + deg) };
}

/** Numbers a person can read back: px to 0.1, tilt to 0.001°. */
export function rounded(region: Region): Region {
  const tenth = (v: number) => Math.round(v * 10) / 10;
  return {
    cxPx: tenth(region.cxPx),
    cyPx: tenth(region.cyPx),
    lengthPx: tenth(region.lengthPx),
    heightPx: tenth(region.heightPx),
    angleDeg: Math.round(region.angleDeg * 1000) / 1000,
  };
}

/** A region to start from where the engine found none. */
export function startRegion(picture: Picture): Region {
  return {
    cxPx: picture.widthPx / 2,
    cyPx: picture.heightPx / 2,
    lengthPx: Math.round(picture.widthPx * 0.6),
    heightPx: Math.round(picture.heightPx * 0.25),
    angleDeg: 0,
  };
}

export function sameRegion(a: Region, b: Region): boolean {
  const isSame = (key: keyof Region, within: number) => Math.abs(a[key] - b[key]) < within;
  return (
    (['cxPx', 'cyPx', 'lengthPx', 'heightPx'] as const).every((key) => isSame(key, 0.006)) &&
    isSame('angleDeg', 0.0006)
  );
}
