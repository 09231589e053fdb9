import 'server-only';
import type { FitOptions, SetupValues } from '@/lib/domain/reading-result';
import type { FitResult } from '@/lib/domain/scan-result';
import type { Role } from '@/lib/domain/roles';
import type { ReadingBrief, ReadingView, ReturnReason } from '@/lib/domain/views';
import type { MonteCarlo } from '@/lib/quantity/monte-carlo';
import type { ValueIn } from '@/lib/quantity/value-in';
import { select } from '../db';
import { drawBudgetInPool } from '../measure-pool';
import { firstValueOf } from '../move-reasons';
import { BRIEF_COLUMNS, BRIEF_JOINS, briefOf, type BriefColumns } from './reading-brief';
import { setupViews } from './setup-views';
import { withdrawalOf } from './withdrawals';

/** Every reading of a frame, newest first, without curves. */
export async function readingsOf(frameId: number): Promise<ReadingBrief[]> {
  const rows = await select<BriefColumns>(
    `SELECT ${BRIEF_COLUMNS} FROM readings r ${BRIEF_JOINS} WHERE r.frame_id = :frameId ORDER BY r.number DESC`,
    { frameId },
  );
  return rows.flatMap((row) => briefOf(row) ?? []);
}

interface ViewColumns extends BriefColumns {
  result_json: string;
  value_json: string | null;
  monte_carlo_json: string | null;
  digest: string;
  options_json: string;
  setup_json: string;
  setup_id: number;
  bench_id: number;
  frame_id: number;
  replaces_id: number | null;
  replaced_by: number | null;
  sent_at: Date | null;
  note: string;
  sender_id: number | null;
  sender: string | null;
}

/** One reading in full, curves included. */
export async function readingView(readingId: number): Promise<ReadingView | null> {
  const [row] = await select<ViewColumns>(
    `SELECT ${BRIEF_COLUMNS}, rr.result_json, rv.value_json, rv.monte_carlo_json, r.digest, r.options_json, r.setup_json, r.setup_id, r.bench_id, r.frame_id, r.replaces_id,
       (SELECT MAX(n.id) FROM readings n WHERE n.replaces_id = r.id) AS replaced_by,
       st.sent_at, st.note, sn.id AS sender_id, sn.name AS sender
     FROM readings r ${BRIEF_JOINS} LEFT JOIN people sn ON sn.id = st.sent_by
     LEFT JOIN reading_values rv ON rv.reading_id = r.id WHERE r.id = :readingId`,
    { readingId },
  );
  const brief = row ? briefOf(row) : null;
  if (!brief) return null;
  const setup = (await setupViews(row.bench_id)).find(({ id }) => id === row.setup_id);
  if (!setup) throw new Error(`Reading ${readingId} names a setup its bench does not have.`);
  const result = JSON.parse(row.result_json) as FitResult;
  const options = JSON.parse(row.options_json) as FitOptions;
  const { air, sourceTemperature } = JSON.parse(row.setup_json) as SetupValues;
  return {
    ...brief,
    result,
    ...(await valueOf(row, result)),
    conditions: { air, sourceTemperature },
    findings: result.findings,
    setup,
    replaces: row.replaces_id,
    replacedBy: row.replaced_by,
    sentBy: row.sender_id !== null && row.sender !== null ? { id: row.sender_id, name: row.sender } : null,
    sentAt: row.sent_at?.toISOString() ?? null,
    note: row.note,
    returned: await returnOf(readingId),
    signature: await signatureOf(readingId),
    first: await firstValueOf(row.frame_id),
    moveReason: await moveReasonOf(readingId),
    withdrawal: await withdrawalOf(readingId),
    zeroShift: options.zeroShift ?? 0,
    leaveOut: options.leaveOut ?? [],
    tone: options.tone ?? 'auto',
  };
}

type Value = Pick<ReadingView, 'dof' | 'budget' | 'corrections' | 'method' | 'other' | 'monteCarlo'>;

/** Values of before methods could be chosen name none. */
type KeptValue = Omit<ValueIn, 'judgement' | 'method' | 'other'> & Partial<Pick<ValueIn, 'method' | 'other'>>;

/** The kept value; a reading of before values were kept shows its result's budget, drawn from the same seed. */
async function valueOf(row: ViewColumns, result: FitResult): Promise<Value> {
  if (row.value_json !== null) {
    const {
      dof,
      budget,
      corrections,
      method = 'absolute',
      other = null,
    } = JSON.parse(row.value_json) as KeptValue;
    const monteCarlo =
      row.monte_carlo_json === null ? null : (JSON.parse(row.monte_carlo_json) as MonteCarlo);
    return { dof, budget, corrections, method, other, monteCarlo };
  }
  const { budget, wavelengthNm, expandedNm, dofWavelength } = result;
  const drawn =
    budget.length && wavelengthNm !== null && expandedNm !== null
      ? await drawBudgetInPool(budget, wavelengthNm, expandedNm, row.digest)
      : null;
  const plain = { corrections: [], method: 'absolute' as const, other: null };
  return { dof: dofWavelength, budget, ...plain, monteCarlo: drawn };
}

async function returnOf(readingId: number): Promise<ReadingView['returned']> {
  const [row] = await select<{
    reason: ReturnReason;
    words: string;
    returned_by: number;
    name: string;
    returned_at: Date;
  }>(
    `SELECT t.reason, t.words, t.returned_by, p.name, t.returned_at FROM returns t JOIN people p ON p.id = t.returned_by
     WHERE t.reading_id = :readingId`,
    { readingId },
  );
  if (!row) return null;
  const { reason, words, returned_by: id, name, returned_at: at } = row;
  return { reason, words, by: { id, name }, at: at.toISOString() };
}

async function signatureOf(readingId: number): Promise<ReadingView['signature']> {
  const [row] = await select<{
    person_name: string;
    role: Role;
    meaning: string;
    signed_at: Date;
    password_at: Date | null;
    digest: string;
  }>(
    `SELECT person_name, role, meaning, signed_at, password_at, digest FROM signatures
     WHERE reading_id = :readingId`,
    { readingId },
  );
  if (!row) return null;
  return {
    personName: row.person_name,
    role: row.role,
    meaning: row.meaning,
    at: row.signed_at.toISOString(),
    passwordAt: row.password_at?.toISOString() ?? null,
    digest: row.digest,
  };
}

async function moveReasonOf(readingId: number): Promise<ReadingView['moveReason']> {
  const [row] = await select<{ words: string; given_by: number; name: string; given_at: Date }>(
    `SELECT m.words, m.given_by, p.name, m.given_at FROM move_reasons m JOIN people p ON p.id = m.given_by
     WHERE m.reading_id = :readingId`,
    { readingId },
  );
  if (!row) return null;
  return { words: row.words, by: { id: row.given_by, name: row.name }, at: row.given_at.toISOString() };
}
