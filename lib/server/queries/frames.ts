import 'server-only';
import { frameIsMoving, frameMay, readingMay, readingMayBeFollowed } from '@/lib/domain/life-cycle';
import { can } from '@/lib/domain/permissions';
import type { FrameRow, FramesPage, FramesQuery, FrameView, May, Me } from '@/lib/domain/views';
import { select } from '../db';
import { fitFacts } from '../frame-facts';
import { getMe } from '../session';
import { findReading, whyBarred } from '../reading-facts';
import { whyBenchStopped } from '../reference-checks';
import { frameRows } from './frame-rows';
import { framesPage } from './frames-page';
import { outcomeOf } from './outcomes';
import { readingsOf, readingView } from './readings';

/** One page of frames, newest first, with the counts of every state under the other filters. */
export async function listFrames(q: FramesQuery): Promise<FramesPage> {
  const me = q.mine ? await getMe() : null;
  return framesPage(q, me?.id ?? 0, new Date());
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

interface FrameColumns {
  width_px: number | null;
  height_px: number | null;
  bench_id: number;
  received_at: Date;
  media_type: string;
  setup_id: number;
  lot_id: number | null;
  scan_from_mm: number | null;
  scan_to_mm: number | null;
  scan_points: number | null;
}

/** A frame with all its readings and one of them in full: the asked one, or the newest. */
export async function findFrame(frameId: number, readingId: number | null): Promise<FrameView | null> {
  const [row] = await frameRows([frameId]);
  if (!row) return null;
  const readings = await readingsOf(frameId);
  const wanted = readingId ?? row.reading?.id ?? readings[0]?.id ?? null;
  if (readingId !== null && !readings.some(({ id }) => id === readingId)) return null;
  const [columns] = await select<FrameColumns>(
    `SELECT width_px, height_px, bench_id, received_at, media_type, setup_id, lot_id, scan_from_mm, scan_to_mm, scan_points
     FROM frames WHERE id = :frameId`,
    { frameId },
  );
  const { scan_from_mm: fromMm, scan_to_mm: toMm, scan_points: points } = columns;
  return {
    ...row,
    widthPx: columns.width_px,
    heightPx: columns.height_px,
    scanLength: fromMm === null || toMm === null ? null : { fromMm, toMm, points: points ?? 0 },
    readings,
    shown: wanted === null ? null : await readingView(wanted),
    facts: await fitFacts({
      id: frameId,
      benchId: columns.bench_id,
      receivedAt: columns.received_at,
      mediaType: columns.media_type,
      setupId: columns.setup_id,
      lotId: columns.lot_id,
    }),
    outcome: row.subject.kind === 'unit' ? await outcomeOf(row.subject.unitId) : null,
  };
}

/** What the signed-in person may do with the shown reading. */
export async function mayFor(me: Me, frame: FrameView): Promise<May> {
  const { shown } = frame;
  if (!shown) {
    const fit = frameMay('fit', frame.state) && !frameIsMoving(frame.state) && can(me, 'readings.send');
    return {
      fit,
      send: false,
      accept: false,
      return: false,
      outcome: false,
      withdraw: false,
      acceptBarred: null,
    };
  }
  const isCurrent = frame.reading?.id === shown.id;
  const inReview = readingMay('accept', shown.status);
  const acceptBarred = can(me, 'readings.accept')
    ? ((await whyBarred(me.id, await findReading(shown.id))) ?? (await whyBenchStopped(shown.id)))
    : null;
  const fitRight = inReview ? 'readings.return' : 'readings.send';
  return {
    fit:
      isCurrent &&
      (readingMay('replace', shown.status) || readingMayBeFollowed(shown.status)) &&
      can(me, fitRight),
    send: isCurrent && readingMay('send', shown.status) && can(me, 'readings.send'),
    accept: isCurrent && inReview && can(me, 'readings.accept') && acceptBarred === null,
    return: isCurrent && readingMay('return', shown.status) && can(me, 'readings.return'),
    outcome: frame.subject.kind === 'unit' && can(me, 'outcomes.set'),
    withdraw: isCurrent && readingMay('withdraw', shown.status) && can(me, 'readings.withdraw'),
    acceptBarred,
  };
}
