/** Air and temperature under which frames are taken: what is entered, and what the engine is given. */
import { z } from 'zod';
import { formatEntered } from '@/lib/quantity/format';
import type { Estimate, MeasuredAir } from './reading-result';

/** A value as somebody read it off an instrument, inside ± half. */
export interface ReadOff {
  value: number;
  half: number;
}

/** Null is not entered. */
export interface Conditions {
  airTemperatureC: ReadOff | null;
  pressurePa: ReadOff | null;
  humidityPercent: ReadOff | null;
  co2Ppm: ReadOff | null;
  sourceTemperatureC: ReadOff | null;
}

/** What stands for humidity and CO₂ where only temperature and pressure were read: any room's. Common practice, no source. */
const ANY_HUMIDITY: ReadOff = { value: 50, half: 45 };
const ANY_CO2: ReadOff = { value: 450, half: 300 };

/** Bench conditions older than this no longer hold: the weather moves. */
export const CONDITIONS_HOLD_HOURS = 24;

/** Standard uncertainty of a rectangle (JCGM 100:2008, 4.3.7). */
const uOf = ({ half }: ReadOff) => half / Math.sqrt(3);

/** The bench's air for the engine; null without temperature and pressure. */
export function airOf(c: Conditions): MeasuredAir | null {
  if (!c.airTemperatureC || !c.pressurePa) return null;
  const humidity = c.humidityPercent ?? ANY_HUMIDITY;
  const co2 = c.co2Ppm ?? ANY_CO2;
  return {
    temperatureC: c.airTemperatureC.value,
    pressurePa: c.pressurePa.value,
    humidityPercent: humidity.value,
    co2Ppm: co2.value,
    uTemperatureC: uOf(c.airTemperatureC),
    uPressurePa: uOf(c.pressurePa),
    uHumidityPercent: uOf(humidity),
    uCo2Ppm: uOf(co2),
  };
}

/** Temperature of the unit or source for the engine; null where none was entered. */
export function sourceTemperatureOf({ sourceTemperatureC: read }: Conditions): Estimate | null {
  if (!read) return null;
  const known = `read within ± ${formatEntered(read.half)} °C, rectangular`;
  return { value: read.value, u: uOf(read), known, dof: null, shape: 'rectangular' };
}

/** What one frame says goes before what its bench says. Air is one thing: it is taken whole from either. */
export function mergeConditions(frame: Conditions | null, bench: Conditions | null): Conditions | null {
  if (!frame || !bench) return frame ?? bench;
  const air = airOf(frame) ? frame : bench;
  const { airTemperatureC, pressurePa, humidityPercent, co2Ppm } = air;
  return {
    airTemperatureC,
    pressurePa,
    humidityPercent,
    co2Ppm,
    sourceTemperatureC: frame.sourceTemperatureC ?? bench.sourceTemperatureC,
  };
}

const readOff = (what: string, low: number, high: number, unit: string, per = 1) =>
  z
    .object({
      value: z
        .number({ error: `${what} must be a number.` })
        .refine(
          (v) => v >= low && v <= high,
          `${what} lies between ${low / per} and ${high / per} ${unit}.`.replaceAll('-', '−'),
        ),
      half: z
        .number({ error: `The ± of ${what.toLowerCase()} must be a number.` })
        .refine((v) => v > 0, `The ± of ${what.toLowerCase()} is larger than 0.`)
        .refine((v) => v <= (high - low) / 2, `This ± of ${what.toLowerCase()} says nothing.`),
    })
    .nullable()
    .default(null);

const fields = {
  airTemperatureC: readOff('Air temperature', -40, 100, '°C'),
  /** The whole range in which the index of air was checked against its published tables. */
  pressurePa: readOff('Pressure', 10_000, 140_000, 'hPa', 100),
  humidityPercent: readOff('Humidity', 0, 100, '%'),
  co2Ppm: readOff('CO₂', 0, 20_000, 'ppm'),
  sourceTemperatureC: readOff('Temperature of the unit', -60, 150, '°C'),
};

type Entered = Conditions;
const wholeAir = (c: Entered) => (c.airTemperatureC === null) === (c.pressurePa === null);
const something = (c: Entered) => c.airTemperatureC !== null || c.sourceTemperatureC !== null;
const WHOLE = {
  path: ['pressurePa.value'],
  message: 'The index of air needs temperature and pressure both. Enter the other one, or neither.',
};
const SOMETHING = {
  path: ['airTemperatureC.value'],
  message: 'Enter the air, or the temperature of the unit.',
};

const id = z.number().int().positive();
export const benchConditionsSchema = z
  .object({ benchId: id, ...fields })
  .refine(wholeAir, WHOLE)
  .refine(something, SOMETHING);
export const frameConditionsSchema = z
  .object({ frameId: id, readingId: id, version: z.number().int().min(0), ...fields })
  .refine(wholeAir, WHOLE)
  .refine(something, SOMETHING);

/** Conditions as a page shows them. */
export interface ConditionsView extends Conditions {
  /** True where they are one frame's own. */
  ofFrame: boolean;
  by: { id: number; name: string };
  at: string;
}
