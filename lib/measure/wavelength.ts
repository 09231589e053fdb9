import type { BudgetRow, SetupValues } from '@/lib/domain/reading-result';
import { vacuumFromAir } from '@/lib/quantity/air-index';
import { combineBudget, type BudgetInput } from '@/lib/quantity/budget';
import { wavelengthFromSpacing } from '@/lib/quantity/two-slit';

export interface Wavelength {
  airNm: number | null;
  vacuumNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  k: number | null;
  dof: number | null;
  budget: BudgetRow[];
}

export interface SpacingValue {
  spacingPx: number;
  uSpacingPx: number;
  dof: number | null;
  known: string;
}

const INDEX_FROM_NM = 301;
const INDEX_TO_NM = 1690;

const NONE: Wavelength = { airNm: null, vacuumNm: null, uNm: null, expandedNm: null, k: null, dof: null, budget: [] };

/** An effect of the frame itself on the wavelength, for the budget. */
export interface FrameEffect {
  key: string;
  name: string;
  symbol: string;
  uNm: number;
  known: string;
}

/**
 * Wavelength in the air of the bench, lambda = d s spacing / L, its vacuum value and the budget.
 * The uncertainty stands only when those of scale, separation and distance are given.
 */
export function wavelengthOf(spacing: SpacingValue, setup: SetupValues, effects: FrameEffect[]): Wavelength {
  const { scaleUmPerPx: scale, separationUm: separation, distanceMm: distance } = setup;
  if (!scale || !separation || !distance) return NONE;
  const airNm = wavelengthFromSpacing({ spacingPx: spacing.spacingPx, scaleUmPerPx: scale.value, separationUm: separation.value, distanceMm: distance.value });
  // Outside the range in which the index of air is published there is no vacuum value to state.
  const vacuumNm = airNm > INDEX_FROM_NM && airNm < INDEX_TO_NM ? vacuumFromAir(airNm, setup.air) : null;
  const fit: BudgetInput = { key: 'fit', name: 'Fit of the spacing', symbol: 'Λ', value: spacing.spacingPx, unit: 'px', u: spacing.uSpacingPx, known: spacing.known, dof: spacing.dof, sensitivity: airNm / spacing.spacingPx };
  if (scale.u === null || separation.u === null || distance.u === null) return { ...NONE, airNm, vacuumNm };
  const rows: BudgetInput[] = [
    { key: 'separation', name: 'Slit separation', symbol: 'd', value: separation.value, unit: 'µm', u: separation.u, known: separation.known ?? 'as stated', dof: separation.dof ?? null, sensitivity: airNm / separation.value },
    { key: 'distance', name: 'Distance', symbol: 'L', value: distance.value, unit: 'mm', u: distance.u, known: distance.known ?? 'as stated', dof: distance.dof ?? null, sensitivity: -airNm / distance.value },
    { key: 'scale', name: 'Pixel scale', symbol: 's', value: scale.value, unit: 'µm/px', u: scale.u, known: scale.known ?? 'as stated', dof: scale.dof ?? null, sensitivity: airNm / scale.value },
    fit,
  ];
  if (setup.remountNm) rows.push({ key: 'remount', name: 'Re-mount', symbol: '', value: null, unit: 'nm', u: setup.remountNm.u, known: 'pooled repeats', dof: setup.remountNm.dof, sensitivity: 1 });
  for (const e of effects) rows.push({ key: e.key, name: e.name, symbol: e.symbol, value: null, unit: 'nm', u: e.uNm, known: e.known, dof: null, sensitivity: 1 });
  const combined = combineBudget(rows);
  return { airNm, vacuumNm, uNm: combined.uNm, expandedNm: combined.expandedNm, k: combined.k, dof: combined.dof, budget: combined.rows };
}
