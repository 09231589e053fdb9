import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { Verdict } from '@/lib/domain/specification';
import { VERDICTS } from '@/lib/domain/specification';
import type { LotRow, LotView, SpecificationView, UnitRow } from '@/lib/domain/views';
import { lotRisk, type UnitValue } from '@/lib/quantity/lot-risk';
import { select } from '../db';
import { outcomesOf } from './outcomes';
import { contains, pageOf } from './paging';
import { BRIEF_COLUMNS, BRIEF_JOINS, briefOf, type BriefColumns } from './reading-brief';
import { SPECIFICATION_COLUMNS, specificationOf, type SpecificationColumns } from './specification-columns';

interface LotColumns extends SpecificationColumns {
  id: number;
  number: string;
  supplier: string;
  opened_by: number;
  opener: string;
  opened_at: Date;
  closed_at: Date | null;
  units: number;
  taken: number;
  sp_lots: number;
}

const LOTS = `SELECT l.id, l.number, l.supplier, l.opened_by, p.name AS opener, l.opened_at, l.closed_at, ${SPECIFICATION_COLUMNS},
    (SELECT COUNT(*) FROM units u WHERE u.lot_id = l.id) AS units,
    (SELECT COUNT(DISTINCT f.unit_id) FROM frames f WHERE f.lot_id = l.id) AS taken,
    (SELECT COUNT(*) FROM lots other WHERE other.specification_id = sp.id) AS sp_lots
  FROM lots l JOIN specifications sp ON sp.id = l.specification_id JOIN people p ON p.id = l.opened_by`;

function lotOf(row: LotColumns): LotRow {
  return {
    id: row.id,
    number: row.number,
    supplier: row.supplier,
    specification: {
      ...specificationOf(row),
      id: row.sp_id,
      retired: row.retired_at !== null,
      lots: row.sp_lots,
    },
    units: row.units,
    unitsTaken: row.taken,
    openedBy: { id: row.opened_by, name: row.opener },
    openedAt: row.opened_at.toISOString(),
    closedAt: row.closed_at?.toISOString() ?? null,
  };
}

export async function listLots(q: {
  find: string;
  page: number;
}): Promise<{ rows: LotRow[]; total: number; page: number; pages: number }> {
  const where = q.find.trim()
    ? 'WHERE l.number LIKE :find OR l.supplier LIKE :find OR sp.name LIKE :find'
    : '';
  const values = { find: contains(q.find) };
  const [{ total }] = await select<{ total: number }>(
    `SELECT COUNT(*) AS total FROM lots l JOIN specifications sp ON sp.id = l.specification_id ${where}`,
    values,
  );
  const { page, pages, offset, rows } = pageOf(total, q.page);
  const found = await select<LotColumns>(
    `${LOTS} ${where} ORDER BY l.opened_at DESC, l.id DESC LIMIT :rows OFFSET :offset`,
    {
      ...values,
      rows,
      offset,
    },
  );
  return { rows: found.map(lotOf), total, page, pages };
}

/** Lots that still take frames, newest first. */
export async function listOpenLots(): Promise<LotRow[]> {
  const found = await select<LotColumns>(
    `${LOTS} WHERE l.closed_at IS NULL ORDER BY l.opened_at DESC, l.id DESC LIMIT 500`,
  );
  return found.map(lotOf);
}

/** The reading chosen to be reported, or the newest frame's: what the unit stands at. */
const STANDING_READING = `LEFT JOIN readings r ON r.id = (
  SELECT f.reading_id FROM frames f WHERE f.unit_id = u.id AND f.reading_id IS NOT NULL ORDER BY f.reading_id <=> (
    SELECT c.reading_id FROM reportable_choices c WHERE c.unit_id = u.id ORDER BY c.id DESC LIMIT 1) DESC, f.id DESC LIMIT 1)`;

export async function findLot(id: number, q: { page: number; find: string }): Promise<LotView | null> {
  const [lot] = await select<LotColumns>(`${LOTS} WHERE l.id = :id`, { id });
  if (!lot) return null;
  const where = `u.lot_id = :id ${q.find.trim() ? 'AND u.serial LIKE :find' : ''}`;
  const values = { id, find: contains(q.find) };
  const [{ total }] = await select<{ total: number }>(
    `SELECT COUNT(*) AS total FROM units u WHERE ${where}`,
    values,
  );
  const { page, offset, rows } = pageOf(total, q.page);
  const units = await select<BriefColumns & { unit_id: number; serial: string; frames: number }>(
    `SELECT u.id AS unit_id, u.serial, (SELECT COUNT(*) FROM frames f WHERE f.unit_id = u.id) AS frames, ${BRIEF_COLUMNS}
     FROM (SELECT * FROM units u WHERE ${where} ORDER BY u.serial LIMIT :rows OFFSET :offset) u
     ${STANDING_READING} ${BRIEF_JOINS} ORDER BY u.serial`,
    { ...values, rows, offset },
  );
  const outcomes = await outcomesOf(units.map((unit) => unit.unit_id));
  return {
    ...lotOf(lot),
    rows: units.map((unit): UnitRow => ({
      id: unit.unit_id,
      serial: unit.serial,
      frames: unit.frames,
      reading: briefOf(unit),
      outcome: outcomes.get(unit.unit_id) ?? null,
    })),
    totalRows: total,
    page,
    counts: await countsOf(id),
    risk: lotRisk(await valuesOf(id), specificationOf(lot)),
  };
}

/** How many units of the lot stand at each verdict; a withdrawn reading gives none. */
async function countsOf(lotId: number): Promise<Record<Verdict | 'none', number>> {
  const found = await select<{ verdict: Verdict | null; many: number }>(
    `SELECT IF(st.status = :withdrawn, NULL, r.verdict) AS verdict, COUNT(*) AS many FROM units u ${STANDING_READING}
     LEFT JOIN reading_states st ON st.reading_id = r.id WHERE u.lot_id = :lotId GROUP BY 1`,
    { lotId, withdrawn: READING_STEPS.withdraw.to },
  );
  const counts: Record<Verdict | 'none', number> = {
    within: 0,
    undecided: 0,
    outside: 0,
    'no-verdict': 0,
    none: 0,
  };
  for (const { verdict, many } of found)
    counts[verdict && VERDICTS.includes(verdict) ? verdict : 'none'] += many;
  return counts;
}

/** The value of each unit of the lot that has one with an uncertainty. */
function valuesOf(lotId: number): Promise<UnitValue[]> {
  return select<UnitValue>(
    `SELECT r.value_nm AS valueNm, r.u_nm AS uNm, r.expanded_nm AS expandedNm FROM units u ${STANDING_READING}
     WHERE u.lot_id = :lotId AND r.value_nm IS NOT NULL AND r.u_nm IS NOT NULL AND r.expanded_nm IS NOT NULL`,
    { lotId },
  );
}

export async function listSpecifications(): Promise<SpecificationView[]> {
  const rows = await select<SpecificationColumns & { lots: number }>(
    `SELECT ${SPECIFICATION_COLUMNS}, (SELECT COUNT(*) FROM lots l WHERE l.specification_id = sp.id) AS lots
     FROM specifications sp ORDER BY sp.retired_at IS NOT NULL, sp.name`,
  );
  return rows.map((row) => ({
    ...specificationOf(row),
    id: row.sp_id,
    retired: row.retired_at !== null,
    lots: row.lots,
  }));
}
