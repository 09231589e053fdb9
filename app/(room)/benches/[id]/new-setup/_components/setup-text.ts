/** The form of a new setup as text, and what can be said about it before it is sent. */
import type { z } from 'zod';
import { parseMaybe, parseNumber } from '@/lib/client/use-submit';
import { divisorOf, SETUP_VALUES, type UncertaintyShape, type ValueKey } from '@/lib/domain/setup';
import { oddness } from '@/lib/domain/setup-plausibility';
import type { setupSchema } from '@/lib/domain/setup-schemas';
import { SCALE_WORDS, type ScaleReading } from '@/lib/domain/scale-result';
import type { CertificateLink, SetupView, StatedValue } from '@/lib/domain/views';
import { formatQuantity, placesFor } from '@/lib/quantity/format';

export interface ValueText {
  value: string;
  stated: string;
  shape: UncertaintyShape;
  k: string;
  dof: string;
  certificate: string;
  file: CertificateLink | null;
  due: string;
  /** What looks odd is right, for this reason. */
  isRight: boolean;
  reason: string;
}

export interface SetupText {
  /** '' : as soon as it is approved; else as a date-and-time field has it. */
  from: string;
  plate: string;
  values: Record<ValueKey, ValueText>;
  remountU: string;
  remountDof: string;
  tone: 'auto' | 'linear' | 'srgb';
  cameraModel: string;
  cameraSerial: string;
  cameraBits: string;
  why: string;
}

export type SetupInput = z.input<typeof setupSchema>;

const EMPTY: ValueText = {
  value: '',
  stated: '',
  shape: 'expanded',
  k: '2',
  dof: '',
  certificate: '',
  file: null,
  due: '',
  isRight: false,
  reason: '',
};

function textOf(value: StatedValue): ValueText {
  return {
    ...EMPTY,
    value: String(value.value),
    stated: String(value.stated),
    shape: value.shape,
    k: value.shape === 'expanded' ? String(value.k) : '2',
    dof: value.dof === null ? '' : String(value.dof),
    certificate: value.certificate,
    file: value.file,
    due: value.due ?? '',
  };
}

/** Starts from the setup in force, since usually one value changes. */
export function startText(before: SetupView | null): SetupText {
  return {
    from: '',
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
    cameraModel: before?.camera.model ?? '',
    cameraSerial: before?.camera.serial ?? '',
    cameraBits: before?.camera.bits == null ? '' : String(before.camera.bits),
    why: '',
  };
}

export function inputOf(benchId: number, lastNumber: number, text: SetupText): SetupInput {
  const stated = (value: ValueText) => ({
    value: parseNumber(value.value),
    stated: parseNumber(value.stated),
    shape: value.shape,
    k: value.shape === 'expanded' ? parseNumber(value.k) : 2,
    dof: parseMaybe(value.dof),
    certificate: value.certificate,
    file: value.file?.sha256 ?? null,
    due: value.due === '' ? null : value.due,
  });
  const confirmed = (value: ValueText) => (value.isRight ? value.reason : '');
  const { scaleUmPerPx, separationUm, widthUm, distanceMm } = text.values;
  const remount = parseMaybe(text.remountU);
  return {
    benchId,
    afterNumber: lastNumber,
    inForceFrom: text.from === '' ? null : new Date(text.from).toISOString(),
    plate: text.plate,
    scaleUmPerPx: stated(scaleUmPerPx),
    separationUm: stated(separationUm),
    widthUm: stated(widthUm),
    distanceMm: stated(distanceMm),
    confirmed: {
      scaleUmPerPx: confirmed(scaleUmPerPx),
      separationUm: confirmed(separationUm),
      widthUm: confirmed(widthUm),
      distanceMm: confirmed(distanceMm),
    },
    remountNm: remount === null ? null : { u: remount, dof: parseMaybe(text.remountDof) },
    tone: text.tone,
    camera: {
      model: text.cameraModel,
      serial: text.cameraSerial,
      bits: parseMaybe(text.cameraBits),
    },
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
    shape: 'expanded',
    k: '2',
    dof: '',
    certificate: `${SCALE_WORDS[scale.kind]} photographed, ${scale.points.length} ${what} ${scale.pitchMm} mm apart, picture ${sha256.slice(0, 16)}`,
    file: null,
  };
}

/** Another plate has another separation and width by right; they are not compared. */
const ofPlate = (key: ValueKey) => key === 'separationUm' || key === 'widthUm';

/** What looks odd about a value beside the setup in force, or null. */
export function hintOf(key: ValueKey, text: SetupText, before: SetupView | null): string | null {
  const comparable =
    before && !(ofPlate(key) && text.plate.trim() !== before.plate) ? before[key].value : null;
  return oddness(key, parseNumber(text.values[key].value), comparable);
}

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
    const u = parseNumber(now.stated) / divisorOf(now.shape, parseNumber(now.k));
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
