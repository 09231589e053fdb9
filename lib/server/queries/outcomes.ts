import 'server-only';
import type { Outcome, UnitRow } from '@/lib/domain/views';
import { select } from '../db';

interface Row {
  unit_id: number;
  outcome: Outcome;
  reason: string;
  set_by: number;
  name: string;
  set_at: Date;
}

/** The newest outcome of each of these units. */
export async function outcomesOf(
  unitIds: readonly number[],
): Promise<Map<number, NonNullable<UnitRow['outcome']>>> {
  if (!unitIds.length) return new Map();
  const rows = await select<Row>(
    `SELECT o.unit_id, o.outcome, o.reason, o.set_by, p.name, o.set_at FROM unit_outcomes o JOIN people p ON p.id = o.set_by
     WHERE o.id IN (SELECT MAX(id) FROM unit_outcomes WHERE unit_id IN (:unitIds) GROUP BY unit_id)`,
    { unitIds },
  );
  return new Map(
    rows.map((row) => [
      row.unit_id,
      {
        outcome: row.outcome,
        reason: row.reason,
        by: { id: row.set_by, name: row.name },
        at: row.set_at.toISOString(),
      },
    ]),
  );
}

export async function outcomeOf(unitId: number): Promise<UnitRow['outcome']> {
  return (await outcomesOf([unitId])).get(unitId) ?? null;
}
