import type { BudgetRow, Estimate, SetupValues, Shape } from '@/lib/domain/reading-result';
import { vacuumFromAir } from '@/lib/quantity/air-index';
import { combineBudget, type BudgetInput } from '@/lib/quantity/budget';
import { uOfHalfWidth } from '@/lib/quantity/monte-carlo';
import { nearFieldRelative, wavelengthFromSpacing } from '@/lib/quantity/two-slit';

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
  shape?: Shape;
  dof?: number | null;
}

/** Effect of a colour sensor's missing sites, from simulation: 0.128 / (px per fringe)^2 of the wavelength. */
export function demosaicRelative(spacingPx: number): number {
  return 0.128 / (spacingPx * spacingPx);
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
      uNm: uOfHalfWidth(airNm * nearFieldRelative(width.value, airNm, distance.value), 'rectangular'),
      known: 'rectangular, far-field formula',
    });
  if (picture.source.colour)
    effects.push({
      key: 'demosaic',
      name: 'Colour sensor',
      symbol: '',
      uNm: uOfHalfWidth(airNm * demosaicRelative(spacingPx), 'rectangular'),
      known: 'rectangular, filled-in pixels',
    });
  return effects;
}

/**
 * A plate turned by psi makes the effective separation d cos(psi), so the wavelength reads high by lambda psi^2/2, to one side
 * only. It is entered as lambda psi^2/(2 sqrt 3), a rectangle of the whole effect on both sides, without a correction.
 */
export function plateYawU(airNm: number, yawDeg: number): number {
  const yaw = (yawDeg * Math.PI) / 180;
  return uOfHalfWidth((airNm * yaw * yaw) / 2, 'rectangular');
}

/** What the bench states beside its constants. */
function benchEffects(setup: SetupValues, airNm: number): FrameEffect[] {
  const effects: FrameEffect[] = [];
  if (setup.plateYawDeg)
    effects.push({
      key: 'plate-yaw',
      name: 'Plate yaw',
      symbol: '',
      uNm: plateYawU(airNm, setup.plateYawDeg),
      known: `within ${setup.plateYawDeg}°, one-sided, rectangular`,
      shape: 'rectangular',
    });
  for (const { key, name, uPpm, known, shape, dof } of setup.effects ?? [])
    effects.push({ key, name, symbol: '', uNm: airNm * uPpm * 1e-6, known, shape, dof });
  return effects;
}

/** A constant of the setup as a row; a factor (power 1) or a divisor (-1) of the wavelength. */
function constantRow(
  about: Pick<BudgetInput, 'key' | 'name' | 'symbol' | 'unit'>,
  { value, u, known, dof, shape }: Estimate & { u: number },
  airNm: number,
  power: 1 | -1,
): BudgetInput {
  const { key, name, symbol, unit } = about;
  return {
    key,
    name,
    symbol,
    value,
    unit,
    u,
    known: known ?? 'as stated',
    dof: dof ?? null,
    sensitivity: (power * airNm) / value,
    ...(shape ? { shape } : {}),
  };
}

function effectRow({ key, name, symbol, uNm, known, shape, dof }: FrameEffect): BudgetInput {
  return {
    key,
    name,
    symbol,
    value: null,
    unit: 'nm',
    u: uNm,
    known,
    dof: dof ?? null,
    sensitivity: 1,
    ...(shape ? { shape } : {}),
  };
}

const isKnown = (estimate: Estimate): estimate is Estimate & { u: number } => estimate.u !== null;

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
  if (!isKnown(scale) || !isKnown(separation) || !isKnown(distance)) return { ...NONE, airNm, vacuumNm };
  const rows: BudgetInput[] = [
    constantRow(
      { key: 'separation', name: 'Slit separation', symbol: 'd', unit: 'µm' },
      separation,
      airNm,
      1,
    ),
    constantRow({ key: 'distance', name: 'Distance', symbol: 'L', unit: 'mm' }, distance, airNm, -1),
    constantRow({ key: 'scale', name: 'Pixel scale', symbol: 's', unit: 'µm/px' }, scale, airNm, 1),
    fit,
  ];
  if (setup.remountNm) {
    const { u: uNm, dof } = setup.remountNm;
    rows.push(effectRow({ key: 'remount', name: 'Re-mount', symbol: '', uNm, known: 'pooled repeats', dof }));
  }
  rows.push(...[...benchEffects(setup, airNm), ...effects].map(effectRow));
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
