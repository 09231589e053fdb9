import type { SetupView, StatedValue } from '@/lib/domain/views';

export type ValueKey = 'separationUm' | 'widthUm' | 'distanceMm' | 'scaleUmPerPx';

/** The four values of a setup in the order every screen shows them. */
export const SETUP_VALUES: readonly { key: ValueKey; name: string; symbol: string; unit: string }[] = [
  { key: 'separationUm', name: 'Slit separation', symbol: 'd', unit: 'µm' },
  { key: 'widthUm', name: 'Slit width', symbol: 'w', unit: 'µm' },
  { key: 'distanceMm', name: 'Distance', symbol: 'L', unit: 'mm' },
  { key: 'scaleUmPerPx', name: 'Pixel scale', symbol: 's', unit: 'µm/px' },
];

export function valueOf(setup: SetupView, key: ValueKey): StatedValue {
  return setup[key];
}
