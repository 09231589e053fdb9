import type { BudgetRow, SetupValues } from '@/lib/domain/reading-result';
import type { FitResult } from '@/lib/domain/scan-result';
import { STANDARD_BENCH_AIR, airFromVacuum } from './air-index';
import { combineBudget, type BudgetInput } from './budget';
import { valueIn } from './value-in';

/** A length of a slit plate in µm with its budget; contributions are in µm as well. */
export interface SlitLength {
  valueUm: number;
  uUm: number;
  expandedUm: number;
  k: number;
  dof: number | null;
  budget: BudgetRow[];
}

/** The same against what the setup states of the plate. */
export interface AgainstPlate {
  deviationUm: number;
  /** U of the deviation, both uncertainties in it. */
  expandedUm: number;
  inside: boolean;
}

export interface SlitPlate {
  separation: SlitLength;
  /** Null where this frame says nothing of the width, or a check stops it. */
  width: SlitLength | null;
  separationAgainst: AgainstPlate | null;
  widthAgainst: AgainstPlate | null;
}

/** The known light: published in vacuum, nm. */
export interface KnownSource {
  vacuumNm: number;
  uNm: number;
}

/**
 * The plate from a frame of a known source: d = λ·L/(s·Λ) with λ in the air of the bench, w = (w/d)·d.
 *
 * All relative uncertainties of the wavelength but that of the separation carry over as they are, that of the published value
 * joins them. Null where the frame gives no wavelength or the setup states no uncertainty.
 */
export function slitPlate(result: FitResult, setup: SetupValues, source: KnownSource): SlitPlate | null {
  const measured = valueIn(result, { setup, specification: null });
  const { separationUm: stated } = setup;
  if (!stated || result.wavelengthNm === null || measured.valueNm === null || !measured.budget.length)
    return null;
  const publishedNm = airFromVacuum(source.vacuumNm, setup.air ?? STANDARD_BENCH_AIR);
  // λ = d·s·Λ/L was worked out with the stated d, so L/(s·Λ) is that d over that λ.
  const separationUm = (publishedNm * stated.value) / result.wavelengthNm;
  const perNm = separationUm / measured.valueNm;
  const rows: BudgetInput[] = [
    ...measured.budget
      .filter(({ key }) => key !== 'separation')
      .map((row) => ({ ...row, sensitivity: -row.sensitivity * perNm })),
    {
      key: 'published',
      name: 'Published wavelength',
      symbol: 'λ',
      value: publishedNm,
      unit: 'nm',
      u: source.uNm,
      known: 'as published',
      dof: null,
      sensitivity: separationUm / publishedNm,
    },
  ];
  const separation = lengthOf(separationUm, rows);
  const width = widthOf(result, separationUm, rows);
  return {
    separation,
    width,
    separationAgainst: against(separation, stated),
    widthAgainst: width && setup.widthUm ? against(width, setup.widthUm) : null,
  };
}

function lengthOf(valueUm: number, rows: readonly BudgetInput[]): SlitLength {
  const { rows: budget, uNm: uUm, expandedNm: expandedUm, k, dof } = combineBudget(rows);
  return { valueUm, uUm, expandedUm, k, dof, budget };
}

function widthOf(
  { slit, words }: FitResult,
  separationUm: number,
  rows: readonly BudgetInput[],
): SlitLength | null {
  if (!slit || words?.width === 'stop') return null;
  const { ratio, uRatio, dof } = slit;
  return lengthOf(ratio * separationUm, [
    ...rows.map((row) => ({ ...row, sensitivity: row.sensitivity * ratio })),
    {
      key: 'ratio',
      name: 'Width over separation',
      symbol: 'w/d',
      value: ratio,
      unit: '',
      u: uRatio,
      known: 'type A, fit of the envelope',
      dof,
      sensitivity: separationUm,
    },
  ]);
}

/** Deviation from what is stated, inside while no larger than U of both (k of the measured one). */
function against(
  { valueUm, uUm, k }: SlitLength,
  stated: { value: number; u: number | null },
): AgainstPlate | null {
  if (stated.u === null) return null;
  const deviationUm = valueUm - stated.value;
  const expandedUm = k * Math.hypot(uUm, stated.u);
  return { deviationUm, expandedUm, inside: Math.abs(deviationUm) <= expandedUm };
}
