import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import type { Medium } from '@/lib/domain/specification';
import type {
  ChartFinding,
  ChartPoint,
  ChartStretch,
  OverTimeView,
  PersonRef,
  WithdrawnPoint,
} from '@/lib/domain/views';
import { STANDARD_BENCH_AIR, airFromVacuum } from '@/lib/quantity/air-index';
import { individualsChart, type IndividualsChart } from '@/lib/statistics/individuals';
import { select } from '../db';
import { setupViews } from './setup-views';

export interface OverTimeQuery {
  benchId: number | null;
  /** 'source:3' or 'lot:5'; '' is the choice with the most points. */
  choice: string;
  /** The newest so many points; 0 is all. */
  last: number;
}

/** What a chart is about: the accepted readings of one source or one lot. */
interface Choice {
  value: string;
  label: string;
  points: number;
  kind: 'source' | 'lot';
  id: number;
  medium: Medium;
  referenceNm: number;
}

const ACCEPTED = READING_STEPS.accept.to;
/** A subject whose readings were all withdrawn is still one to look at. */
const SHOWN = [ACCEPTED, READING_STEPS.withdraw.to];

/** Accepted readings of a bench for one source or lot, with limits that start anew at each setup. */
export async function overTime(q: OverTimeQuery): Promise<OverTimeView> {
  const bench = await benchOf(q.benchId);
  if (!bench) return nothing(null, []);
  const choices = await choicesOf(bench.id);
  const chosen = choices.find(({ value }) => value === q.choice) ?? choices[0];
  const offered = choices.map(({ value, label, points }) => ({ value, label, points }));
  if (!chosen) return nothing(bench, offered);
  const rows = await pointsOf(bench.id, chosen, q.last);
  const chart = individualsChart(rows);
  return {
    bench,
    medium: chosen.medium,
    subjectName: chosen.label,
    referenceNm: chosen.referenceNm,
    referenceIsNominal: chosen.kind === 'lot',
    points: rows.map((row, i): ChartPoint => ({
      ...row,
      movingRangeNm: chart.movingRanges[i],
      outside: chart.outside[i],
    })),
    withdrawn: await withdrawnOf(bench.id, chosen),
    stretches: await stretchesOf(bench.id, rows, chart),
    findings: findingsOf(rows, chart),
    choices: offered,
    chosen: chosen.value,
    benches: await benchesOf(chosen),
  };
}

function nothing(bench: PersonRef | null, choices: OverTimeView['choices']): OverTimeView {
  return {
    bench,
    medium: 'air',
    subjectName: '',
    referenceNm: null,
    referenceIsNominal: false,
    points: [],
    withdrawn: [],
    stretches: [],
    findings: [],
    choices,
    chosen: '',
    benches: [],
  };
}

/** The asked bench, or the one with the newest accepted reading, or any. */
async function benchOf(benchId: number | null): Promise<PersonRef | null> {
  const [bench] = await select<PersonRef>(
    benchId !== null
      ? 'SELECT id, name FROM benches WHERE id = :benchId'
      : `SELECT b.id, b.name FROM benches b ORDER BY
           (SELECT MAX(st.accepted_at) FROM reading_states st WHERE st.bench_id = b.id AND st.status = :accepted) DESC, b.name LIMIT 1`,
    { benchId, accepted: ACCEPTED },
  );
  return bench ?? null;
}

async function choicesOf(benchId: number): Promise<Choice[]> {
  const sources = await select<{ id: number; name: string; vacuum_nm: number; points: number }>(
    `SELECT so.id, so.name, so.vacuum_nm, SUM(st.status = :accepted) AS points FROM reading_states st JOIN readings r ON r.id = st.reading_id
     JOIN sources so ON so.id = r.source_id WHERE st.bench_id = :benchId AND st.status IN (:shown) GROUP BY so.id ORDER BY points DESC`,
    { benchId, accepted: ACCEPTED, shown: SHOWN },
  );
  const lots = await select<{
    id: number;
    number: string;
    medium: Medium;
    nominal_nm: number;
    points: number;
  }>(
    `SELECT l.id, l.number, sp.medium, sp.nominal_nm, SUM(st.status = :accepted) AS points FROM reading_states st JOIN readings r ON r.id = st.reading_id
     JOIN lots l ON l.id = r.lot_id JOIN specifications sp ON sp.id = l.specification_id
     WHERE st.bench_id = :benchId AND st.status IN (:shown) GROUP BY l.id ORDER BY l.opened_at DESC`,
    { benchId, accepted: ACCEPTED, shown: SHOWN },
  );
  return [
    ...sources.map(({ id, name, vacuum_nm, points }): Choice => ({
      value: `source:${id}`,
      label: name,
      points: Number(points),
      kind: 'source',
      id,
      medium: 'air',
      referenceNm: airFromVacuum(vacuum_nm, STANDARD_BENCH_AIR),
    })),
    ...lots.map(({ id, number, medium, nominal_nm, points }): Choice => ({
      value: `lot:${id}`,
      label: `Lot ${number}`,
      points: Number(points),
      kind: 'lot',
      id,
      medium,
      referenceNm: nominal_nm,
    })),
  ];
}

type Point = Omit<ChartPoint, 'movingRangeNm' | 'outside'>;

interface PointRow {
  reading_id: number;
  frame_id: number;
  label: string;
  received_at: Date;
  accepted_at: Date;
  value_nm: number;
  u_nm: number | null;
  setup_id: number;
  setup_number: number;
}

