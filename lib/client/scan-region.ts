/** Moving the edges of a scan's region, mm of the scan. Each move keeps the other edge where it is. */
import type { ScanRegion } from '@/lib/domain/scan-result';

/** Not less of the scan than this is a region. */
const SHORTEST_SHARE = 0.02;

const between = (v: number, low: number, high: number) => Math.min(high, Math.max(low, v));

/** An edge moves by `mm`; `side` is +1 for the right one. */
export function moveEdge(region: ScanRegion, side: 1 | -1, mm: number): ScanRegion {
  return side === 1 ? { ...region, toMm: region.toMm + mm } : { ...region, fromMm: region.fromMm + mm };
}

/** Inside the scan, and not shorter than a fiftieth of it: the edge that moved stops. */
export function keptInScan(region: ScanRegion, scan: ScanRegion, before: ScanRegion): ScanRegion {
  const shortest = SHORTEST_SHARE * (scan.toMm - scan.fromMm);
  if (region.fromMm !== before.fromMm) {
    const toMm = between(region.toMm, scan.fromMm + shortest, scan.toMm);
    return { fromMm: between(region.fromMm, scan.fromMm, toMm - shortest), toMm };
  }
  const fromMm = between(region.fromMm, scan.fromMm, scan.toMm - shortest);
  return { fromMm, toMm: between(region.toMm, fromMm + shortest, scan.toMm) };
}

/** How far one press moves an edge: the power of ten below a hundredth of the scan. */
export function pressMm(scan: ScanRegion): number {
  return 10 ** Math.floor(Math.log10((scan.toMm - scan.fromMm) / 100));
}

/** Places of decimals the edges are shown with: those of one press. */
export function placesOf(scan: ScanRegion): number {
  return Math.max(0, Math.min(6, -Math.round(Math.log10(pressMm(scan)))));
}

/** Numbers a person can read back, to a tenth of a press; a region that reaches to an end of the scan stays there. */
export function roundedInScan(region: ScanRegion, scan: ScanRegion): ScanRegion {
  const power = 10 ** (placesOf(scan) + 1);
  const tidy = (mm: number) => Math.round(mm * power) / power;
  return {
    fromMm: region.fromMm <= scan.fromMm ? scan.fromMm : tidy(region.fromMm),
    toMm: region.toMm >= scan.toMm ? scan.toMm : tidy(region.toMm),
  };
}
