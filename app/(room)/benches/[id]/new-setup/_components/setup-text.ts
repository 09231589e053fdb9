/** The form of a new setup as text, and what can be said about it before it is sent. */
import type { z } from 'zod';
import { parseMaybe, parseNumber } from '@/lib/client/use-submit';
import type { setupSchema } from '@/lib/domain/schemas';
import { SCALE_WORDS, type ScaleReading } from '@/lib/domain/scale-result';
import type { SetupView, StatedValue } from '@/lib/domain/views';
import { formatNumber, formatPercent, formatQuantity, placesFor } from '@/lib/quantity/format';
import { SETUP_VALUES, type ValueKey } from '../../../_components/setup-values';

export interface ValueText {
  value: string;
  stated: string;
  k: string;
  certificate: string;
  due: string;
}

export interface SetupText {
  plate: string;
  values: Record<ValueKey, ValueText>;
  remountU: string;
  remountDof: string;
  tone: 'auto' | 'linear' | 'srgb';
  why: string;
}

export type SetupInput = z.input<typeof setupSchema>;

const EMPTY: ValueText = { value: '', stated: '', k: '2', certificate: '', due: '' };

function textOf(value: StatedValue): ValueText {
  return {
    value: String(value.value),
    stated: String(value.stated),
    k: String(value.k),
    certificate: value.certificate,
    due: value.due ?? '',
  };
}

/** Starts from the setup before, since usually one value changes. */
export function startText(before: SetupView | null): SetupText {
  return {
    plate: before?.plate ?? '',
    values: {
      separationUm: before ? textOf(before.separationUm) : EMPTY,
      widthUm: before ? textOf(before.widthUm) : EMPTY,
      distanceMm: before ? textOf(before.distanceMm) : EMPTY,
      scaleUmPerPx: before ? textOf(before.scaleUmPerPx) : EMPTY,
    },
    remountU: before?.remountNm ? String(before.remountNm.u) : '',
    remountDof: before?.remountNm?.dof == null ? '' : String(before.remountNm.dof),
    tone: before?.tone ?? 'auto',
    why: '',
  };
}

export function inputOf(benchId: number, before: SetupView | null, text: SetupText): SetupInput {
  const stated = (value: ValueText) => ({
    value: parseNumber(value.value),
    stated: parseNumber(value.stated),
    k: parseNumber(value.k),
    certificate: value.certificate,
    due: value.due === '' ? null : value.due,
  });
  const remount = parseMaybe(text.remountU);
  return {
    benchId,
    afterNumber: before?.number ?? 0,
    plate: text.plate,
    scaleUmPerPx: stated(text.values.scaleUmPerPx),
    separationUm: stated(text.values.separationUm),
    widthUm: stated(text.values.widthUm),
    distanceMm: stated(text.values.distanceMm),
    remountNm: remount === null ? null : { u: remount, dof: parseMaybe(text.remountDof) },
    tone: text.tone,
    why: text.why,
  };
}

/** The pixel scale's fields from a photographed scale; the certificate names the stored picture by its fingerprint. */
export function scaleText({ scale, sha256 }: ScaleReading, before: ValueText): ValueText {
  const places = placesFor(2 * scale.uScaleUmPerPx) + 1;
  const what = scale.kind === 'lines' ? 'lines' : 'corners';
  return {
    ...before,
    value: scale.scaleUmPerPx.toFixed(places),
    stated: (2 * scale.uScaleUmPerPx).toFixed(places),
    k: '2',
    certificate: `${SCALE_WORDS[scale.kind]} photographed, ${scale.points.length} ${what} ${scale.pitchMm} mm apart, picture ${sha256.slice(0, 16)}`,
  };
}

/** Ratios that come from writing a value in the wrong unit. */
const SLIPS: readonly [number, string][] = [
  [1000, '1000 times the one before: a wrong unit?'],
  [0.001, 'a thousandth of the one before: a wrong unit?'],
  [10, 'ten times the one before: a slipped point?'],
  [0.1, 'a tenth of the one before: a slipped point?'],
  [25.4, '25.4 times the one before: inches?'],
  [1 / 25.4, 'the one before over 25.4: inches?'],
];
const SLIP_SLACK = 0.03;
/** A change larger than this share of the value is worth a second look. */
const MUCH = 0.005;

/** What looks odd about a value beside its predecessor, or ''. */
export function hintOf(unit: string, text: ValueText, before: StatedValue | null): string {
  const value = parseNumber(text.value);
  const stated = parseNumber(text.stated);
  if (stated >= value) return 'The ± is as large as the value itself.';
  if (!before || !Number.isFinite(value) || value <= 0) return '';
  const ratio = value / before.value;
  const slip = SLIPS.find(([of]) => Math.abs(ratio / of - 1) < SLIP_SLACK);
  if (slip) return `This is ${slip[1]}`;
  if (Math.abs(ratio - 1) > MUCH) {
    return `This is ${formatPercent(Math.abs(ratio - 1))} ${ratio > 1 ? 'more' : 'less'} than the ${formatNumber(before.value, 3)} ${unit} before. Check it; if it is right, it can be entered.`;
  }
  return '';
}

/** Another plate has another separation and width by right; they are not compared. */
const ofPlate = (key: ValueKey) => key === 'separationUm' || key === 'widthUm';

function insideWords(inside: boolean | null): string {
  if (inside === null) return ' with the plate';
  return inside ? ': within both ± together' : ': more than both ± together, which stands as a look';
}

/** What the new setup changes, in words, one line a value. */
export function changesOf(text: SetupText, before: SetupView | null): string[] {
  if (!before) return [];
  const newPlate = text.plate.trim() !== before.plate;
  const lines = SETUP_VALUES.flatMap(({ key, name, unit }) => {
    const now = text.values[key];
    const was = before[key];
    const value = parseNumber(now.value);
    const u = parseNumber(now.stated) / parseNumber(now.k);
    if (!Number.isFinite(value) || !Number.isFinite(u)) return [];
    if (value === was.value && Math.abs(u - was.u) < 1e-12) return [];
    const from = formatQuantity(was.value, 2 * was.u);
    const to = formatQuantity(value, 2 * u);
    const inside = newPlate && ofPlate(key) ? null : Math.abs(value - was.value) <= 2 * Math.hypot(u, was.u);
    return [
      `${name} ${from.value} ± ${from.uncertainty} becomes ${to.value} ± ${to.uncertainty} ${unit}${insideWords(inside)}.`,
    ];
  });
  const plate = text.plate.trim() && newPlate ? [`Plate ${before.plate} becomes ${text.plate.trim()}.`] : [];
  return [...plate, ...lines];
}
