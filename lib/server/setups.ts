import 'server-only';
import { daysUntil, dueWord } from '@/lib/domain/due';
import type { Estimate, SetupValues, ToneChoice } from '@/lib/domain/reading-result';
import type { UncertaintyShape } from '@/lib/domain/setup';
import type { BenchFitness } from '@/lib/domain/views';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';

/** One value as its columns hold it. */
export interface StatedColumns {
  value: number;
  stated: number;
  shape: UncertaintyShape;
  k: number;
  dof: number | null;
  certificate: string;
  /** SHA-256 of the certificate in the store. */
  file: string | null;
  due: string | null;
}

type Prefixed<Name extends string> = {
  [Part in Exclude<keyof StatedColumns, 'value'> as `${Name}${Capitalize<Part>}`]: StatedColumns[Part];
};

/** The columns of a setup that say what the bench is. */
export type SetupConstants = Prefixed<'scale'> &
  Prefixed<'separation'> &
  Prefixed<'width'> &
  Prefixed<'distance'> & {
    plate: string;
    scaleUmPerPx: number;
    separationUm: number;
    widthUm: number;
    distanceMm: number;
    remountUNm: number | null;
    remountDof: number | null;
    tone: ToneChoice;
  };

/** A value with its standard uncertainty. */
export type KnownValue = StatedColumns & { u: number };

export interface FourValues {
  scaleUmPerPx: KnownValue;
  separationUm: KnownValue;
  widthUm: KnownValue;
  distanceMm: KnownValue;
}

export function fourValues(row: SetupConstants): FourValues {
  const one = (name: 'scale' | 'separation' | 'width' | 'distance', value: number): KnownValue => {
    const stated = row[`${name}Stated`];
    const k = row[`${name}K`];
    return {
      value,
      stated,
      shape: row[`${name}Shape`],
      k,
      dof: row[`${name}Dof`],
      u: stated / k,
      certificate: row[`${name}Certificate`],
      file: row[`${name}File`],
      due: row[`${name}Due`],
    };
  };
  return {
    scaleUmPerPx: one('scale', row.scaleUmPerPx),
    separationUm: one('separation', row.separationUm),
    widthUm: one('width', row.widthUm),
    distanceMm: one('distance', row.distanceMm),
  };
}

/** How an uncertainty is known, as the budget says it. */
function knownAs({ shape, k, dof }: StatedColumns): string {
  const freedom = dof === null ? '' : `, ν = ${formatNumber(dof, Number.isInteger(dof) ? 0 : 1)}`;
  if (shape === 'rectangular') return `rectangular${freedom}`;
  return shape === 'type-a' ? `type A${freedom}` : `k = ${k}${freedom}`;
}

/** The setup as the engine takes it. */
export function setupValues(row: SetupConstants): SetupValues {
  const estimate = (known: KnownValue): Estimate => ({
    value: known.value,
    u: known.u,
    known: `${known.certificate || 'as entered'}, ${knownAs(known)}`,
    dof: known.dof,
    ...(known.shape === 'rectangular' ? { shape: 'rectangular' as const } : {}),
  });
  const four = fourValues(row);
  return {
    scaleUmPerPx: estimate(four.scaleUmPerPx),
    separationUm: estimate(four.separationUm),
    widthUm: estimate(four.widthUm),
    distanceMm: estimate(four.distanceMm),
    ...(row.remountUNm !== null ? { remountNm: { u: row.remountUNm, dof: row.remountDof } } : {}),
  };
}

/** Days until the first due date of a setup, negative when overdue; null when nothing is ever due. */
export function daysUntilDue(row: SetupConstants, at: Date): number | null {
  const dues = [row.scaleDue, row.separationDue, row.widthDue, row.distanceDue].filter((due) => due !== null);
  if (!dues.length) return null;
  return Math.min(...dues.map((due) => daysUntil(due, at)));
}

const days = (n: number): string => `${n} ${n === 1 ? 'day' : 'days'}`;

/** Is the bench fit for use today? */
export function fitnessOf(row: SetupConstants | null, at: Date, plateIsOn: boolean): BenchFitness {
  if (!row) return { word: 'stop', text: 'no setup in force' };
  if (!plateIsOn) return { word: 'stop', text: `plate ${row.plate} is off: take, not accept` };
  const left = daysUntilDue(row, at);
  if (left === null) return { word: 'clear', text: 'in force, nothing due' };
  if (left < 0) return { word: 'stop', text: `overdue ${days(-left)}: take, not accept` };
  if (left === 0) return { word: 'look', text: 'due today' };
  return { word: dueWord(left), text: `due in ${days(left)}` };
}

const NAMES = [
  ['scaleUmPerPx', 'pixel scale', 'µm/px'],
  ['separationUm', 'slit separation', 'µm'],
  ['widthUm', 'slit width', 'µm'],
  ['distanceMm', 'distance', 'mm'],
] as const;

/** What changed from the setup before, in words, and whether more than both uncertainties explain. */
export function changeBetween(
  before: SetupConstants | null,
  now: SetupConstants,
): { change: string; changeIsLook: boolean } {
  if (!before) return { change: '', changeIsLook: false };
  const was = fourValues(before);
  const is = fourValues(now);
  const parts: string[] = [];
  let changeIsLook = false;
  if (before.plate !== now.plate) parts.push(`plate ${before.plate} to ${now.plate}`);
  for (const [key, name, unit] of NAMES) {
    const step = is[key].value - was[key].value;
    if (step !== 0) {
      const from = formatQuantity(was[key].value, 2 * was[key].u).value;
      const to = formatQuantity(is[key].value, 2 * is[key].u).value;
      parts.push(`${name} ${from} became ${to} ${unit}`);
    }
    // Another plate has another separation and width by right; they are not compared.
    const sameThing = before.plate === now.plate || key === 'scaleUmPerPx' || key === 'distanceMm';
    if (sameThing && Math.abs(step) > 2 * Math.hypot(was[key].u, is[key].u)) changeIsLook = true;
  }
  return { change: parts.join(', ') || 'the same values, entered again', changeIsLook };
}
