import 'server-only';
import type { Transaction } from 'sequelize';
import type { CheckView, ReferencesView } from '@/lib/domain/references';
import { FIRST_RULE } from '@/lib/domain/references';
import type { Method } from '@/lib/domain/specification';
import { explain } from '@/lib/quantity/reference-check';
import { pooledScatter } from '@/lib/quantity/type-a';
import { db, select } from '../db';
import { openStop, standingOf } from '../reference-checks';
import { fourValues } from '../setups';

const SHOWN = 8;

interface Row {
  id: number;
  frame_id: number;
  reading_id: number;
  source: string;
  setup_id: number;
  setup_number: number;
  published_nm: number;
  measured_nm: number;
  deviation_nm: number;
  expanded_nm: number;
  limit_nm: number;
  own_limit: number;
  inside: number;
  made_at: Date;
}

/** How a bench stands by its reference checks, with the newest of them. */
export async function referencesOf(benchId: number): Promise<ReferencesView> {
  const rows = await select<Row>(
    `SELECT c.*, r.frame_id, so.name AS source, su.number AS setup_number FROM reference_checks c
     JOIN readings r ON r.id = c.reading_id JOIN sources so ON so.id = c.source_id JOIN setups su ON su.id = c.setup_id
     WHERE c.bench_id = :benchId ORDER BY c.id DESC LIMIT :shown`,
    { benchId, shown: SHOWN },
  );
  const [{ many }] = await select<{ many: number }>(
    'SELECT COUNT(*) AS many FROM reference_checks WHERE bench_id = :benchId',
    { benchId },
  );
  const setups = await db().tables.setups.findAll({ where: { benchId } });
  const constants = new Map(setups.map((setup) => [setup.id, fourValues(setup)]));
  const stop = await openStop(benchId);
  return {
    standing: await standingOf(benchId),
    stop: stop ? { id: stop.id, at: stop.at.toISOString() } : null,
    lastRelease: await lastRelease(benchId),
    rule: await ruleOf(benchId),
    checks: rows.map((row): CheckView => {
      const known = constants.get(row.setup_id);
      const inside = Boolean(row.inside);
      return {
        id: row.id,
        frameId: row.frame_id,
        readingId: row.reading_id,
        source: row.source,
        setupNumber: row.setup_number,
        publishedNm: row.published_nm,
        measuredNm: row.measured_nm,
        deviationNm: row.deviation_nm,
        expandedNm: row.expanded_nm,
        limitNm: row.limit_nm,
        ownLimit: Boolean(row.own_limit),
        inside,
        at: row.made_at.toISOString(),
        explanations: inside || !known ? [] : explain(row.deviation_nm, row.published_nm, known),
      };
    }),
    many,
    remount: await remountOf(benchId),
  };
}

/** Scatter of the checks of one source within one setup: what mounting again does. */
export async function remountOf(
  benchId: number,
  transaction?: Transaction,
): Promise<{ uNm: number; dof: number } | null> {
  const rows = await select<{ setup_id: number; source_id: number; deviation_nm: number }>(
    `SELECT setup_id, source_id, deviation_nm FROM reference_checks WHERE bench_id = :benchId ORDER BY id DESC LIMIT 500`,
    { benchId },
    transaction,
  );
  const groups = new Map<string, number[]>();
  for (const { setup_id, source_id, deviation_nm } of rows) {
    const key = `${setup_id} ${source_id}`;
    groups.set(key, [...(groups.get(key) ?? []), deviation_nm]);
  }
  const pooled = pooledScatter([...groups.values()]);
  return pooled && { uNm: pooled.s, dof: pooled.dof };
}

async function lastRelease(benchId: number): Promise<ReferencesView['lastRelease']> {
  const [row] = await select<{ reason: string; id: number; name: string; at: Date }>(
    `SELECT r.reason, p.id, p.name, r.released_at AS at FROM bench_releases r JOIN bench_stops s ON s.id = r.stop_id
     JOIN people p ON p.id = r.released_by WHERE s.bench_id = :benchId ORDER BY s.id DESC LIMIT 1`,
    { benchId },
  );
  return row ? { reason: row.reason, by: { id: row.id, name: row.name }, at: row.at.toISOString() } : null;
}

async function ruleOf(benchId: number): Promise<ReferencesView['rule']> {
  const [row] = await select<{
    limit_nm: number | null;
    method: Method;
    why: string;
    id: number;
    name: string;
    at: Date;
  }>(
    `SELECT b.limit_nm, b.method, b.why, p.id, p.name, b.entered_at AS at FROM bench_rules b JOIN people p ON p.id = b.entered_by
     WHERE b.bench_id = :benchId ORDER BY b.id DESC LIMIT 1`,
    { benchId },
  );
  if (!row) return { ...FIRST_RULE, why: '', by: null, at: null };
  const { limit_nm: limitNm, method, why, id, name, at } = row;
  return { limitNm, method, why, by: { id, name }, at: at.toISOString() };
}
