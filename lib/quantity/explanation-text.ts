import { formatNumber, formatQuantity } from './format';
import type { Explanation } from './reference-check';

const NAMES: Record<Explanation['what'], { name: string; unit: string }> = {
  distance: { name: 'distance', unit: 'mm' },
  separation: { name: 'slit separation', unit: 'µm' },
  scale: { name: 'pixel scale', unit: 'µm/px' },
};

/** "The distance would have to be 5.0 mm longer than stated (29 times its u): mount ring?" */
export function explanationText({ what, step, times, cause }: Explanation): string {
  const { name, unit } = NAMES[what];
  const size = formatQuantity(0, Math.abs(step)).uncertainty;
  const way = what === 'distance' ? (step > 0 ? 'longer' : 'shorter') : step > 0 ? 'larger' : 'smaller';
  const far = `${formatNumber(times, times < 10 ? 1 : 0)} times its standard uncertainty`;
  return `The ${name} would have to be ${size} ${unit} ${way} than stated, ${far}${cause ? `: ${cause}` : '.'}`;
}
