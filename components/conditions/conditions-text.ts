import { CONDITIONS_HOLD_HOURS, airOf, type Conditions } from '@/lib/domain/conditions';
import type { Estimate, MeasuredAir } from '@/lib/domain/reading-result';
import { STANDARD_BENCH_AIR, airIndex, airIndexU } from '@/lib/quantity/air-index';
import { formatIndex, formatNumber, formatQuantity } from '@/lib/quantity/format';

/** "21.4 °C, 1 008.2 hPa, 45 %, 450 ppm: n = 1.000 268 5". */
export function airText(air: MeasuredAir, atNm: number): string {
  const state = [
    `${formatNumber(air.temperatureC, 1)} °C`,
    `${formatNumber(air.pressurePa / 100, 1)} hPa`,
    `${formatNumber(air.humidityPercent, 0)} %`,
    `${formatNumber(air.co2Ppm, 0)} ppm CO₂`,
  ].join(', ');
  return `${state}: n\u00a0=\u00a0${formatIndex(airIndex(atNm, air), airIndexU(atNm, air))}`;
}

/** What a value without a measured state means. */
export const STANDARD_AIR_TEXT = `${STANDARD_BENCH_AIR.temperatureC} °C, ${formatNumber(STANDARD_BENCH_AIR.pressurePa / 100, 2)} hPa, ${STANDARD_BENCH_AIR.humidityPercent} %, ${STANDARD_BENCH_AIR.co2Ppm} ppm CO₂ (none entered)`;

export function temperatureText({ value, u }: Estimate): string {
  if (!u) return `${formatNumber(value, 1)} °C`;
  const text = formatQuantity(value, u);
  return `${text.value} °C, u = ${text.uncertainty} °C`;
}

/** One line for what was entered. */
export function enteredText(c: Conditions, atNm: number): string {
  const air = airOf(c);
  const unit = c.sourceTemperatureC;
  return [
    air ? `Air ${airText(air, atNm)}.` : '',
    unit ? `Unit at ${formatNumber(unit.value, 1)} ± ${formatNumber(unit.half, 1)} °C.` : '',
  ]
    .filter(Boolean)
    .join(' ');
}

export const HOLDS = `Holds for ${CONDITIONS_HOLD_HOURS} hours, for frames received from then on.`;
