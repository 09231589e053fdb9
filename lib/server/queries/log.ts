import 'server-only';
import type { LogPage, LogRow } from '@/lib/domain/views';
import { select } from '../db';
import { contains, pageOf } from './paging';

interface Row {
  id: number;
  at: Date;
  who: string;
  action: string;
  subject_kind: string;
  subject_id: number | null;
  subject: string;
  frame_id: number | null;
  before_json: string;
  after_json: string;
  hash: string;
}

/** One page of the log, newest first. */
export async function listLog(q: { page: number; find: string; action: string }): Promise<LogPage> {
  const parts = ['TRUE'];
  if (q.action) parts.push('a.action = :action');
  if (q.find.trim()) parts.push('(a.who LIKE :find OR a.subject LIKE :find)');
  const values = { action: q.action, find: contains(q.find) };
  const where = parts.join(' AND ');
  const [{ total }] = await select<{ total: number }>(
    `SELECT COUNT(*) AS total FROM audit_rows a WHERE ${where}`,
    values,
  );
  const { page, pages, offset, rows } = pageOf(total, q.page);
  const found = await select<Row>(
    `SELECT a.id, a.at, a.who, a.action, a.subject_kind, a.subject_id, a.subject, r.frame_id, a.before_json, a.after_json, a.hash
     FROM audit_rows a LEFT JOIN readings r ON a.subject_kind = 'reading' AND r.id = a.subject_id
     WHERE ${where} ORDER BY a.id DESC LIMIT :rows OFFSET :offset`,
    { ...values, rows, offset },
  );
  const actions = await select<{ action: string }>('SELECT DISTINCT action FROM audit_rows ORDER BY action');
  return { rows: found.map(logRow), total, page, pages, actions: actions.map(({ action }) => action) };
}

function logRow(row: Row): LogRow {
  return {
    id: row.id,
    at: row.at.toISOString(),
    who: row.who,
    action: row.action,
    subject: row.subject,
    subjectHref: hrefOf(row),
    before: JSON.parse(row.before_json),
    after: JSON.parse(row.after_json),
    hash: row.hash,
  };
}

function hrefOf({ subject_kind, subject_id, frame_id }: Row): string | null {
  switch (subject_kind) {
    case 'frame':
      return `/frames/${subject_id}`;
    case 'reading':
      return frame_id === null ? null : `/frames/${frame_id}?reading=${subject_id}`;
    case 'bench':
      return `/benches/${subject_id}`;
    case 'lot':
      return `/lots/${subject_id}`;
    case 'person':
      return '/people';
    case 'specification':
      return '/specifications';
    case 'source':
      return '/sources';
    default:
      return null;
  }
}
