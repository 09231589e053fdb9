import 'server-only';
import type { z } from 'zod';
import type { Conditions, benchConditionsSchema, frameConditionsSchema } from '@/lib/domain/conditions';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { FitOptions } from '@/lib/domain/reading-result';
import { isScanResult, type FitResult } from '@/lib/domain/scan-result';
import type { CommandContext } from '../context';
import { db, select } from '../db';
import { loadFrame } from '../frame-facts';
import { changedMeanwhile, findReading } from '../reading-facts';
import { inTransaction, type Work } from '../transaction';
import { keepFit, type KeptFit } from './keep-fit';

/** Air and temperature of a bench: from now on every frame it takes is fitted with them, for a day at most. */
export async function enterBenchConditions(
  context: CommandContext,
  { benchId, ...entered }: z.output<typeof benchConditionsSchema>,
): Promise<null> {
  return inTransaction(context, async (work) => {
    const bench = await db().tables.benches.findByPk(benchId, { transaction: work.transaction });
    if (!bench) throw new AppError('NOT_FOUND', 'There is no such bench.');
    await add(work, context, entered, { benchId, frameId: null });
    work.audit({
      action: 'bench.conditions',
      subject: { kind: 'bench', id: benchId, text: bench.name },
      before: null,
      after: entered,
    });
    return null;
  });
}

/** Air and temperature of one frame, before review; it is fitted again with them, in the region it has. */
export async function enterFrameConditions(
  context: CommandContext,
  { frameId, readingId, version, ...entered }: z.output<typeof frameConditionsSchema>,
): Promise<KeptFit> {
  const frame = await loadFrame(frameId);
  const reading = await findReading(readingId);
  if (reading.frameId !== frameId) throw new AppError('BAD_INPUT', 'This reading is of another frame.');
  if (reading.currentReadingId !== readingId || reading.version !== version)
    throw await changedMeanwhile('reading', readingId);
  const open = READING_STEPS.replace.from.filter((status) => status !== READING_STEPS.send.to);
  if (!(open as readonly string[]).includes(reading.status))
    throw new AppError('WRONG_STATE', 'Air and temperature are entered before a reading goes to review.');
  await inTransaction(context, async (work) => {
    await add(work, context, entered, { benchId: frame.benchId, frameId });
    work.audit({
      action: 'frame.conditions',
      subject: { kind: 'frame', id: frameId, text: frame.fileName },
      before: null,
      after: entered,
    });
  });
  const [stored] = await select<{ result_json: string; options_json: string }>(
    `SELECT rr.result_json, r.options_json FROM readings r JOIN reading_results rr ON rr.reading_id = r.id WHERE r.id = :readingId`,
    { readingId },
  );
  const result = JSON.parse(stored.result_json) as FitResult;
  const { leaveOut = [], zeroShift = 0 } = JSON.parse(stored.options_json) as FitOptions;
  return keepFit(context, {
    frameId,
    fromReadingId: readingId,
    fromVersion: version,
    region: result.region,
    leaveOut,
    zeroShift,
    ...(isScanResult(result) ? { detectorMm: result.detectorMm } : {}),
  });
}

async function add(
  { transaction }: Work,
  context: CommandContext,
  entered: Conditions,
  where: { benchId: number; frameId: number | null },
): Promise<void> {
  await db().tables.conditions.create(
    {
      ...where,
      airTemperatureC: entered.airTemperatureC?.value ?? null,
      airTemperatureHalfC: entered.airTemperatureC?.half ?? null,
      pressurePa: entered.pressurePa?.value ?? null,
      pressureHalfPa: entered.pressurePa?.half ?? null,
      humidityPercent: entered.humidityPercent?.value ?? null,
      humidityHalfPercent: entered.humidityPercent?.half ?? null,
      co2Ppm: entered.co2Ppm?.value ?? null,
      co2HalfPpm: entered.co2Ppm?.half ?? null,
      sourceTemperatureC: entered.sourceTemperatureC?.value ?? null,
      sourceTemperatureHalfC: entered.sourceTemperatureC?.half ?? null,
      enteredBy: context.actor.id,
      enteredAt: context.at,
    },
    { transaction },
  );
}
