import { TILT_STEP_DEG } from './region';
import type { RegionDesk } from './use-region-change';

/** Keys that change the region, the same on every page that has one. */
export function regionKeys(
  desk: RegionDesk,
  mayFit: boolean,
  picked: number | null,
): Record<string, () => void> {
  const tilt = (steps: number) => () => {
    if (mayFit) desk.turnBy(steps * TILT_STEP_DEG);
  };
  const undo = () => mayFit && desk.undo?.();
  const redo = () => mayFit && desk.redo?.();
  return {
    '[': tilt(-1),
    ']': tilt(1),
    '{': tilt(-10),
    '}': tilt(10),
    'alt+[': tilt(-0.1),
    'alt+]': tilt(0.1),
    x: () => mayFit && picked !== null && desk.toggleOrder(picked),
    'ctrl+z': undo,
    'ctrl+shift+z': redo,
    'ctrl+y': redo,
  };
}