async function pointsOf(benchId: number, { kind, id }: Choice, last: number): Promise<Point[]> {
  const rows = await select<PointRow>(
    `SELECT r.id AS reading_id, r.frame_id, COALESCE(u.serial, CONCAT('Reading ', r.id)) AS label, f.received_at, st.accepted_at,
       r.value_nm, r.u_nm, r.setup_id, s.number AS setup_number
     FROM readings r JOIN reading_states st ON st.reading_id = r.id AND st.status = :accepted
     JOIN frames f ON f.id = r.frame_id JOIN setups s ON s.id = r.setup_id LEFT JOIN units u ON u.id = r.unit_id
     WHERE r.bench_id = :benchId AND r.${kind}_id = :id AND r.value_nm IS NOT NULL
     ORDER BY f.received_at DESC, r.id DESC ${last > 0 ? 'LIMIT :last' : ''}`,
    { accepted: ACCEPTED, benchId, id, last },
  );
  return rows.reverse().map((row) => ({
    readingId: row.reading_id,
    frameId: row.frame_id,
    label: row.label,
    takenAt: row.received_at.toISOString(),
    acceptedAt: row.accepted_at.toISOString(),
    valueNm: row.value_nm,
    uNm: row.u_nm,
    setupId: row.setup_id,
    setupNumber: row.setup_number,
  }));
}

const MOST_WITHDRAWN = 100;

/** Readings of the same subject that were accepted and then withdrawn, newest first. */
async function withdrawnOf(benchId: number, { kind, id }: Choice): Promise<WithdrawnPoint[]> {
  const rows = await select<PointRow & { changed_at: Date; reason: string | null }>(
    `SELECT r.id AS reading_id, r.frame_id, COALESCE(u.serial, CONCAT('Reading ', r.id)) AS label, f.received_at,
       st.accepted_at, st.changed_at, r.value_nm, r.u_nm, r.setup_id, s.number AS setup_number,
       (SELECT w.reason FROM withdrawal_proposals w JOIN withdrawal_answers a ON a.proposal_id = w.id
        WHERE w.reading_id = r.id ORDER BY w.id DESC LIMIT 1) AS reason
     FROM readings r JOIN reading_states st ON st.reading_id = r.id AND st.status = :withdrawn
     JOIN frames f ON f.id = r.frame_id JOIN setups s ON s.id = r.setup_id LEFT JOIN units u ON u.id = r.unit_id
     WHERE r.bench_id = :benchId AND r.${kind}_id = :id AND r.value_nm IS NOT NULL
     ORDER BY f.received_at DESC, r.id DESC LIMIT ${MOST_WITHDRAWN}`,
    { withdrawn: READING_STEPS.withdraw.to, benchId, id },
  );
  return rows.map((row) => ({
    readingId: row.reading_id,
    frameId: row.frame_id,
    label: row.label,
    takenAt: row.received_at.toISOString(),
    acceptedAt: row.accepted_at.toISOString(),
    withdrawnAt: row.changed_at.toISOString(),
    valueNm: row.value_nm,
    uNm: row.u_nm,
    setupNumber: row.setup_number,
    reason: row.reason ?? '',
  }));
}

async function stretchesOf(
  benchId: number,
  points: readonly Point[],
  chart: IndividualsChart,
): Promise<ChartStretch[]> {
  const setups = new Map((await setupViews(benchId)).map((setup) => [setup.id, setup]));
  return chart.stretches.map((stretch) => ({
    ...stretch,
    setupNumber: points[stretch.first].setupNumber,
    from: points[stretch.first].takenAt,
    change: setups.get(stretch.setupId)?.change ?? '',
  }));
}

const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ';

function findingsOf(points: readonly Point[], chart: IndividualsChart): ChartFinding[] {
  return chart.findings.map(({ kind, first, last }, i) => {
    const letter =
      LETTERS[i % LETTERS.length] + (i < LETTERS.length ? '' : String(Math.floor(i / LETTERS.length)));
    const { label } = points[first];
    return { letter, kind, first, last, ...wordsOf(kind, label, last - first + 1) };
  });
}

function wordsOf(kind: ChartFinding['kind'], label: string, many: number): { title: string; text: string } {
  switch (kind) {
    case 'outside':
      return {
        title: `${label} lies outside the limits`,
        text: 'A value this far from the mean is rare by chance. Look at its frame, then at what was changed on the bench before it.',
      };
    case 'range':
      return {
        title: `A large step at ${label}`,
        text: 'The step from the reading before it is larger than this bench usually makes. Something moved, or one of the two frames is not like the others.',
      };
    case 'nine':
      return {
        title: `${many} in a row on one side from ${label}`,
        text: 'The mean has shifted or is drifting. A reference check tells whether it is the bench or the units.',
      };
  }
}

/**
 * How far each bench lies from the reference for the same source or lot. The expanded uncertainty is the mean of the
 * readings' own: most of it comes from the setup, which is common to them all and does not average out.
 */
async function benchesOf({ kind, id, referenceNm }: Choice): Promise<OverTimeView['benches']> {
  const rows = await select<{
    id: number;
    name: string;
    runs: number;
    mean_nm: number;
    expanded_nm: number | null;
  }>(
    `SELECT b.id, b.name, COUNT(*) AS runs, AVG(r.value_nm) AS mean_nm, AVG(r.expanded_nm) AS expanded_nm
     FROM readings r JOIN reading_states st ON st.reading_id = r.id AND st.status = :accepted JOIN benches b ON b.id = r.bench_id
     WHERE r.${kind}_id = :id AND r.value_nm IS NOT NULL GROUP BY b.id ORDER BY b.name`,
    { accepted: ACCEPTED, id },
  );
  return rows.map((row) => ({
    bench: { id: row.id, name: row.name },
    runs: row.runs,
    differenceNm: row.mean_nm - referenceNm,
    expandedNm: row.expanded_nm,
  }));
}
