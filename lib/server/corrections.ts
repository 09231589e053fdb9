import 'server-only';
import type { Transaction } from 'sequelize';
import { READING_STEPS, readingMay, type ReadingState } from '@/lib/domain/life-cycle';
import type { Medium, Verdict } from '@/lib/domain/specification';
import { db, select } from './db';
import { EVER_IN_FORCE, IN_FORCE_FROM } from './setup-timeline';

/** What a setup that corrects the past reaches: from its moment to the bench's next setup. */
export interface CorrectedTime {
  setupId: number;
  benchId: number;
  from: Date;
  /** null: nothing follows yet. */
  until: Date | null;
}

/** A reading of that time that stands for its frame, with what it would be. */
export interface CorrectedReading {
  readingId: number;
  frameId: number;
  number: number;
  name: string;
  status: ReadingState;
  version: number;
  valueNm: number | null;
  expandedNm: number | null;
  medium: Medium;
  verdict: Verdict | null;
  /** 0 while it has not been measured again yet. */
  isMeasured: number;
  /** Why the new values give no answer; null when they do. */
  message: string | null;
  newValueNm: number | null;
  newExpandedNm: number | null;
  newVerdict: Verdict | null;
}

/** Counts an accepted reading only while no correction of it has been accepted as well. Joins readings as `r`. */
export const NOT_CORRECTED = `NOT EXISTS (SELECT 1 FROM readings later_one JOIN reading_states later_state
  ON later_state.reading_id = later_one.id AND later_state.status = :accepted WHERE later_one.replaces_id = r.id)`;

export async function correctedTime(
  setupId: number,
  transaction?: Transaction,
): Promise<CorrectedTime | null> {
  const setup = await db().tables.setups.findByPk(setupId, { transaction });
  if (!setup?.corrects || !setup.wantedFrom) return null;
  const [next] = await select<{ at: Date | null }>(
    `SELECT MIN(${IN_FORCE_FROM}) AS at FROM setups s LEFT JOIN setup_decisions d ON d.setup_id = s.id
     WHERE s.bench_id = :benchId AND ${EVER_IN_FORCE} AND ${IN_FORCE_FROM} > :from`,
    { benchId: setup.benchId, from: setup.wantedFrom },
    transaction,
  );
  return { setupId, benchId: setup.benchId, from: setup.wantedFrom, until: next.at };
}

/** The readings a correction reaches, oldest first; what a person has taken back for good is not among them. */
export async function correctedReadings(
  time: CorrectedTime,
  transaction?: Transaction,
): Promise<CorrectedReading[]> {
  const rows = await select<CorrectedReading>(
    `SELECT r.id AS readingId, r.frame_id AS frameId, r.number, COALESCE(u.serial, so.name, f.file_name) AS name,
       st.status, st.version, r.value_nm AS valueNm, r.expanded_nm AS expandedNm, r.medium, r.verdict,
       c.reading_id IS NOT NULL AS isMeasured, c.message, c.value_nm AS newValueNm, c.expanded_nm AS newExpandedNm,
       c.verdict AS newVerdict
     FROM frames f JOIN readings r ON r.id = f.reading_id JOIN reading_states st ON st.reading_id = r.id
     LEFT JOIN units u ON u.id = f.unit_id LEFT JOIN sources so ON so.id = f.source_id
     LEFT JOIN correction_fits c ON c.setup_id = :setupId AND c.reading_id = r.id
     WHERE f.bench_id = :benchId AND f.received_at >= :from AND (:until IS NULL OR f.received_at < :until)
     ORDER BY f.received_at, r.id`,
    { ...time },
    transaction,
  );
  return rows.filter(({ status }) => mayBeCorrected(status));
}

/** A signed reading keeps its place and gets a successor; one that is not signed steps back for it. */
export function mayBeCorrected(status: ReadingState): boolean {
  return status === READING_STEPS.accept.to || readingMay('replace', status);
}
