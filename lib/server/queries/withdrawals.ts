import 'server-only';
import type { WithdrawalAnswerWord, WithdrawalRow, WithdrawalView } from '@/lib/domain/withdrawal';
import { select } from '../db';

interface Row {
  id: number;
  reason: string;
  proposed_by: number;
  asker: string;
  proposed_at: Date;
  answer: WithdrawalAnswerWord | null;
  words: string | null;
  answered_by: number | null;
  answerer: string | null;
  answered_at: Date | null;
}

const COLUMNS = `w.id, w.reason, w.proposed_by, pa.name AS asker, w.proposed_at, a.answer, a.words, a.answered_by,
  pb.name AS answerer, a.answered_at`;
const JOINS = `JOIN people pa ON pa.id = w.proposed_by LEFT JOIN withdrawal_answers a ON a.proposal_id = w.id
  LEFT JOIN people pb ON pb.id = a.answered_by`;

function viewOf(row: Row): WithdrawalView {
  const { answer, answered_by: byId, answerer, answered_at: at } = row;
  return {
    id: row.id,
    reason: row.reason,
    askedBy: { id: row.proposed_by, name: row.asker },
    askedAt: row.proposed_at.toISOString(),
    answer:
      answer !== null && byId !== null && answerer !== null && at !== null
        ? { word: answer, words: row.words ?? '', by: { id: byId, name: answerer }, at: at.toISOString() }
        : null,
  };
}

/** The newest question about a reading: open, confirmed or declined. */
export async function withdrawalOf(readingId: number): Promise<WithdrawalView | null> {
  const [row] = await select<Row>(
    `SELECT ${COLUMNS} FROM withdrawal_proposals w ${JOINS} WHERE w.reading_id = :readingId
     ORDER BY w.id DESC LIMIT 1`,
    { readingId },
  );
  return row ? viewOf(row) : null;
}

const MOST_ROWS = 200;

/** Open questions first, then the newest answers. */
export async function listWithdrawals(): Promise<WithdrawalRow[]> {
  const rows = await select<
    Row & { reading_id: number; number: number; frame_id: number; file_name: string; serial: string | null }
  >(
    `SELECT ${COLUMNS}, w.reading_id, r.number, r.frame_id, f.file_name, u.serial
     FROM withdrawal_proposals w ${JOINS} JOIN readings r ON r.id = w.reading_id JOIN frames f ON f.id = r.frame_id
     LEFT JOIN units u ON u.id = r.unit_id ORDER BY a.id IS NOT NULL, w.id DESC LIMIT ${MOST_ROWS}`,
  );
  return rows.map((row) => ({
    ...viewOf(row),
    readingId: row.reading_id,
    readingNumber: row.number,
    frameId: row.frame_id,
    name: row.serial ?? row.file_name,
  }));
}
