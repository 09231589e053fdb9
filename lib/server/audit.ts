import 'server-only';
import type { Transaction } from 'sequelize';
import { canonicalJson, sha256 } from './canonical';
import { db, select } from './db';
import type { CommandContext } from './context';

export type SubjectKind =
  | 'person'
  | 'bench'
  | 'setup'
  | 'certificate'
  | 'specification'
  | 'lot'
  | 'unit'
  | 'source'
  | 'frame'
  | 'reading'
  | 'product';

export interface AuditEntry {
  action: string;
  subject: { kind: SubjectKind; id: number | null; text: string };
  before: unknown;
  after: unknown;
}

interface StoredRow {
  id: number;
  at: Date;
  person_id: number | null;
  who: string;
  action: string;
  subject_kind: string;
  subject_id: number | null;
  subject: string;
  before_json: string;
  after_json: string;
  previous_hash: string;
  hash: string;
}

function hashOf(row: Omit<StoredRow, 'hash'>): string {
  return sha256(
    canonicalJson([
      row.id,
      row.at.toISOString(),
      row.person_id,
      row.who,
      row.action,
      row.subject_kind,
      row.subject_id,
      row.subject,
      row.before_json,
      row.after_json,
      row.previous_hash,
    ]),
  );
}

/** Appends rows to the chain. Locks the head, so it must come last in its transaction. */
export async function appendAudit(
  context: CommandContext,
  entries: readonly AuditEntry[],
  transaction: Transaction,
): Promise<void> {
  if (!entries.length) return;
  const { tables } = db();
  const head = await tables.auditHead.findByPk(1, {
    transaction,
    lock: transaction.LOCK.UPDATE,
    rejectOnEmpty: true,
  });
  let { lastId, hash } = head;
  const rows = entries.map((entry) => {
    const row = {
      id: lastId + 1,
      at: context.at,
      person_id: context.actor.id || null,
      who: context.actor.name,
      action: entry.action,
      subject_kind: entry.subject.kind,
      subject_id: entry.subject.id,
      subject: entry.subject.text.slice(0, 300),
      before_json: canonicalJson(entry.before ?? null),
      after_json: canonicalJson(entry.after ?? null),
      previous_hash: hash,
    };
    lastId = row.id;
    hash = hashOf(row);
    return { ...row, hash };
  });
  await tables.auditRows.bulkCreate(
    rows.map((row) => ({
      id: row.id,
      at: row.at,
      personId: row.person_id,
      who: row.who,
      action: row.action,
      subjectKind: row.subject_kind,
      subjectId: row.subject_id,
      subject: row.subject,
      beforeJson: row.before_json,
      afterJson: row.after_json,
      previousHash: row.previous_hash,
      hash: row.hash,
    })),
    { transaction },
  );
  await head.update({ lastId, hash }, { transaction });
}

export type ChainAnswer =
  | { whole: true; rows: number; anchors: number }
  | { whole: false; rows: number; brokenAt: number; because: string };

const ROWS_AT_ONCE = 2000;

/**
 * Reads the whole chain and says where it first breaks: a row changed, missing, added, or cut off at the end. Then
 * every anchor must name a row that is still there with the same hash: a log written anew from its start is a chain
 * too, but not the one the anchors were taken from.
 */
export async function verifyChain(): Promise<ChainAnswer> {
  let previous = { id: 0, hash: '0'.repeat(64) };
  for (;;) {
    const rows = await select<StoredRow>(
      'SELECT * FROM audit_rows WHERE id > :after ORDER BY id LIMIT :many',
      { after: previous.id, many: ROWS_AT_ONCE },
    );
    for (const row of rows) {
      const because = faultOf(row, previous);
      if (because) return { whole: false, rows: previous.id, brokenAt: row.id, because };
      previous = { id: row.id, hash: row.hash };
    }
    if (rows.length < ROWS_AT_ONCE) break;
  }
  const [head] = await select<{ last_id: number; hash: string }>(
    'SELECT last_id, hash FROM audit_head WHERE id = 1',
  );
  if (head.last_id !== previous.id || head.hash !== previous.hash) {
    const because =
      previous.id > head.last_id
        ? 'A row was added at the end beside the product.'
        : 'Rows at the end are missing.';
    return { whole: false, rows: previous.id, brokenAt: Math.min(previous.id, head.last_id) + 1, because };
  }
  return checkAnchors(previous.id);
}

function faultOf(row: StoredRow, previous: { id: number; hash: string }): string | null {
  if (row.id !== previous.id + 1) return 'A row is missing before this one.';
  if (row.previous_hash !== previous.hash) return 'This row does not follow the one before it.';
  if (hashOf(row) !== row.hash) return 'The content of this row does not match its hash.';
  return null;
}

async function checkAnchors(rows: number): Promise<ChainAnswer> {
  const anchors = await select<{ day: string; last_id: number; hash: string; now: string | null }>(
    `SELECT DATE_FORMAT(a.day, '%Y-%m-%d') AS day, a.last_id, a.hash, r.hash AS now FROM audit_anchors a
     LEFT JOIN audit_rows r ON r.id = a.last_id ORDER BY a.day`,
  );
  const moved = anchors.find((anchor) => anchor.last_id > 0 && anchor.now !== anchor.hash);
  if (moved) {
    const because = `The log is another one than on ${moved.day}, when this row was written down and mailed.`;
    return { whole: false, rows, brokenAt: moved.last_id, because };
  }
  return { whole: true, rows, anchors: anchors.length };
}
