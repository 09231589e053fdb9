import 'server-only';
import { FRAME_STATES, READING_STATES, READING_STEPS } from '@/lib/domain/life-cycle';
import type { FramesPage, FramesQuery } from '@/lib/domain/views';
import { select } from '../db';
import { frameRows } from './frame-rows';
import { contains, pageOf } from './paging';

/** A frame counts under its reading's state where it has a reading, under its own where it has none. */
const STANDING = 'COALESCE(st.status, f.state)';

interface Filter {
  where: string;
  values: Record<string, unknown>;
}

function filterOf(q: FramesQuery, personId: number, now: Date): Filter {
  const parts = ['TRUE'];
  const values: Record<string, unknown> = {};
  const add = (part: string, more: Record<string, unknown>) => {
    parts.push(part);
    Object.assign(values, more);
  };
  const fingerprint = /^[0-9a-f]{8,64}$/i.test(q.find.trim());
  if (fingerprint)
    add(
      `(f.find_text LIKE :find OR f.sha256 LIKE :begins OR EXISTS (
        SELECT 1 FROM readings d WHERE d.frame_id = f.id AND d.digest LIKE :begins))`,
      { find: contains(q.find), begins: `${q.find.trim().toLowerCase()}%` },
    );
  else if (q.find.trim()) add('f.find_text LIKE :find', { find: contains(q.find) });
  if (q.benchId !== null) add('f.bench_id = :benchId', { benchId: q.benchId });
  if (q.lotId !== null) add('f.lot_id = :lotId', { lotId: q.lotId });
  if (q.days > 0) add('f.received_at >= :since', { since: new Date(now.getTime() - q.days * 86_400_000) });
  if (q.mine) add('(f.uploaded_by = :personId OR st.sent_by = :personId)', { personId });
  return { where: parts.join(' AND '), values };
}

/** The page for one person; `q.mine` keeps to the frames they uploaded. */
export async function framesPage(q: FramesQuery, personId: number, now: Date): Promise<FramesPage> {
  const { where, values } = filterOf(q, personId, now);
  const counted = await select<{ standing: string; many: number }>(
    `SELECT ${STANDING} AS standing, COUNT(*) AS many FROM frames f
     LEFT JOIN reading_states st ON st.reading_id = f.reading_id WHERE ${where} GROUP BY standing`,
    values,
  );
  const counts: Record<string, number> = Object.fromEntries(
    [...FRAME_STATES, ...READING_STATES].map((state) => [state, 0]),
  );
  for (const { standing, many } of counted) counts[standing] = many;
  const all = counted.reduce((sum, { many }) => sum + many, 0);
  const total = q.state === '' ? all : (counts[q.state] ?? 0);
  const { page, pages, offset, rows } = pageOf(total, q.page);
  const ids = await select<{ id: number }>(
    `SELECT f.id FROM frames f LEFT JOIN reading_states st ON st.reading_id = f.reading_id
     WHERE ${where} ${q.state === '' ? '' : `AND ${STANDING} = :state`} ORDER BY f.id DESC LIMIT :rows OFFSET :offset`,
    { ...values, state: q.state, rows, offset },
  );
  return {
    rows: await frameRows(ids.map(({ id }) => id)),
    counts,
    total,
    toReview: counts[READING_STEPS.send.to],
    page,
    pages,
  };
}

/** How many readings this person took or sent have come back. */
export async function returnedTo(personId: number): Promise<number> {
  const [{ many }] = await select<{ many: number }>(
    `SELECT COUNT(*) AS many FROM frames f JOIN reading_states st ON st.reading_id = f.reading_id
     WHERE st.status = :returned AND (f.uploaded_by = :personId OR st.sent_by = :personId)`,
    { personId, returned: READING_STEPS.return.to },
  );
  return many;
}
