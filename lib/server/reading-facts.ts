import 'server-only';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import { READING_STEPS, type ReadingState, type ReadingStep } from '@/lib/domain/life-cycle';
import { barredFromAccepting, type ReadingSubject } from '@/lib/domain/permissions';
import { change, select } from './db';
import type { Work } from './transaction';

/** A reading with its state and its frame, as commands need it. */
export interface ReadingFacts {
  readingId: number;
  number: number;
  frameId: number;
  fileName: string;
  uploadedBy: number;
  status: ReadingState;
  version: number;
  sentBy: number | null;
  sentAt: Date | null;
  note: string;
  verdict: string | null;
  valueNm: number | null;
  digest: string;
  setupId: number;
  currentReadingId: number | null;
}

export async function findReading(readingId: number, transaction?: Transaction): Promise<ReadingFacts> {
  const [facts] = await select<ReadingFacts>(
    `SELECT r.id AS readingId, r.number, r.frame_id AS frameId, f.file_name AS fileName, f.uploaded_by AS uploadedBy,
       s.status, s.version, s.sent_by AS sentBy, s.sent_at AS sentAt, s.note, r.verdict, r.value_nm AS valueNm, r.digest,
       r.setup_id AS setupId, f.reading_id AS currentReadingId
     FROM readings r JOIN reading_states s ON s.reading_id = r.id JOIN frames f ON f.id = r.frame_id
     WHERE r.id = :readingId`,
    { readingId },
    transaction,
  );
  if (!facts) throw new AppError('NOT_FOUND', 'There is no such reading.');
  return facts;
}

/** What bears on who may accept, seen from one person: every sender and every fitter of this frame counts. */
export async function subjectFor(
  personId: number,
  facts: ReadingFacts,
  transaction?: Transaction,
): Promise<ReadingSubject> {
  const hands = await select<{ sentBy: number | null; madeBy: number | null; madeInReview: number }>(
    `SELECT s.sent_by AS sentBy, r.made_by AS madeBy, r.made_in_review AS madeInReview
     FROM readings r JOIN reading_states s ON s.reading_id = r.id WHERE r.frame_id = :frameId`,
    { frameId: facts.frameId },
    transaction,
  );
  return {
    uploadedBy: facts.uploadedBy,
    sentBy: hands.some((hand) => hand.sentBy === personId) ? personId : facts.sentBy,
    fittedBeforeSending: hands.flatMap((hand) =>
      hand.madeBy !== null && !hand.madeInReview ? [hand.madeBy] : [],
    ),
  };
}

const BARRED: Record<'uploaded' | 'sent' | 'fitted', string> = {
  uploaded: 'You uploaded this frame, so another reviewer must accept its reading.',
  sent: 'You sent this reading to review, so another reviewer must accept it.',
  fitted: 'You made a fit of this frame before it came to review, so another reviewer must accept it.',
};

/** Why this person may not accept this reading, as a sentence; null when nothing bars them. */
export async function whyBarred(
  personId: number,
  facts: ReadingFacts,
  transaction?: Transaction,
): Promise<string | null> {
  const barred = barredFromAccepting(personId, await subjectFor(personId, facts, transaction));
  if (barred) return BARRED[barred];
  const [crossed] = await select<{ id: number }>(
    `SELECT r.id FROM readings r JOIN readings before_it ON before_it.id = r.replaces_id
     WHERE r.frame_id = :frameId AND r.made_by = :personId AND r.made_in_review
       AND NOT (r.verdict <=> before_it.verdict) LIMIT 1`,
    { frameId: facts.frameId, personId },
    transaction,
  );
  return crossed
    ? 'Your own re-fit carried the value across a limit, so another reviewer must accept it.'
    : null;
}

export interface ReadingColumns {
  sent_by?: number;
  sent_at?: Date;
  note?: string;
  accepted_at?: Date;
}

/**
 * One step of a reading's life: a conditional update on id, status and version. Exactly one row, or somebody was
 * faster and nothing happens.
 */
export async function stepReading(
  work: Work,
  at: Date,
  facts: ReadingFacts,
  expectedVersion: number,
  step: ReadingStep,
  columns: ReadingColumns = {},
): Promise<void> {
  const { from, to } = READING_STEPS[step];
  if (facts.version !== expectedVersion) throw await changedMeanwhile('reading', facts.readingId);
  if (!(from as readonly ReadingState[]).includes(facts.status)) throw wrongState(facts.status);
  const sets = Object.keys(columns).map((column) => `, ${column} = :${column}`);
  const moved = await change(
    `UPDATE reading_states SET status = :to, version = version + 1, changed_at = :at${sets.join('')}
     WHERE reading_id = :readingId AND status = :status AND version = :version`,
    { ...columns, to, at, readingId: facts.readingId, status: facts.status, version: expectedVersion },
    work.transaction,
  );
  if (moved !== 1) throw await changedMeanwhile('reading', facts.readingId);
}

const DID: Record<string, string> = {
  'reading.accept': 'accepted',
  'reading.return': 'returned',
  'reading.send': 'sent',
  'reading.refit': 'fitted',
  'reading.withdraw': 'withdrew',
  'reading.ask-withdrawal': 'asked to withdraw',
};

/** The refusal of the second of two, with who was first and when (read outside the transaction, from the log). */
export async function changedMeanwhile(kind: 'reading' | 'frame', id: number): Promise<AppError> {
  const [last] = await select<{ who: string; action: string; at: Date }>(
    `SELECT who, action, at FROM audit_rows WHERE subject_kind = :kind AND subject_id = :id ORDER BY id DESC LIMIT 1`,
    { kind, id },
  );
  const first = last
    ? `${last.who} ${DID[last.action] ?? 'changed'} this ${kind} at ${last.at.toISOString().slice(11, 16)} UTC.`
    : `Somebody else changed this ${kind} meanwhile.`;
  return new AppError(
    'CHANGED_MEANWHILE',
    `${first} Nothing of theirs or yours is lost: load the page to see where it stands.`,
  );
}

const NOW_STANDS: Record<ReadingState, string> = {
  draft: 'This reading is a draft: it has not been sent to review.',
  review: 'This reading is in review already.',
  returned: 'This reading has been returned to the technician.',
  accepted: 'This reading has been accepted and is frozen.',
  withdrawn: 'This reading was withdrawn.',
  replaced: 'Another reading has replaced this one.',
};

function wrongState(status: ReadingState): AppError {
  return new AppError('WRONG_STATE', NOW_STANDS[status]);
}

export function readingText(facts: { fileName: string; number: number }): string {
  return `${facts.fileName}, reading ${facts.number}`;
}
