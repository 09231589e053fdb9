import type { SetupDecision } from '@/lib/domain/setup';
import type { StatedValue } from '@/lib/domain/views';
import { formatNumber, groupThousands, placesFor } from '@/lib/quantity/format';

/** "± 0.31 µm, k = 2", "limits ± 0.30 mm, rectangular", "± 0.08 µm, type A, ν = 7". */
export function statedText(value: StatedValue, unit: string): string {
  const amount = `± ${formatNumber(value.stated, placesFor(value.stated))} ${unit}`;
  const freedom =
    value.dof === null ? '' : `, ν = ${formatNumber(value.dof, Number.isInteger(value.dof) ? 0 : 1)}`;
  if (value.shape === 'rectangular') return `limits ${amount}, rectangular${freedom}`;
  if (value.shape === 'type-a') return `${amount}, type A${freedom}`;
  return `${amount}, k = ${groupThousands(String(value.k))}${freedom}`;
}

/** "Camera C-100, serial 4711, 12 bit", or '' where nothing is stated. */
export function cameraText(camera: { model: string; serial: string; bits: number | null }): string {
  const parts = [
    camera.model,
    camera.serial ? `serial ${camera.serial}` : '',
    camera.bits === null ? '' : `${camera.bits} bit`,
  ].filter(Boolean);
  return parts.join(', ');
}

export const DECISION_WORDS: Record<SetupDecision, string> = {
  approved: 'approved',
  declined: 'declined',
  'taken-back': 'taken back',
};
