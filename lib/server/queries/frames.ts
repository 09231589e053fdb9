import 'server-only';
import {
  FRAME_STATES,
  READING_STATES,
  READING_STEPS,
  frameIsMoving,
  frameMay,
  readingMay,
} from '@/lib/domain/life-cycle';
import { can } from '@/lib/domain/permissions';
import type { FrameRow, FramesPage, FramesQuery, FrameView, May, Me } from '@/lib/domain/views';
import { select } from '../db';
import { getMe } from '../session';
import { findReading, whyBarred } from '../reading-facts';
import { frameRows } from './frame-rows';
import { outcomeOf } from './outcomes';
import { contains, pageOf } from './paging';
import { readingsOf, readingView } from './readings';

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
  if (q.find.trim()) add('f.find_text LIKE :find', { find: contains(q.find) });
  if (q.benchId !== null) add('f.bench_id = :benchId', { benchId: q.benchId });
  if (q.lotId !== null) add('f.lot_id = :lotId', { lotId: q.lotId });
  if (q.days > 0) add('f.received_at >= :since', { since: new Date(now.getTime() - q.days * 86_400_000) });
  if (q.mine) add('f.uploaded_by = :personId', { personId });
  return { where: parts.join(' AND '), values };
}

/** One page of frames, newest first, with the counts of every state under the other filters. */
export async function listFrames(q: FramesQuery, now = new Date()): Promise<FramesPage> {
  const me = q.mine ? await getMe() : null;
  const { where, values } = filterOf(q, me?.id ?? 0, now);
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

export function framesByIds(ids: readonly number[]): Promise<FrameRow[]> {
  return frameRows(ids);
}

/** This person's frames not yet sent to review or cleared away, newest last. */
export async function intakeFrames(personId: number): Promise<FrameRow[]> {
  const ids = await select<{ id: number }>(
    'SELECT id FROM frames WHERE uploaded_by = :personId AND in_intake ORDER BY id DESC LIMIT 500',
    { personId },
  );
  return frameRows(ids.map(({ id }) => id).reverse());
}

/** A frame with all its readings and one of them in full: the asked one, or the newest. */
export async function findFrame(frameId: number, readingId: number | null): Promise<FrameView | null> {
  const [row] = await frameRows([frameId]);
  if (!row) return null;
  const readings = await readingsOf(frameId);
  const wanted = readingId ?? row.reading?.id ?? readings[0]?.id ?? null;
  if (readingId !== null && !readings.some(({ id }) => id === readingId)) return null;
  const [size] = await select<{ width_px: number | null; height_px: number | null }>(
    'SELECT width_px, height_px FROM frames WHERE id = :frameId',
    { frameId },
  );
  return {
    ...row,
    widthPx: size.width_px,
    heightPx: size.height_px,
    readings,
    shown: wanted === null ? null : await readingView(wanted),
    outcome: row.subject.kind === 'unit' ? await outcomeOf(row.subject.unitId) : null,
  };
}

/** What the signed-in person may do with the shown reading. */
export async function mayFor(me: Me, frame: FrameView): Promise<May> {
  const { shown } = frame;
  if (!shown) {
    const fit = frameMay('fit', frame.state) && !frameIsMoving(frame.state) && can(me, 'readings.send');
    return { fit, send: false, accept: false, return: false, outcome: false, acceptBarred: null };
  }
  const isCurrent = frame.reading?.id === shown.id;
  const inReview = readingMay('accept', shown.status);
  const acceptBarred = can(me, 'readings.accept')
    ? await whyBarred(me.id, await findReading(shown.id))
    : null;
  const fitRight = inReview ? 'readings.return' : 'readings.send';
  return {
    fit: isCurrent && readingMay('replace', shown.status) && can(me, fitRight),
    send: isCurrent && readingMay('send', shown.status) && can(me, 'readings.send'),
    accept: isCurrent && inReview && can(me, 'readings.accept') && acceptBarred === null,
    return: isCurrent && readingMay('return', shown.status) && can(me, 'readings.return'),
    outcome: frame.subject.kind === 'unit' && can(me, 'outcomes.set'),
    acceptBarred,
  };
}
