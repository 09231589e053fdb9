import 'server-only';
import type { HistoryStep, HistoryView } from '@/lib/domain/history';
import type { Medium } from '@/lib/domain/specification';
import {
  OUTCOME_WORDS,
  RETURN_WORDS,
  type Outcome,
  type RegionChange,
  type ReturnReason,
} from '@/lib/domain/views';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';
import { select } from '../db';
import { frameRows } from './frame-rows';

/**
 * Everything that happened to a frame and its readings, oldest first: from their own rows, each of which is never
 * changed, not from the log, which says the same once more.
 */
export async function historyOf(frameId: number): Promise<HistoryView | null> {
  const [frame] = await frameRows([frameId]);
  if (!frame) return null;
  const parts = await Promise.all(
    [received, fits, trials, comments, sent, returns, signatures, withdrawals, outcomes].map((part) =>
      part(frameId),
    ),
  );
  return {
    frameId,
    name: frame.subject.kind === 'unit' ? frame.subject.serial : frame.fileName,
    fileName: frame.fileName,
    sha256: frame.sha256,
    readingId: frame.reading?.id ?? null,
    steps: parts.flat().sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0)),
  };
}

type Steps = Promise<HistoryStep[]>;

const nm = (value: number | null, expanded: number | null, medium: Medium): string => {
  if (value === null) return 'no wavelength';
  const unit = medium === 'air' ? 'nm (air)' : 'nm (vac)';
  if (!expanded) return `${formatNumber(value, 3)} ${unit}`;
  const text = formatQuantity(value, expanded);
  return `${text.value} ± ${text.uncertainty} ${unit}`;
};

async function received(frameId: number): Steps {
  const rows = await select<{
    at: Date;
    who: string;
    bytes: number;
    bench: string;
    setup: number;
    message: string | null;
    state: string;
  }>(
    `SELECT f.received_at AS at, p.name AS who, f.bytes, b.name AS bench, s.number AS setup, f.message, f.state
     FROM frames f JOIN people p ON p.id = f.uploaded_by JOIN benches b ON b.id = f.bench_id
     JOIN setups s ON s.id = f.setup_id WHERE f.id = :frameId`,
    { frameId },
  );
  return rows.map(({ at, who, bytes, bench, setup, message }) => ({
    at: at.toISOString(),
    step: 'received',
    who,
    reading: null,
    title: 'Frame received',
    lines: [`${formatNumber(bytes, 0)} bytes, ${bench}, setup ${setup}`, ...(message ? [message] : [])],
  }));
}

async function fits(frameId: number): Steps {
  const rows = await select<{
    at: Date;
    who: string | null;
    number: number;
    engine: string;
    value_nm: number | null;
    expanded_nm: number | null;
    medium: Medium;
    verdict: string | null;
    replaced: number | null;
    made_in_review: number;
    reason: string | null;
  }>(
    `SELECT r.made_at AS at, p.name AS who, r.number, r.engine, r.value_nm, r.expanded_nm, r.medium, r.verdict,
       b.number AS replaced, r.made_in_review, m.words AS reason
     FROM readings r LEFT JOIN people p ON p.id = r.made_by LEFT JOIN readings b ON b.id = r.replaces_id
     LEFT JOIN move_reasons m ON m.reading_id = r.id WHERE r.frame_id = :frameId ORDER BY r.id`,
    { frameId },
  );
  return rows.map((row) => ({
    at: row.at.toISOString(),
    step: 'fitted',
    who: row.who ?? 'Midfringe',
    reading: row.number,
    title: row.replaced === null ? 'Fitted' : `Fitted again, in place of reading ${row.replaced}`,
    lines: [
      `${nm(row.value_nm, row.expanded_nm, row.medium)}${row.verdict ? `, ${row.verdict.replace('-', ' ')}` : ''}`,
      `engine ${row.engine}${row.made_in_review ? ', in review' : ''}`,
      ...(row.reason ? [`Why the value moved: ${row.reason}`] : []),
    ],
  }));
}

