/** The form of a new setup as text, and what can be said about it before it is sent. */
import type { z } from 'zod';
import {
  certificateInput,
  confirmedInput,
  NO_CERTIFICATE,
  NO_VALUE,
  statedInput,
  textOfStated,
  type CertificateText,
  type StatedText,
} from '@/components/setups/stated-text';
import { parseMaybe, parseNumber } from '@/lib/client/use-submit';
import { divisorOf, SETUP_VALUES, type ValueKey } from '@/lib/domain/setup';
import { oddness } from '@/lib/domain/setup-plausibility';
import type { setupSchema } from '@/lib/domain/setup-schemas';
import { SCALE_WORDS, type ScaleReading } from '@/lib/domain/scale-result';
import type { PlateView, SetupView, StatedValue } from '@/lib/domain/views';
import { formatQuantity, placesFor } from '@/lib/quantity/format';

/** What is entered with a setup; separation and width come with the plate. */
export const BENCH_VALUES = ['distanceMm', 'scaleUmPerPx'] as const satisfies readonly ValueKey[];
export type BenchValue = (typeof BENCH_VALUES)[number];

export type ValueText = StatedText & CertificateText;

/** From when: with the approval; later, as a date-and-time field has it; or the moment a setup of the past began. */
export interface FromText {
  kind: 'approval' | 'later' | 'correction';
  at: string;
}

export interface SetupText {
  from: FromText;
  plateId: number | null;
  values: Record<BenchValue, ValueText>;
  remountU: string;
  remountDof: string;
  tone: 'auto' | 'linear' | 'srgb';
  cameraModel: string;
  cameraSerial: string;
  cameraBits: string;
  why: string;
}

export type SetupInput = z.input<typeof setupSchema>;

function textOf(value: StatedValue | undefined): ValueText {
  if (!value) return { ...NO_VALUE, ...NO_CERTIFICATE };
  const { certificate, file, due } = value;
  return { ...textOfStated(value), certificate, file, due: due ?? '' };
}

/** The setup the values are compared with: the one in force, or the one that was at the moment of a correction. */
export function besideOf(
  text: SetupText,
  setups: readonly SetupView[],
  inForce: SetupView | null,
): SetupView | null {
  if (text.from.kind !== 'correction') return inForce;
  return setups.find(({ from }) => from <= text.from.at) ?? inForce;
}

/** Starts from the setup in force, since usually one value changes. */
export function startText(before: SetupView | null): SetupText {
  return {
    from: { kind: 'approval', at: '' },
    plateId: before?.plateId ?? null,
    values: { distanceMm: textOf(before?.distanceMm), scaleUmPerPx: textOf(before?.scaleUmPerPx) },
    remountU: before?.remountNm ? String(before.remountNm.u) : '',
    remountDof: before?.remountNm?.dof == null ? '' : String(before.remountNm.dof),
    tone: before?.tone ?? 'auto',
    cameraModel: before?.camera.model ?? '',
    cameraSerial: before?.camera.serial ?? '',
    cameraBits: before?.camera.bits == null ? '' : String(before.camera.bits),
    why: '',
  };
}

export function inputOf(
  benchId: number,
  lastNumber: number,
  text: SetupText,
  plate: PlateView | undefined,
): SetupInput {
  const { distanceMm, scaleUmPerPx } = text.values;
  const remount = parseMaybe(text.remountU);
  return {
    benchId,
    afterNumber: lastNumber,
    inForceFrom: text.from.kind === 'approval' ? null : new Date(text.from.at).toISOString(),
    plateId: plate?.id ?? 0,
    plateCertificateId: plate?.certificates[0].id ?? 1,
    distanceMm: { ...statedInput(distanceMm), ...certificateInput(distanceMm) },
    scaleUmPerPx: { ...statedInput(scaleUmPerPx), ...certificateInput(scaleUmPerPx) },
    confirmed: {
      distanceMm: confirmedInput(distanceMm),
      scaleUmPerPx: confirmedInput(scaleUmPerPx),
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

/** What looks odd about a value beside the setup in force, or null. */
export function hintOf(key: BenchValue, text: SetupText, before: SetupView | null): string | null {
  return oddness(key, parseNumber(text.values[key].value), before?.[key].value ?? null);
}

function insideWords(inside: boolean | null): string {
  if (inside === null) return ' with the plate';
  return inside ? ': within both ± together' : ': more than both ± together, which stands as a look';
}

/** What the new setup changes, in words, one line a value. */
export function changesOf(text: SetupText, plate: PlateView | undefined, before: SetupView | null): string[] {
  if (!before) return [];
  const newPlate = plate !== undefined && plate.id !== before.plateId;
  const now = (key: ValueKey): { value: number; u: number } | null => {
    if (key === 'separationUm' || key === 'widthUm') return plate?.certificates[0][key] ?? null;
    const { value, stated, shape, k } = statedInput(text.values[key]);
    return { value, u: stated / divisorOf(shape, k) };
  };
  const lines = SETUP_VALUES.flatMap(({ key, name, unit }) => {
    const is = now(key);
    const was = before[key];
    if (!is || !Number.isFinite(is.value) || !Number.isFinite(is.u)) return [];
    if (is.value === was.value && Math.abs(is.u - was.u) < 1e-12) return [];
    const from = formatQuantity(was.value, 2 * was.u);
    const to = formatQuantity(is.value, 2 * is.u);
    const ofPlate = newPlate && (key === 'separationUm' || key === 'widthUm');
    const inside = ofPlate ? null : Math.abs(is.value - was.value) <= 2 * Math.hypot(is.u, was.u);
    return [
      `${name} ${from.value} ± ${from.uncertainty} becomes ${to.value} ± ${to.uncertainty} ${unit}${insideWords(inside)}.`,
    ];
  });
  return newPlate ? [`Plate ${before.plate} becomes ${plate.name}.`, ...lines] : lines;
}
