import 'server-only';
import type { Transaction } from 'sequelize';
import {
  CONDITIONS_HOLD_HOURS,
  airOf,
  mergeConditions,
  sourceTemperatureOf,
  type Conditions,
  type ConditionsView,
  type ReadOff,
} from '@/lib/domain/conditions';
import type { SetupValues } from '@/lib/domain/reading-result';
import { select } from './db';

interface Row {
  frame_id: number | null;
  air_temperature_c: number | null;
  air_temperature_half_c: number | null;
  pressure_pa: number | null;
  pressure_half_pa: number | null;
  humidity_percent: number | null;
  humidity_half_percent: number | null;
  co2_ppm: number | null;
  co2_half_ppm: number | null;
  source_temperature_c: number | null;
  source_temperature_half_c: number | null;
  entered_by: number;
  name: string;
  entered_at: Date;
}

const ROWS = 'SELECT c.*, p.name FROM conditions c JOIN people p ON p.id = c.entered_by';

const pair = (value: number | null, half: number | null): ReadOff | null =>
  value === null || half === null ? null : { value, half };

function viewOf(row: Row): ConditionsView {
  return {
    airTemperatureC: pair(row.air_temperature_c, row.air_temperature_half_c),
    pressurePa: pair(row.pressure_pa, row.pressure_half_pa),
    humidityPercent: pair(row.humidity_percent, row.humidity_half_percent),
    co2Ppm: pair(row.co2_ppm, row.co2_half_ppm),
    sourceTemperatureC: pair(row.source_temperature_c, row.source_temperature_half_c),
    ofFrame: row.frame_id !== null,
    by: { id: row.entered_by, name: row.name },
    at: row.entered_at.toISOString(),
  };
}

/** What held at a bench at a moment: the newest entry before it that is not too old. */
export async function benchConditions(
  benchId: number,
  at: Date,
  transaction?: Transaction,
): Promise<ConditionsView | null> {
  const since = new Date(at.getTime() - CONDITIONS_HOLD_HOURS * 3_600_000);
  const [row] = await select<Row>(
    `${ROWS} WHERE c.bench_id = :benchId AND c.frame_id IS NULL AND c.entered_at <= :at AND c.entered_at > :since
     ORDER BY c.entered_at DESC, c.id DESC LIMIT 1`,
    { benchId, at, since },
    transaction,
  );
  return row ? viewOf(row) : null;
}

async function ownConditions(frameId: number, transaction?: Transaction): Promise<ConditionsView | null> {
  const [row] = await select<Row>(
    `${ROWS} WHERE c.frame_id = :frameId ORDER BY c.id DESC LIMIT 1`,
    { frameId },
    transaction,
  );
  return row ? viewOf(row) : null;
}

/** What a frame was taken under: its own entry before its bench's. */
export async function frameConditions(
  frame: { id: number; benchId: number; receivedAt: Date },
  transaction?: Transaction,
): Promise<Conditions | null> {
  return mergeConditions(
    await ownConditions(frame.id, transaction),
    await benchConditions(frame.benchId, frame.receivedAt, transaction),
  );
}

/** The same as the engine takes it beside the bench's constants. */
export function conditionValues(c: Conditions | null): Pick<SetupValues, 'air' | 'sourceTemperature'> {
  const air = c && airOf(c);
  const sourceTemperature = c && sourceTemperatureOf(c);
  return { ...(air ? { air } : {}), ...(sourceTemperature ? { sourceTemperature } : {}) };
}
