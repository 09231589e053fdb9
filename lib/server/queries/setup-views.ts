import 'server-only';
import type { SetupView } from '@/lib/domain/views';
import { db, select } from '../db';
import { changeBetween, fourValues } from '../setups';

/** Every setup of a bench, newest first, each with what changed from the one before. */
export async function setupViews(benchId: number): Promise<SetupView[]> {
  const rows = await db().tables.setups.findAll({ where: { benchId }, order: [['number', 'ASC']] });
  const people = await select<{ id: number; name: string }>(
    'SELECT DISTINCT p.id, p.name FROM people p JOIN setups s ON s.entered_by = p.id WHERE s.bench_id = :benchId',
    { benchId },
  );
  const counts = await select<{ setup_id: number; many: number }>(
    `SELECT r.setup_id, COUNT(*) AS many FROM readings r JOIN setups s ON s.id = r.setup_id
     WHERE s.bench_id = :benchId GROUP BY r.setup_id`,
    { benchId },
  );
  const nameOf = new Map(people.map(({ id, name }) => [id, name]));
  const countOf = new Map(counts.map(({ setup_id, many }) => [setup_id, many]));
  const views = rows.map((row, i): SetupView => {
    return {
      id: row.id,
      benchId,
      number: row.number,
      from: row.enteredAt.toISOString(),
      to: rows[i + 1]?.enteredAt.toISOString() ?? null,
      plate: row.plate,
      ...fourValues(row),
      remountNm: row.remountUNm === null ? null : { u: row.remountUNm, dof: row.remountDof },
      tone: row.tone,
      why: row.why,
      enteredBy: { id: row.enteredBy, name: nameOf.get(row.enteredBy) ?? '' },
      enteredAt: row.enteredAt.toISOString(),
      readings: countOf.get(row.id) ?? 0,
      ...changeBetween(rows[i - 1] ?? null, row),
    };
  });
  return views.reverse();
}
