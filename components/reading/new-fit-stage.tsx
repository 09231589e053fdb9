'use client';

import { Stage } from '@/components/figures/stage/stage';
import type { RegionDesk } from '@/lib/client/use-region-change';
import { isScanResult } from '@/lib/domain/scan-result';
import type { FitPreview } from '@/lib/domain/views';
import { LiveNote } from './live-note';

/** The pixel scale a fit was made with, from its own budget. */
export function scaleOfFit(fit: FitPreview): number {
  return fit.result.budget.find((row) => row.unit === 'µm/px')?.value ?? 0;
}

/** Its standard uncertainty. */
export function uScaleOfFit(fit: FitPreview): number {
  return fit.result.budget.find((row) => row.unit === 'µm/px')?.u ?? 0;
}

interface Props {
  fit: FitPreview;
  desk: RegionDesk;
  picked: number | null;
  onPick: (m: number | null) => void;
}

/** The stage of a frame's first fit: a region set by hand where the engine found none. */
export function NewFitStage({ fit, desk, picked, onPick }: Props) {
  const scale = scaleOfFit(fit);
  if (!(scale > 0) && !isScanResult(fit.result))
    return <section className="stage" aria-label="Fringes on one axis" />;
  return (
    <Stage
      result={fit.result}
      scaleUmPerPx={scale}
      nm={fit.result.wavelengthNm}
      leaveOut={desk.leaveOut}
      picked={picked}
      onPick={onPick}
      note={<LiveNote preview={desk.preview} />}
      onToggleOrder={desk.toggleOrder}
      onZeroHere={desk.zeroAt}
    />
  );
}
