import type { Strip } from './reading-result';
import { isScanResult, type FitResult, type ScanStrip } from './scan-result';

/** A strip with its ends in mm about the zero order: what lists and the stage draw. */
export interface PlacedStrip {
  fromMm: number;
  toMm: number;
  light: number[];
}

/** Places the strip of a frame (px along the region, `scaleUmPerPx`) or of a scan; `zero` on the strip's own axis. */
export function placeStrip(strip: Strip | ScanStrip, zero: number, scaleUmPerPx: number): PlacedStrip {
  const [from, step, mm] =
    'fromMm' in strip ? [strip.fromMm, strip.stepMm, 1] : [strip.fromPx, strip.stepPx, scaleUmPerPx / 1000];
  const { light } = strip;
  return { fromMm: (from - zero) * mm, toMm: (from + step * light.length - zero) * mm, light };
}

/** Spacing of a fit in its own unit. */
export function spacingOf(result: FitResult): { value: number; u: number; unit: 'px' | 'mm' } {
  return isScanResult(result)
    ? { value: result.spacingMm, u: result.uSpacingMm, unit: 'mm' }
    : { value: result.spacingPx, u: result.uSpacingPx, unit: 'px' };
}
