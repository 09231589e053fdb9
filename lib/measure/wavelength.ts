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

const NONE: Wavelength = {
  airNm: null,
  vacuumNm: null,
  uNm: null,
  expandedNm: null,
  k: null,
  dof: null,
  budget: [],
};

/** An effect of the frame itself on the wavelength, for the budget. */
export interface FrameEffect {
  key: string;
  name: string;
  symbol: string;
  uNm: number;
  known: string;
}

/** Effect of a colour sensor's missing sites, from simulation: 0.128 / (px per fringe)^2 of the wavelength. */
export function demosaicRelative(spacingPx: number): number {
  return 0.128 / (spacingPx * spacingPx);
}

/**
 * Far-field formula at a finite distance, from simulation with Fresnel integrals: 0.18 (w^2/(lambda L))^2 of the wavelength
 * when the region scales with L.
 */
export function nearFieldRelative(widthUm: number, wavelengthNm: number, distanceMm: number): number {
  const number = (widthUm * widthUm) / (wavelengthNm * distanceMm);
  return 0.18 * number * number;
}

/** What the frame itself adds to the budget: each largest effect taken as a half width (rectangular, / sqrt 3). */
export function frameEffects(
  picture: { source: { colour: boolean } },
  setup: SetupValues,
  spacingPx: number,
): FrameEffect[] {
  const { scaleUmPerPx: scale, separationUm: separation, distanceMm: distance, widthUm: width } = setup;
  if (!scale || !separation || !distance) return [];
  const airNm = wavelengthFromSpacing({
    spacingPx,
    scaleUmPerPx: scale.value,
    separationUm: separation.value,
    distanceMm: distance.value,
  });
  const effects: FrameEffect[] = [];
  if (width)
    effects.push({
      key: 'near-field',
      name: 'Finite distance',
      symbol: '',
      uNm: (airNm * nearFieldRelative(width.value, airNm, distance.value)) / Math.sqrt(3),
      known: 'rectangular, far-field formula',
    });
  if (picture.source.colour)
    effects.push({
      key: 'demosaic',
      name: 'Colour sensor',
      symbol: '',
      uNm: (airNm * demosaicRelative(spacingPx)) / Math.sqrt(3),
      known: 'rectangular, filled-in pixels',
    });
  return effects;
}

/**
 * Wavelength in the air of the bench, lambda = d s spacing / L, its vacuum value and the budget.
 * The uncertainty stands only when those of scale, separation and distance are given.
 */
export function wavelengthOf(spacing: SpacingValue, setup: SetupValues, effects: FrameEffect[]): Wavelength {
  const { scaleUmPerPx: scale, separationUm: separation, distanceMm: distance } = setup;
  if (!scale || !separation || !distance) return NONE;
  const airNm = wavelengthFromSpacing({
    spacingPx: spacing.spacingPx,
    scaleUmPerPx: scale.value,
    separationUm: separation.value,
    distanceMm: distance.value,
  });
  // Outside the range in which the index of air is published there is no vacuum value to state.
  const vacuumNm = airNm > INDEX_FROM_NM && airNm < INDEX_TO_NM ? vacuumFromAir(airNm, setup.air) : null;
  const fit: BudgetInput = {
    key: 'fit',
    name: 'Fit of the spacing',
    symbol: 'Λ',
    value: spacing.spacingPx,
    unit: 'px',
    u: spacing.uSpacingPx,
    known: spacing.known,
    dof: spacing.dof,
    sensitivity: airNm / spacing.spacingPx,
  };
  if (scale.u === null || separation.u === null || distance.u === null) return { ...NONE, airNm, vacuumNm };
  const rows: BudgetInput[] = [
    {
      key: 'separation',
      name: 'Slit separation',
      symbol: 'd',
      value: separation.value,
      unit: 'µm',
      u: separation.u,
      known: separation.known ?? 'as stated',
      dof: separation.dof ?? null,
      sensitivity: airNm / separation.value,
    },
    {
      key: 'distance',
      name: 'Distance',
      symbol: 'L',
      value: distance.value,
      unit: 'mm',
      u: distance.u,
      known: distance.known ?? 'as stated',
      dof: distance.dof ?? null,
      sensitivity: -airNm / distance.value,
    },
    {
      key: 'scale',
      name: 'Pixel scale',
      symbol: 's',
      value: scale.value,
      unit: 'µm/px',
      u: scale.u,
      known: scale.known ?? 'as stated',
      dof: scale.dof ?? null,
      sensitivity: airNm / scale.value,
    },
    fit,
  ];
  if (setup.remountNm)
    rows.push({
      key: 'remount',
      name: 'Re-mount',
      symbol: '',
      value: null,
      unit: 'nm',
      u: setup.remountNm.u,
      known: 'pooled repeats',
      dof: setup.remountNm.dof,
      sensitivity: 1,
    });
  for (const e of effects)
    rows.push({
      key: e.key,
      name: e.name,
      symbol: e.symbol,
      value: null,
      unit: 'nm',
      u: e.uNm,
      known: e.known,
      dof: null,
      sensitivity: 1,
    });
  const combined = combineBudget(rows);
  return {
    airNm,
    vacuumNm,
    uNm: combined.uNm,
    expandedNm: combined.expandedNm,
    k: combined.k,
    dof: combined.dof,
    budget: combined.rows,
  };
}
