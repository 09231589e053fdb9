/** Short texts about a unit, a lot and a specification, the same on every screen. */
import type { DecisionRule, Method, Specification } from '@/lib/domain/specification';
import type { FrameRow, Subject } from '@/lib/domain/views';
import { formatEntered, formatNumber } from '@/lib/quantity/format';

export const MEDIUM_WORDS = { air: 'air', vacuum: 'vac' } as const;

export const METHOD_WORDS: Record<Method, string> = {
  absolute: 'From the bench’s constants',
  comparison: 'Beside a reference',
};

export const RULE_WORDS: Record<DecisionRule, string> = {
  simple: 'no guard band',
  'guard-expanded': 'guard band U',
  'guard-one-sided': 'guard band 1.645 u',
  'guard-own': 'guard band of its own',
};

/** "635 ± 5 nm (air)"; one-sided and lopsided limits in words; with the temperature they hold at. */
export function nominalText(spec: Specification): string {
  const at = spec.atTemperature ? ` at ${formatEntered(spec.atTemperature.temperatureC)} °C` : '';
  return limitsText(spec) + at;
}

function limitsText(spec: Specification): string {
  const medium = MEDIUM_WORDS[spec.medium];
  const { nominalNm, lowerNm, upperNm } = spec;
  if (lowerNm === null)
    return `${formatEntered(nominalNm)}, at most ${formatEntered(upperNm ?? nominalNm)} nm (${medium})`;
  if (upperNm === null)
    return `${formatEntered(nominalNm)}, at least ${formatEntered(lowerNm)} nm (${medium})`;
  const above = upperNm - nominalNm;
  const below = nominalNm - lowerNm;
  if (Math.abs(above - below) < 1e-9)
    return `${formatEntered(nominalNm)} ± ${formatEntered(above)} nm (${medium})`;
  return `${formatEntered(nominalNm)}, ${formatEntered(lowerNm)} to ${formatEntered(upperNm)} nm (${medium})`;
}

/** The large name of a frame: the unit's serial, the source's name, or the file. */
export function subjectName(frame: Pick<FrameRow, 'subject' | 'fileName'>): string {
  const { subject } = frame;
  if (subject.kind === 'unit') return subject.serial;
  if (subject.kind === 'source') return subject.name;
  return frame.fileName;
}

/** The line under it. */
export function subjectLine(subject: Subject): string {
  if (subject.kind === 'unit') return `Lot ${subject.lot} · ${nominalText(subject.specification)}`;
  if (subject.kind === 'source') return `Reference · ${formatNumber(subject.vacuumNm, 2)} nm (vac)`;
  return 'No lot and no source';
}

export function specificationOf(subject: Subject): Specification | null {
  return subject.kind === 'unit' ? subject.specification : null;
}

/** Published wavelength in vacuum of a reference source, nm. */
export function publishedOf(subject: Subject): number | null {
  return subject.kind === 'source' ? subject.vacuumNm : null;
}

/** "0.5 mm detector", or that it is a point. */
export function detectorText(detectorMm: number | null): string {
  return detectorMm === null ? 'point detector' : `${formatEntered(detectorMm)} mm detector`;
}

export function count(n: number, one: string, many = `${one}s`): string {
  return `${formatNumber(n, 0)} ${n === 1 ? one : many}`;
}
