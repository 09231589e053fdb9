import 'server-only';
import type { FitOptions, SetupValues } from '@/lib/domain/reading-result';
import { differences, differenceText } from '@/lib/domain/same-digits';
import type { FitResult, ScanOptions } from '@/lib/domain/scan-result';
import type { Specification } from '@/lib/domain/specification';
import type { ValueIn } from '@/lib/quantity/value-in';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { sha256 } from './canonical';
import { digestOf } from './commands/store-reading';
import { select } from './db';
import { fitInPool } from './scan-frames';
import { originalKey, readObject } from './storage';

interface Signed {
  id: number;
  name: string;
  engine: string;
  frame_sha256: string;
  digest: string;
  signed_digest: string;
  options_json: string;
  setup_json: string;
  specification_json: string | null;
  result_json: string;
  value_json: string | null;
}

/** What came of one signed reading that was computed again. */
export interface Replayed {
  readingId: number;
  name: string;
  engine: string;
  /** same: every digit agrees; other: another engine, other digits; wrong: what is stored is not what was signed. */
  outcome: 'same' | 'other' | 'wrong';
  /** What differs, or why it could not be computed; '' where all agrees. */
  because: string;
}

const ROWS_AT_ONCE = 50;

/**
 * Computes every signed reading again from its frame's stored bytes and its own copies of options and setup, and
 * compares digit by digit. Reads only. Readings of another engine may differ; those of this one may not.
 */
export async function* replayReadings(): AsyncGenerator<Replayed> {
  let after = 0;
  for (;;) {
    const rows = await select<Signed>(
      `SELECT r.id, CONCAT(f.file_name, ', reading ', r.number) AS name, r.engine, r.frame_sha256, r.digest,
         s.digest AS signed_digest, r.options_json, r.setup_json, r.specification_json, rr.result_json, rv.value_json
       FROM signatures s JOIN readings r ON r.id = s.reading_id JOIN reading_results rr ON rr.reading_id = r.id
       LEFT JOIN reading_values rv ON rv.reading_id = r.id
       JOIN frames f ON f.id = r.frame_id WHERE r.id > :after ORDER BY r.id LIMIT :many`,
      { after, many: ROWS_AT_ONCE },
    );
    for (const row of rows) {
      yield { readingId: row.id, name: row.name, engine: row.engine, ...(await replay(row)) };
      after = row.id;
    }
    if (rows.length < ROWS_AT_ONCE) return;
  }
}

async function replay(row: Signed): Promise<Pick<Replayed, 'outcome' | 'because'>> {
  const stored = JSON.parse(row.result_json) as FitResult;
  const setup = JSON.parse(row.setup_json) as SetupValues;
  const options = JSON.parse(row.options_json) as FitOptions | ScanOptions;
  const specification = row.specification_json ? (JSON.parse(row.specification_json) as Specification) : null;
  // Readings of before values were kept signed without one.
  const value = row.value_json ? { value: JSON.parse(row.value_json) as Omit<ValueIn, 'judgement'> } : {};
  const digest = digestOf({
    frameSha256: row.frame_sha256,
    result: stored,
    setup,
    specification,
    options,
    ...value,
  });
  if (digest !== row.digest || digest !== row.signed_digest)
    return { outcome: 'wrong', because: 'What is stored is not what was signed: the digest differs.' };
  const bytes = await readObject(originalKey(row.frame_sha256));
  if (!bytes) return { outcome: 'wrong', because: 'The stored bytes of the frame are gone.' };
  if (sha256(bytes) !== row.frame_sha256)
    return { outcome: 'wrong', because: 'The stored bytes of the frame are not those that were measured.' };
  const again = await fitInPool(bytes, setup, options);
  if (!again.ok) return differing(row, `It is refused now: ${again.message}`);
  // Through JSON, as the stored one has gone.
  const found = differences(stored, JSON.parse(JSON.stringify(again)));
  return found.length ? differing(row, differenceText(found)) : { outcome: 'same', because: '' };
}

function differing(row: Signed, because: string): Pick<Replayed, 'outcome' | 'because'> {
  return { outcome: row.engine === ENGINE_VERSION ? 'wrong' : 'other', because };
}
