import { scanText, type ScanPlan } from '@/scripts/simulator/scan';
import { BENCH_SCENE } from './pictures';

/** A simulated line scan of the same invented module on the same bench, as a file. The same seed gives the same bytes. */
export function scanFile(seed: number, change: Partial<ScanPlan> = {}): Uint8Array<ArrayBuffer> {
  const plan: ScanPlan = {
    scene: { ...BENCH_SCENE, envelopeShiftPx: 0 },
    fromMm: -5,
    toMm: 5,
    stepMm: 0.04,
    zeroMm: 0.31,
    detectorMm: 0.2,
    peakCounts: 40_000,
    dark: 500,
    seed,
    ...change,
  };
  return new Uint8Array(Buffer.from(scanText(plan)));
}
