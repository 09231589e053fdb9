import type { SetupValues } from '@/lib/domain/reading-result';
import type { Method } from '@/lib/domain/specification';
import { STANDARD_BENCH_AIR, airFromVacuum, vacuumFromAir } from './air-index';
import type { BudgetInput } from './budget';
import { uOfHalfWidth } from './monte-carlo';

/** An accepted reading of a reference source on the same setup. */
export interface ReferenceReading {
  readingId: number;
  source: string;
  /** ISO 8601, when its frame was received. */
  at: string;
  /** Spacing at the zero order, in the unit of the reading it is compared with (px, or mm of a scan). */
  spacing: number;
  uSpacing: number;
  /** null is infinite. */
  dof: number | null;
  publishedVacuumNm: number;
  uPublishedNm: number;
}

/** What a reading may be compared with, and whether its value is to come from that. */
export interface ComparisonFacts {
  method: Method;
  /** ISO 8601, when the frame itself was received. */
  at: string;
  /** The nearest before and after it; one or none where there are no more. */
  references: ReferenceReading[];
  /** Scatter of mounting again, from the bench's own checks; null: the setup's. */
  remount: { uNm: number; dof: number } | null;
}

/** Wavelength in the air of the bench and in vacuum, with the rows that are left, in nm of the bench's air. */
export interface Compared {
  airNm: number;
  vacuumNm: number;
  rows: BudgetInput[];
}

/**
 * λ = λref·Λ/Λref for frames of one setup: separation, distance and pixel scale cancel. With a reference before and one after,
 * Λref/λref is taken between them in time, linearly. The published value goes into the bench's air at its own wavelength
 * first. Rows left: both fits, the published value, mounting again, a difference in the plate's yaw where the bench states one.
 * Null without a reference, or without an uncertainty of mounting again: then nothing says how well two mountings agree.
 */
export function compareWith(
  own: { spacing: number; uSpacing: number; dof: number | null; known: string; unit: 'px' | 'mm' },
  facts: ComparisonFacts,
  setup: SetupValues,
): Compared | null {
  const { references } = facts;
  const remount =
    facts.remount ?? (setup.remountNm ? { uNm: setup.remountNm.u, dof: setup.remountNm.dof } : null);
  if (references.length === 0 || remount === null) return null;
  const air = setup.air ?? STANDARD_BENCH_AIR;
  const weights = weightsOf(references, facts.at);
  const inAir = references.map(({ publishedVacuumNm }) => airFromVacuum(publishedVacuumNm, air));
  // Spacing for one nm, as the references give it.
  const perNm = references.reduce((sum, { spacing }, i) => sum + (weights[i] * spacing) / inAir[i], 0);
  const airNm = own.spacing / perNm;
  const part = (i: number) => (weights[i] * references[i].spacing) / inAir[i] / perNm;
  const rows: BudgetInput[] = [
    row({
      key: 'fit',
      name: 'Fit of the spacing',
      symbol: 'Λ',
      value: own.spacing,
      unit: own.unit,
      u: own.uSpacing,
      known: own.known,
      dof: own.dof,
      sensitivity: airNm / own.spacing,
    }),
    ...references.map((reference, i) =>
      row({
        key: `reference-fit-${i + 1}`,
        name: `Fit of ${reference.source}`,
        symbol: 'Λref',
        value: reference.spacing,
        unit: own.unit,
        u: reference.uSpacing,
        known: 'as accepted',
        dof: reference.dof,
        sensitivity: (-airNm / reference.spacing) * part(i),
      }),
    ),
    ...publishedRows(references, airNm, inAir, part),
    row({ key: 'remount', name: 'Re-mount', u: remount.uNm, known: 'pooled checks', dof: remount.dof }),
    ...yawRow(airNm, setup),
  ];
  return { airNm, vacuumNm: vacuumFromAir(airNm, air), rows };
}

function row(part: Pick<BudgetInput, 'key' | 'name' | 'u' | 'known'> & Partial<BudgetInput>): BudgetInput {
  return { symbol: '', value: null, unit: 'nm', dof: null, sensitivity: 1, ...part };
}

/** Two references of one source share its published value. */
function publishedRows(
  references: readonly ReferenceReading[],
  airNm: number,
  inAir: readonly number[],
  part: (i: number) => number,
): BudgetInput[] {
  return references.map((reference, i) =>
    row({
      key: `published-${i + 1}`,
      name: `Published value of ${reference.source}`,
      symbol: 'λref',
      value: inAir[i],
      u: reference.uPublishedNm,
      known: 'as published',
      sensitivity: (airNm / inAir[i]) * part(i),
      input: `published value of ${reference.source}`,
    }),
  );
}

function yawRow(airNm: number, { yawDifferenceDeg }: SetupValues): BudgetInput[] {
  if (!yawDifferenceDeg) return [];
  const yaw = (yawDifferenceDeg * Math.PI) / 180;
  return [
    row({
      key: 'yaw-difference',
      name: 'Difference in plate yaw',
      u: uOfHalfWidth((airNm * yaw * yaw) / 2, 'rectangular'),
      known: `within ${yawDifferenceDeg}°, rectangular`,
      shape: 'rectangular',
    }),
  ];
}

/** Linear in time between the one before and the one after; one alone counts whole. */
function weightsOf(references: readonly ReferenceReading[], at: string): number[] {
  if (references.length === 1) return [1];
  const [before, after] = references.map((reference) => Date.parse(reference.at));
  const share = after > before ? (Date.parse(at) - before) / (after - before) : 0.5;
  const bounded = Math.min(1, Math.max(0, share));
  return [1 - bounded, bounded];
}
