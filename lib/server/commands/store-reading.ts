import 'server-only';
import type { Transaction } from 'sequelize';
import type { ReadingState } from '@/lib/domain/life-cycle';
import type { FitOptions, SetupValues } from '@/lib/domain/reading-result';
import type { FitResult, ScanOptions } from '@/lib/domain/scan-result';
import type { Specification } from '@/lib/domain/specification';
import { canonicalJson, sha256 } from '../canonical';
import { db, select } from '../db';
import { drawBudgetInPool } from '../measure-pool';
import { gravest, lengthColumns, riskOf } from '../findings';
import type { ComparisonFacts } from '@/lib/quantity/comparison';
import { valueIn, type ValueIn } from '@/lib/quantity/value-in';

/** What a new reading is made from. */
export interface NewReading {
  frame: {
    id: number;
    sha256: string;
    benchId: number;
    setupId: number;
    lotId: number | null;
    unitId: number | null;
    sourceId: number | null;
  };
  result: FitResult;
  setup: SetupValues;
  specification: Specification | null;
  comparison?: ComparisonFacts | null;
  options: FitOptions | ScanOptions;
  /** null: the product's own first fit. */
  madeBy: number | null;
  madeInReview: boolean;
  replacesId: number | null;
  at: Date;
  state: { status: ReadingState; sentBy: number | null; sentAt: Date | null; note: string };
}

/** Writes a reading, its result and its first state. Nothing here is ever updated but the state. */
export async function storeReading(
  reading: NewReading,
  transaction: Transaction,
): Promise<{ id: number; number: number }> {
  const { tables } = db();
  const { frame, result, setup, specification, options, at } = reading;
  const [last] = await select<{ number: number | null }>(
    'SELECT MAX(number) AS number FROM readings WHERE frame_id = :frameId',
    { frameId: frame.id },
    transaction,
  );
  const value = valueIn(result, { setup, specification, comparison: reading.comparison });
  const { judgement, ...judged } = value;
  const digest = digestOf({
    frameSha256: frame.sha256,
    result,
    setup,
    specification,
    options,
    value: judged,
  });
  const { word, text } = gravest(result.findings);
  const row = await tables.readings.create(
    {
      frameId: frame.id,
      number: (last.number ?? 0) + 1,
      replacesId: reading.replacesId,
      benchId: frame.benchId,
      setupId: frame.setupId,
      lotId: frame.lotId,
      unitId: frame.unitId,
      sourceId: frame.sourceId,
      madeBy: reading.madeBy,
      madeAt: at,
      madeInReview: reading.madeInReview,
      engine: result.engine,
      frameSha256: frame.sha256,
      digest,
      optionsJson: canonicalJson(options),
      setupJson: canonicalJson(setup),
      specificationJson: specification ? canonicalJson(specification) : null,
      medium: value.medium,
      valueNm: value.valueNm,
      uNm: value.uNm,
      expandedNm: value.expandedNm,
      k: value.k,
      dof: value.dof,
      wavelengthAirNm: result.wavelengthNm,
      wavelengthVacuumNm: result.wavelengthVacuumNm,
      verdict: judgement?.verdict ?? null,
      judgementJson: judgement ? canonicalJson(judgement) : null,
      word,
      wordText: text.slice(0, 1000),
      orderCentres: result.orders.length,
      ...lengthColumns(result, setup),
    },
    { transaction },
  );
  await tables.readingResults.create(
    { readingId: row.id, stripJson: JSON.stringify(result.strip), resultJson: canonicalJson(result) },
    { transaction },
  );
  const { budget, valueNm, expandedNm } = value;
  const drawn =
    budget.length && valueNm !== null && expandedNm !== null
      ? await drawBudgetInPool(budget, valueNm, expandedNm, digest)
      : null;
  await tables.readingValues.create(
    {
      readingId: row.id,
      valueJson: canonicalJson(judged),
      monteCarloJson: drawn ? canonicalJson(drawn) : null,
    },
    { transaction },
  );
  await tables.readingStates.create(
    {
      readingId: row.id,
      frameId: frame.id,
      benchId: frame.benchId,
      ...reading.state,
      changedAt: at,
      risk: riskOf(word, judgement?.verdict ?? null),
    },
    { transaction },
  );
  return { id: row.id, number: row.number };
}

/** SHA-256 over everything a signature stands for: bytes, result, setup, specification, options, value with its budget. */
export function digestOf(content: {
  frameSha256: string;
  result: FitResult;
  setup: SetupValues;
  specification: Specification | null;
  options: FitOptions | ScanOptions;
  /** Absent in readings of before values were kept. */
  value?: Omit<ValueIn, 'judgement'>;
}): string {
  return sha256(canonicalJson(content));
}
