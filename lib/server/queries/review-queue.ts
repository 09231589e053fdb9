import 'server-only';
import { READING_STEPS } from '@/lib/domain/life-cycle';
import { moveFrom, moveNeedsReason } from '@/lib/domain/move';
import type { FindingWord } from '@/lib/domain/reading-result';
import {
  RISKS,
  riskOf,
  WHOLE_QUEUE,
  type QueueFilter,
  type QueueRow,
  type QueueView,
  type Risk,
} from '@/lib/domain/review-queue';
import type { Verdict } from '@/lib/domain/specification';
import { select } from '../db';
import { frameRows } from './frame-rows';
import { contains, pageOf } from './paging';

/** One waiting reading with what decides its place. */
export interface QueueEntry {
  readingId: number;
  frameId: number;
  version: number;
  benchId: number;
  bench: string;
  sentAt: Date;
  sentBy: string;
  risk: Risk;
  because: string;
}

interface Row {
  readingId: number;
  frameId: number;
  version: number;
  benchId: number;
  bench: string;
  sentAt: Date;
  sentBy: string;
  weight: number;
  verdict: Verdict | null;
  word: FindingWord;
  wordText: string;
  lotId: number | null;
  supplier: string | null;
  valueNm: number | null;
  firstNm: number | null;
  firstU: number | null;
}

const MOST_WAITING = 5000;
const WAITS = READING_STEPS.send.to;

/** What waits for a reviewer: gravest group first, in it the heaviest, then the one that waits longest. */
export async function reviewQueue(filter: QueueFilter = WHOLE_QUEUE): Promise<QueueEntry[]> {
  const entries = await waiting({ ...filter, risk: null });
  return filter.risk === null ? entries : entries.filter(({ risk }) => risk === filter.risk);
}

async function waiting({ benchId, find }: QueueFilter): Promise<QueueEntry[]> {
  const parts = ['st.status = :waits'];
  if (benchId !== null) parts.push('st.bench_id = :benchId');
  if (find) parts.push('f.find_text LIKE :find');
  const rows = await select<Row>(
    `SELECT st.reading_id AS readingId, st.frame_id AS frameId, st.version, st.bench_id AS benchId, b.name AS bench,
       st.sent_at AS sentAt, COALESCE(p.name, '') AS sentBy, st.risk AS weight, r.verdict, r.word,
       r.word_text AS wordText, r.lot_id AS lotId, l.supplier, r.value_nm AS valueNm, first.value_nm AS firstNm,
       first.u_nm AS firstU
     FROM reading_states st JOIN readings r ON r.id = st.reading_id JOIN frames f ON f.id = st.frame_id
     JOIN benches b ON b.id = st.bench_id LEFT JOIN people p ON p.id = st.sent_by LEFT JOIN lots l ON l.id = r.lot_id
     LEFT JOIN readings first ON first.id = (SELECT MIN(o.id) FROM readings o
       WHERE o.frame_id = st.frame_id AND o.setup_id = f.setup_id AND o.value_nm IS NOT NULL)
     WHERE ${parts.join(' AND ')} ORDER BY st.sent_at, st.reading_id LIMIT ${MOST_WAITING}`,
    { waits: WAITS, benchId, find: contains(find) },
  );
  const known = await acceptedLots();
  return rows
    .map((row) => ({ row, told: riskOf(factsOf(row, known)) }))
    .sort((a, b) => RISKS.indexOf(a.told.risk) - RISKS.indexOf(b.told.risk) || b.row.weight - a.row.weight)
    .map(({ row, told }) => ({
      readingId: row.readingId,
      frameId: row.frameId,
      version: row.version,
      benchId: row.benchId,
      bench: row.bench,
      sentAt: row.sentAt,
      sentBy: row.sentBy,
      ...told,
    }));
}

function factsOf(row: Row, known: Map<string, Set<number>>) {
  const first = row.firstNm === null ? null : { valueNm: row.firstNm, uNm: row.firstU };
  const lots = row.supplier ? known.get(row.supplier) : undefined;
  const others = lots ? [...lots].filter((id) => id !== row.lotId).length : 0;
  return {
    verdict: row.verdict,
    word: row.word,
    wordText: row.wordText,
    newSupplier: Boolean(row.supplier) && others === 0,
    moved: moveNeedsReason(moveFrom(first, row.valueNm)),
  };
}

/** The lots of each supplier that have an accepted reading. */
async function acceptedLots(): Promise<Map<string, Set<number>>> {
  const rows = await select<{ supplier: string; id: number }>(
    `SELECT DISTINCT l.supplier, l.id FROM lots l JOIN readings r ON r.lot_id = l.id
     JOIN reading_states st ON st.reading_id = r.id AND st.status = :accepted WHERE l.supplier <> ''`,
    { accepted: READING_STEPS.accept.to },
  );
  const known = new Map<string, Set<number>>();
  for (const { supplier, id } of rows) known.set(supplier, (known.get(supplier) ?? new Set()).add(id));
  return known;
}

/** A page of the queue with its counts; the counts are under the other filters. */
export async function queuePage(filter: QueueFilter, wantedPage: number): Promise<QueueView> {
  const all = await waiting({ ...filter, risk: null });
  const chosen = filter.risk === null ? all : all.filter(({ risk }) => risk === filter.risk);
  const { page, pages, offset, rows } = pageOf(chosen.length, wantedPage);
  const counts = Object.fromEntries(RISKS.map((risk) => [risk, 0])) as Record<Risk, number>;
  for (const { risk } of all) counts[risk] += 1;
  const oldest = all.reduce<Date | null>((old, { sentAt }) => (!old || sentAt < old ? sentAt : old), null);
  const benches = filter.benchId === null ? all : await waiting(WHOLE_QUEUE);
  return {
    rows: await queueRows(chosen.slice(offset, offset + rows)),
    total: chosen.length,
    page,
    pages,
    counts,
    oldestAt: oldest?.toISOString() ?? null,
    benches: [
      ...new Map(benches.map(({ benchId, bench }) => [benchId, { id: benchId, name: bench }])).values(),
    ],
  };
}

/** The entries with what a list shows of them. */
export async function queueRows(entries: readonly QueueEntry[]): Promise<QueueRow[]> {
  const frames = await frameRows(entries.map(({ frameId }) => frameId));
  const byId = new Map(frames.map((frame) => [frame.id, frame]));
  return entries.flatMap((entry) => {
    const frame = byId.get(entry.frameId);
    // Decided between the two looks at the database: it waits no longer.
    if (frame?.reading?.id !== entry.readingId) return [];
    const { subject, fileName } = frame;
    return {
      readingId: entry.readingId,
      frameId: entry.frameId,
      version: entry.version,
      name: subject.kind === 'unit' ? subject.serial : subject.kind === 'source' ? subject.name : fileName,
      subject,
      bench: entry.bench,
      reading: frame.reading,
      risk: entry.risk,
      because: entry.because,
      sentBy: entry.sentBy,
      sentAt: entry.sentAt.toISOString(),
    };
  });
}
