import 'server-only';
import type { ConfirmedValue, SetupDecision } from '@/lib/domain/setup';
import type {
  CertificateLink,
  SetupProposal,
  SetupStatement,
  SetupView,
  StatedValue,
} from '@/lib/domain/views';
import type { Setup } from '@/models/setup';
import { db, select } from '../db';
import { changeBetween, fourValues, type KnownValue } from '../setups';
import { certificateLinks } from './certificates';

interface Decision {
  setup_id: number;
  decision: SetupDecision;
  in_force_from: Date | null;
  reason: string;
  decided_by: number;
  decided_by_name: string;
  decided_at: Date;
}

export interface SetupHistory {
  /** Newest first by the moment they come into force. */
  setups: SetupView[];
  waiting: SetupProposal | null;
  /** Declined or taken back, newest first. */
  ended: SetupProposal[];
  lastNumber: number;
}

/** Every setup of a bench that is ever in force, newest first, each with what changed from the one before. */
export async function setupViews(benchId: number): Promise<SetupView[]> {
  return (await setupHistory(benchId)).setups;
}

/** Every setup of a bench, by what became of it. A proposal's change is counted from the setup in force now. */
export async function setupHistory(benchId: number, now = new Date()): Promise<SetupHistory> {
  const rows = await db().tables.setups.findAll({ where: { benchId }, order: [['number', 'ASC']] });
  const facts = await factsOf(benchId, rows);
  const decisionOf = new Map(facts.decisions.map((decision) => [decision.setup_id, decision]));
  const fromOf = (row: Setup) => decisionOf.get(row.id)?.in_force_from ?? row.enteredAt;
  const inLine = rows
    .filter((row) => !row.needsApproval || decisionOf.get(row.id)?.decision === 'approved')
    .sort((a, b) => fromOf(a).getTime() - fromOf(b).getTime() || a.number - b.number);
  const setups = inLine.map((row, i): SetupView => {
    const decision = decisionOf.get(row.id);
    return {
      ...statementOf(row, inLine[i - 1] ?? null, facts),
      from: fromOf(row).toISOString(),
      to: i + 1 < inLine.length ? fromOf(inLine[i + 1]).toISOString() : null,
      approved: decision
        ? {
            by: { id: decision.decided_by, name: decision.decided_by_name },
            at: decision.decided_at.toISOString(),
            remark: decision.reason,
          }
        : null,
      readings: facts.countOf.get(row.id) ?? 0,
    };
  });
  const inForce = inLine.filter((row) => fromOf(row) <= now).at(-1) ?? null;
  const proposals = rows
    .filter((row) => !inLine.includes(row))
    .map((row): SetupProposal => {
      const decision = decisionOf.get(row.id);
      return {
        ...statementOf(row, inForce, facts),
        wantedFrom: row.wantedFrom?.toISOString() ?? null,
        ended:
          decision && decision.decision !== 'approved'
            ? {
                decision: decision.decision,
                reason: decision.reason,
                by: { id: decision.decided_by, name: decision.decided_by_name },
                at: decision.decided_at.toISOString(),
              }
            : null,
      };
    });
  return {
    setups: setups.reverse(),
    waiting: proposals.find(({ ended }) => ended === null) ?? null,
    ended: proposals.filter(({ ended }) => ended !== null).reverse(),
    lastNumber: rows.at(-1)?.number ?? 0,
  };
}

interface Facts {
  decisions: Decision[];
  nameOf: Map<number, string>;
  countOf: Map<number, number>;
  files: Map<string, CertificateLink>;
}

async function factsOf(benchId: number, rows: readonly Setup[]): Promise<Facts> {
  const [people, counts, decisions, files] = await Promise.all([
    select<{ id: number; name: string }>(
      'SELECT DISTINCT p.id, p.name FROM people p JOIN setups s ON s.entered_by = p.id WHERE s.bench_id = :benchId',
      { benchId },
    ),
    select<{ setup_id: number; many: number }>(
      `SELECT r.setup_id, COUNT(*) AS many FROM readings r JOIN setups s ON s.id = r.setup_id
       WHERE s.bench_id = :benchId GROUP BY r.setup_id`,
      { benchId },
    ),
    select<Decision>(
      `SELECT d.*, p.name AS decided_by_name FROM setup_decisions d JOIN setups s ON s.id = d.setup_id
       JOIN people p ON p.id = d.decided_by WHERE s.bench_id = :benchId`,
      { benchId },
    ),
    certificateLinks(
      rows.flatMap((row) => Object.values(fourValues(row)).map(({ file }: KnownValue) => file)),
    ),
  ]);
  return {
    decisions,
    nameOf: new Map(people.map(({ id, name }) => [id, name])),
    countOf: new Map(counts.map(({ setup_id, many }) => [setup_id, many])),
    files,
  };
}

function statementOf(row: Setup, before: Setup | null, { nameOf, files }: Facts): SetupStatement {
  const four = fourValues(row);
  const stated = ({ file, ...value }: KnownValue): StatedValue => ({
    ...value,
    file: file === null ? null : (files.get(file) ?? null),
  });
  return {
    id: row.id,
    benchId: row.benchId,
    number: row.number,
    plate: row.plate,
    scaleUmPerPx: stated(four.scaleUmPerPx),
    separationUm: stated(four.separationUm),
    widthUm: stated(four.widthUm),
    distanceMm: stated(four.distanceMm),
    remountNm: row.remountUNm === null ? null : { u: row.remountUNm, dof: row.remountDof },
    tone: row.tone,
    camera: { model: row.cameraModel, serial: row.cameraSerial, bits: row.cameraBits },
    why: row.why,
    confirmed: JSON.parse(row.confirmedJson) as ConfirmedValue[],
    enteredBy: { id: row.enteredBy, name: nameOf.get(row.enteredBy) ?? '' },
    enteredAt: row.enteredAt.toISOString(),
    ...changeBetween(before, row),
  };
}
