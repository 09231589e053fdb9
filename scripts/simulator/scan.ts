import { random } from './random';
import { lightAt, type Scene } from './scene';

/** A detector moved through the pattern, counting photons at each place. */
export interface ScanPlan {
  /** Its lengths along the scan are in mm: a scale of 1000 µm. */
  scene: Scene;
  fromMm: number;
  toMm: number;
  stepMm: number;
  /** Where the zero order stands on the scan's own axis. */
  zeroMm: number;
  /** Width of the detector; 0 is a point. */
  detectorMm: number;
  /** Mean counts of the peak, and of stray light and dark counts. */
  peakCounts: number;
  dark: number;
  seed: number;
}

const PARTS_PER_MM = 100;

/** Mean light on a detector of a width about `xMm`, by the midpoint rule on parts of a hundredth of a mm. */
function lightOn(scene: Scene, xMm: number, detectorMm: number): number {
  const parts = Math.max(1, Math.ceil(detectorMm * PARTS_PER_MM));
  let sum = 0;
  for (let k = 0; k < parts; k += 1) sum += lightAt(scene, xMm + ((k + 0.5) / parts - 0.5) * detectorMm);
  return sum / parts;
}

/** The scan as a file of two columns with a heading. */
export function scanText(plan: ScanPlan): string {
  const r = random(plan.seed);
  const scene = { ...plan.scene, scaleUmPerPx: 1000 };
  const lines = ['position mm,counts'];
  const steps = Math.round((plan.toMm - plan.fromMm) / plan.stepMm);
  for (let i = 0; i <= steps; i += 1) {
    const x = plan.fromMm + i * plan.stepMm;
    const mean = plan.dark + plan.peakCounts * lightOn(scene, x - plan.zeroMm, plan.detectorMm);
    lines.push(`${x.toFixed(3)},${r.poisson(mean)}`);
  }
  return `${lines.join('\n')}\n`;
}