function regionText(json: string): string {
  const { region, leaveOut, zeroShift } = JSON.parse(json) as RegionChange;
  const where =
    'fromMm' in region
      ? `${formatNumber(region.fromMm, 2)} to ${formatNumber(region.toMm, 2)} mm`
      : `${formatNumber(region.lengthPx, 1)} × ${formatNumber(region.heightPx, 1)} px at ${formatNumber(region.cxPx, 1)}, ${formatNumber(region.cyPx, 1)}, ${formatNumber(region.angleDeg, 3)}°`;
  const out = leaveOut.length ? `, left out ${leaveOut.join(', ')}` : '';
  return `${where}${out}${zeroShift ? `, zero order moved by ${zeroShift}` : ''}`;
}

async function trials(frameId: number): Steps {
  const rows = await select<{
    at: Date;
    who: string;
    number: number | null;
    kept: number | null;
    change_json: string;
    value_nm: number | null;
    expanded_nm: number | null;
    medium: Medium;
    problem: string | null;
  }>(
    `SELECT t.tried_at AS at, p.name AS who, r.number, k.number AS kept, t.change_json, t.value_nm, t.expanded_nm,
       t.problem, COALESCE((SELECT sp.medium FROM frames f JOIN lots l ON l.id = f.lot_id
         JOIN specifications sp ON sp.id = l.specification_id WHERE f.id = t.frame_id), 'air') AS medium FROM region_trials t JOIN people p ON p.id = t.tried_by
     LEFT JOIN readings r ON r.id = t.from_reading_id LEFT JOIN readings k ON k.id = t.kept_reading_id
     WHERE t.frame_id = :frameId ORDER BY t.id`,
    { frameId },
  );
  return rows.map((row) => ({
    at: row.at.toISOString(),
    step: 'tried',
    who: row.who,
    reading: row.number,
    title: row.kept === null ? 'Region tried, none kept' : `Region tried on the way to reading ${row.kept}`,
    lines: [
      `${row.problem ?? nm(row.value_nm, row.expanded_nm, row.medium)}, as the page showed it`,
      regionText(row.change_json),
    ],
  }));
}

async function comments(frameId: number): Steps {
  const rows = await select<{ at: Date; who: string; number: number; words: string }>(
    `SELECT c.made_at AS at, p.name AS who, r.number, c.words FROM comments c JOIN readings r ON r.id = c.reading_id
     JOIN people p ON p.id = c.made_by WHERE r.frame_id = :frameId`,
    { frameId },
  );
  return rows.map(({ at, who, number, words }) => ({
    at: at.toISOString(),
    step: 'said',
    who,
    reading: number,
    title: 'Comment',
    lines: [words],
  }));
}

async function sent(frameId: number): Steps {
  // A re-fit in review takes its sender over; it was sent once, with the reading it came from.
  const rows = await select<{ at: Date; who: string; number: number; note: string }>(
    `SELECT s.sent_at AS at, p.name AS who, r.number, s.note FROM reading_states s JOIN readings r ON r.id = s.reading_id
     JOIN people p ON p.id = s.sent_by WHERE s.frame_id = :frameId AND NOT r.made_in_review`,
    { frameId },
  );
  return rows.map(({ at, who, number, note }) => ({
    at: at.toISOString(),
    step: 'sent',
    who,
    reading: number,
    title: 'Sent to review',
    lines: note ? [note] : [],
  }));
}

async function returns(frameId: number): Steps {
  const rows = await select<{ at: Date; who: string; number: number; reason: ReturnReason; words: string }>(
    `SELECT t.returned_at AS at, p.name AS who, r.number, t.reason, t.words FROM returns t
     JOIN readings r ON r.id = t.reading_id JOIN people p ON p.id = t.returned_by WHERE r.frame_id = :frameId`,
    { frameId },
  );
  return rows.map(({ at, who, number, reason, words }) => ({
    at: at.toISOString(),
    step: 'returned',
    who,
    reading: number,
    title: 'Returned',
    lines: [RETURN_WORDS[reason], ...(words ? [words] : [])],
  }));
}

