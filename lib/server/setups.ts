import 'server-only';
import type { Estimate, SetupValues, ToneChoice } from '@/lib/domain/reading-result';
import type { BenchFitness, StatedValue } from '@/lib/domain/views';
import { formatQuantity } from '@/lib/quantity/format';

/** The columns of a setup that say what the bench is. */
export interface SetupConstants {
  plate: string;
  scaleUmPerPx: number;
  scaleStated: number;
  scaleK: number;
  scaleCertificate: string;
  scaleDue: string | null;
  separationUm: number;
  separationStated: number;
  separationK: number;
  separationCertificate: string;
  separationDue: string | null;
  widthUm: number;
  widthStated: number;
  widthK: number;
  widthCertificate: string;
  widthDue: string | null;
  distanceMm: number;
  distanceStated: number;
  distanceK: number;
  distanceCertificate: string;
  distanceDue: string | null;
  remountUNm: number | null;
  remountDof: number | null;
  tone: ToneChoice;
}

export interface FourValues {
  scaleUmPerPx: StatedValue;
  separationUm: StatedValue;
  widthUm: StatedValue;
  distanceMm: StatedValue;
}

export function fourValues(row: SetupConstants): FourValues {
  const one = (
    value: number,
    stated: number,
    k: number,
    certificate: string,
    due: string | null,
  ): StatedValue => ({
    value,
    stated,
    k,
    u: stated / k,
    certificate,
    due,
  });
  return {
    scaleUmPerPx: one(row.scaleUmPerPx, row.scaleStated, row.scaleK, row.scaleCertificate, row.scaleDue),
    separationUm: one(
      row.separationUm,
      row.separationStated,
      row.separationK,
      row.separationCertificate,
      row.separationDue,
    ),
    widthUm: one(row.widthUm, row.widthStated, row.widthK, row.widthCertificate, row.widthDue),
    distanceMm: one(
      row.distanceMm,
      row.distanceStated,
      row.distanceK,
      row.distanceCertificate,
      row.distanceDue,
    ),
  };
}

/** The setup as the engine takes it. */
export function setupValues(row: SetupConstants): SetupValues {
  const estimate = ({ value, u, certificate, k }: StatedValue): Estimate => ({
    value,
    u,
    known: `${certificate || 'as entered'}, k = ${k}`,
    dof: null,
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

/** Days before a due date from which a bench asks for attention. */
const DUE_SOON_DAYS = 30;

/** Days until the first due date of a setup, negative when overdue; null when nothing is ever due. */
export function daysUntilDue(row: SetupConstants, at: Date): number | null {
  const dues = [row.scaleDue, row.separationDue, row.widthDue, row.distanceDue].filter((due) => due !== null);
  if (!dues.length) return null;
  const today = Date.parse(at.toISOString().slice(0, 10));
  return Math.min(...dues.map((due) => Math.round((Date.parse(due) - today) / 86_400_000)));
}

const days = (n: number): string => `${n} ${n === 1 ? 'day' : 'days'}`;

/** Is the bench fit for use today? */
export function fitnessOf(row: SetupConstants | null, at: Date): BenchFitness {
  if (!row) return { word: 'stop', text: 'no setup yet' };
  const left = daysUntilDue(row, at);
  if (left === null) return { word: 'clear', text: 'in force, nothing due' };
  if (left < 0) return { word: 'stop', text: `overdue ${days(-left)}: take, not accept` };
  if (left === 0) return { word: 'look', text: 'due today' };
  return { word: left <= DUE_SOON_DAYS ? 'look' : 'clear', text: `due in ${days(left)}` };
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
