import 'server-only';
import { READING_STEPS, type ReadingState } from '@/lib/domain/life-cycle';
import { agreementOf, type RepeatsView } from '@/lib/domain/repeats';
import type { Medium } from '@/lib/domain/specification';
import { select } from '../db';

interface Row {
  frame_id: number;
  reading_id: number;
  number: number;
  status: ReadingState;
  received_at: Date;
  medium: Medium;
  value_nm: number | null;
  expanded_nm: number | null;
}

/** The frames of a unit with the readings that stand for them; null where there is only one. */
export async function repeatsOf(unitId: number): Promise<RepeatsView | null> {
  const rows = await select<Row>(
    `SELECT f.id AS frame_id, r.id AS reading_id, r.number, s.status, f.received_at, r.medium, r.value_nm, r.expanded_nm
     FROM frames f JOIN readings r ON r.id = f.reading_id JOIN reading_states s ON s.reading_id = r.id
     WHERE f.unit_id = :unitId ORDER BY f.id`,
    { unitId },
  );
  if (rows.length < 2) return null;
  // A reading that was withdrawn or has come back says nothing about the unit.
  const out: readonly ReadingState[] = [READING_STEPS.withdraw.to, READING_STEPS.return.to];
  const counted = rows.filter(({ status, value_nm: value }) => value !== null && !out.includes(status));
  const agreement = agreementOf(counted.map(({ value_nm: value }) => value ?? 0));
  const outlierId = agreement?.outlier == null ? null : counted[agreement.outlier].reading_id;
  return {
    unitId,
    medium: rows[0].medium,
    rows: rows.map((row) => ({
      frameId: row.frame_id,
      readingId: row.reading_id,
      number: row.number,
      status: row.status,
      takenAt: row.received_at.toISOString(),
      valueNm: row.value_nm,
      expandedNm: row.expanded_nm,
      counts: counted.includes(row),
      isOutlier: row.reading_id === outlierId,
    })),
    meanNm: agreement?.meanNm ?? null,
    scatterNm: agreement?.scatterNm ?? null,
    chosen: await chosenOf(unitId),
  };
}

async function chosenOf(unitId: number): Promise<RepeatsView['chosen']> {
  const [row] = await select<{
    reading_id: number;
    reason: string;
    chosen_by: number;
    name: string;
    chosen_at: Date;
  }>(
    `SELECT c.reading_id, c.reason, c.chosen_by, p.name, c.chosen_at FROM reportable_choices c
     JOIN people p ON p.id = c.chosen_by WHERE c.unit_id = :unitId ORDER BY c.id DESC LIMIT 1`,
    { unitId },
  );
  if (!row) return null;
  const { reading_id: readingId, reason, chosen_by: id, name, chosen_at: at } = row;
  return { readingId, reason, by: { id, name }, at: at.toISOString() };
}