async function signatures(frameId: number): Steps {
  const rows = await select<{
    at: Date;
    who: string;
    number: number;
    role: string;
    meaning: string;
    digest: string;
    reading_id: number;
  }>(
    `SELECT s.signed_at AS at, s.person_name AS who, r.number, s.role, s.meaning, s.digest, s.reading_id
     FROM signatures s JOIN readings r ON r.id = s.reading_id WHERE r.frame_id = :frameId`,
    { frameId },
  );
  const answers = await select<{ reading_id: number; check_name: string; answer: string; reason: string }>(
    `SELECT a.reading_id, a.check_name, a.answer, a.reason FROM look_answers a
     JOIN readings r ON r.id = a.reading_id WHERE r.frame_id = :frameId ORDER BY a.id`,
    { frameId },
  );
  return rows.map((row) => ({
    at: row.at.toISOString(),
    step: 'accepted',
    who: row.who,
    reading: row.number,
    title: 'Accepted and signed',
    lines: [
      `As ${row.role}: ${row.meaning}`,
      ...answers
        .filter((answer) => answer.reading_id === row.reading_id)
        .map(
          ({ check_name: check, answer, reason }) =>
            `Look “${check}”: ${answer === 'accept-as-is' ? 'accepted as is' : 'set aside'}. ${reason}`,
        ),
      `Digest ${row.digest}`,
    ],
  }));
}

async function withdrawals(frameId: number): Steps {
  const rows = await select<{
    asked_at: Date;
    asker: string;
    reason: string;
    number: number;
    answer: string | null;
    words: string | null;
    answered_at: Date | null;
    answerer: string | null;
  }>(
    `SELECT w.proposed_at AS asked_at, pa.name AS asker, w.reason, r.number, a.answer, a.words, a.answered_at,
       pb.name AS answerer FROM withdrawal_proposals w JOIN readings r ON r.id = w.reading_id
     JOIN people pa ON pa.id = w.proposed_by LEFT JOIN withdrawal_answers a ON a.proposal_id = w.id
     LEFT JOIN people pb ON pb.id = a.answered_by WHERE r.frame_id = :frameId`,
    { frameId },
  );
  return rows.flatMap((row) => {
    const asked: HistoryStep = {
      at: row.asked_at.toISOString(),
      step: 'asked',
      who: row.asker,
      reading: row.number,
      title: 'Withdrawal asked for',
      lines: [row.reason],
    };
    if (!row.answered_at) return [asked];
    const confirmed = row.answer === 'confirmed';
    const answered: HistoryStep = {
      at: row.answered_at.toISOString(),
      step: confirmed ? 'withdrawn' : 'asked',
      who: row.answerer ?? '',
      reading: row.number,
      title: confirmed ? 'Withdrawn, confirmed by a second person' : 'Withdrawal declined',
      lines: row.words ? [row.words] : [],
    };
    return [asked, answered];
  });
}

async function outcomes(frameId: number): Steps {
  const rows = await select<{ at: Date; who: string; outcome: Outcome; reason: string }>(
    `SELECT o.set_at AS at, p.name AS who, o.outcome, o.reason FROM unit_outcomes o JOIN people p ON p.id = o.set_by
     JOIN frames f ON f.unit_id = o.unit_id WHERE f.id = :frameId`,
    { frameId },
  );
  return rows.map(({ at, who, outcome, reason }) => ({
    at: at.toISOString(),
    step: 'outcome',
    who,
    reading: null,
    title: `Outcome of the unit: ${OUTCOME_WORDS[outcome].toLowerCase()}`,
    lines: reason ? [reason] : [],
  }));
}
