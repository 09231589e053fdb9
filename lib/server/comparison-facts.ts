import 'server-only';
import type { Transaction } from 'sequelize';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import { SCAN_MEDIA_TYPE } from '@/lib/domain/scan-result';
import type { Specification } from '@/lib/domain/specification';
import type { ComparisonFacts, ReferenceReading } from '@/lib/quantity/comparison';
import { select } from './db';
import { remountOf } from './queries/references';
import { benchRule } from './reference-checks';

/** With fewer degrees of freedom the scatter of the checks says less about mounting again than the setup does. */
const FEWEST_DOF = 5;

interface Frame {
  benchId: number;
  setupId: number;
  receivedAt: Date;
  mediaType: string;
}

/** The nearest accepted reference readings of the same setup, and the method that specification or bench ask for. */
export async function comparisonFacts(
  frame: Frame,
  specification: Specification,
  transaction?: Transaction,
): Promise<ComparisonFacts> {
  const remount = await remountOf(frame.benchId, transaction);
  const references = [
    await nearest(frame, 'before', transaction),
    await nearest(frame, 'after', transaction),
  ].filter((reference) => reference !== null);
  return {
    method: specification.method ?? (await benchRule(frame.benchId, transaction)).method,
    at: frame.receivedAt.toISOString(),
    references,
    remount: remount && remount.dof >= FEWEST_DOF ? remount : null,
  };
}

interface Row {
  readingId: number;
  source: string;
  at: Date;
  spacing: number;
  uSpacing: number;
  dof: string | null;
  publishedVacuumNm: number;
  uPublishedNm: number;
}

async function nearest(
  { setupId, receivedAt, mediaType }: Frame,
  side: 'before' | 'after',
  transaction?: Transaction,
): Promise<ReferenceReading | null> {
  const unit = mediaType === SCAN_MEDIA_TYPE ? 'mm' : 'px';
  const [row] = await select<Row>(
    `SELECT r.id AS readingId, so.name AS source, f.received_at AS at, r.spacing_${unit} AS spacing, r.u_spacing_${unit} AS uSpacing,
       JSON_VALUE(rr.result_json, '$.dofSpacing') AS dof, so.vacuum_nm AS publishedVacuumNm, so.u_nm AS uPublishedNm
     FROM readings r JOIN reading_states st ON st.reading_id = r.id AND st.status = :accepted
     JOIN frames f ON f.id = r.frame_id JOIN sources so ON so.id = r.source_id JOIN reading_results rr ON rr.reading_id = r.id
     WHERE r.setup_id = :setupId AND so.is_reference AND r.spacing_${unit} IS NOT NULL
       AND f.received_at ${side === 'before' ? '<=' : '>'} :at
     ORDER BY f.received_at ${side === 'before' ? 'DESC' : 'ASC'}, r.id DESC LIMIT 1`,
    { accepted: READING_STEPS.accept.to, setupId, at: receivedAt },
    transaction,
  );
  if (!row) return null;
  return { ...row, at: row.at.toISOString(), dof: row.dof === null ? null : Number(row.dof) };
}
