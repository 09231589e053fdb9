/** What looks odd about a value of a setup: not wrong by itself, but to be confirmed with a reason. */
import { formatNumber, formatPercent } from '@/lib/quantity/format';
import { SETUP_VALUES, type ValueKey } from './setup';

/** A change larger than this share of the value before is to be confirmed. */
export const MUCH = 0.005;

/** Ratios that come from writing a value in the wrong unit. */
const SLIPS: readonly [ratio: number, words: string][] = [
  [1000, '1000 times the one before: a wrong unit?'],
  [1e-3, 'a thousandth of the one before: a wrong unit?'],
  [10, 'ten times the one before: a slipped point?'],
  [0.1, 'a tenth of the one before: a slipped point?'],
  [25.4, '25.4 times the one before: inches?'],
  [1 / 25.4, 'the one before over 25.4: inches?'],
];
const SLIP_SLACK = 0.03;

/** From the flange of a C-mount camera to its sensor, mm (common practice, no source), and how closely it is met. */
const FLANGE_MM = 17.526;
const FLANGE_SLACK_MM = 0.2;

/** Benches lie within these by far; a first setup has nothing else to be compared with. */
const USUAL: Record<ValueKey, readonly [from: number, to: number]> = {
  separationUm: [5, 5000],
  widthUm: [1, 1000],
  distanceMm: [20, 20_000],
  scaleUmPerPx: [0.5, 1000],
};

/**
 * One sentence on what looks odd about `value` beside the one before it (null where there is none to compare with), or
 * null when nothing does. Both in the unit of the value; not numbers, or not above 0, say nothing here.
 */
export function oddness(key: ValueKey, value: number, before: number | null): string | null {
  if (!Number.isFinite(value) || value <= 0) return null;
  const { unit } = SETUP_VALUES.find((spec) => spec.key === key)!;
  if (before === null) {
    const [from, to] = USUAL[key];
    if (value >= from && value <= to) return null;
    return `Benches of this kind lie between ${formatNumber(from, from < 1 ? 1 : 0)} and ${formatNumber(to, 0)} ${unit}: a wrong unit?`;
  }
  const ratio = value / before;
  const slip = SLIPS.find(([of]) => Math.abs(ratio / of - 1) < SLIP_SLACK);
  if (slip) return `This is ${slip[1]}`;
  const step = value - before;
  if (key === 'distanceMm' && Math.abs(Math.abs(step) - FLANGE_MM) < FLANGE_SLACK_MM) {
    return `This is ${formatNumber(Math.abs(step), 1)} mm ${step < 0 ? 'less' : 'more'} than before: as far as from a camera’s flange to its sensor. Was it measured to the flange?`;
  }
  if (Math.abs(ratio - 1) <= MUCH) return null;
  return `This is ${formatPercent(Math.abs(ratio - 1))} ${ratio > 1 ? 'more' : 'less'} than the ${formatNumber(before, 3)} ${unit} before.`;
}
