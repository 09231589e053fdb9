import 'server-only';
import type { FrameState } from '@/lib/domain/life-cycle';
import type { FrameRow, ReturnReason, Subject } from '@/lib/domain/views';
import { select } from '../db';
import { isScan } from '../scan-frames';
import { BRIEF_COLUMNS, BRIEF_JOINS, briefOf, type BriefColumns } from './reading-brief';
import { SPECIFICATION_COLUMNS, specificationOf, type SpecificationColumns } from './specification-columns';

type MaybeSpecification = { [Key in keyof SpecificationColumns]: SpecificationColumns[Key] | null };

interface Row extends BriefColumns, MaybeSpecification {
  id: number;
  file_name: string;
  bytes: number;
  sha256: string;
  state: FrameState;
  code: string | null;
  message: string | null;
  media_type: string;
  detector_mm: number | null;
  received_at: Date;
  uploaded_by: number;
  uploader: string;
  bench_id: number;
  bench: string;
  setup_number: number;
  unit_id: number | null;
  serial: string | null;
  lot_id: number | null;
  lot: string | null;
  source_id: number | null;
  source: string | null;
  vacuum_nm: number | null;
  source_u_nm: number | null;
  is_reference: number | null;
  return_reason: ReturnReason | null;
  return_words: string | null;
}

/** Frames by their ids, in the order the ids come in. Without a reading's curves. */
export async function frameRows(ids: readonly number[]): Promise<FrameRow[]> {
  if (!ids.length) return [];
  const rows = await select<Row>(
    `SELECT f.id, f.file_name, f.bytes, f.sha256, f.state, f.code, f.message, f.media_type, f.detector_mm, f.received_at, f.uploaded_by,
       up.name AS uploader, f.bench_id, b.name AS bench, su.number AS setup_number, f.unit_id, un.serial, f.lot_id,
       lo.number AS lot, f.source_id, so.name AS source, so.vacuum_nm, so.u_nm AS source_u_nm, so.is_reference, rt.reason AS return_reason,
       rt.words AS return_words, ${SPECIFICATION_COLUMNS}, ${BRIEF_COLUMNS}
     FROM frames f
     JOIN people up ON up.id = f.uploaded_by JOIN benches b ON b.id = f.bench_id JOIN setups su ON su.id = f.setup_id
     LEFT JOIN units un ON un.id = f.unit_id LEFT JOIN lots lo ON lo.id = f.lot_id
     LEFT JOIN specifications sp ON sp.id = lo.specification_id LEFT JOIN sources so ON so.id = f.source_id
     LEFT JOIN readings r ON r.id = f.reading_id ${BRIEF_JOINS} LEFT JOIN returns rt ON rt.reading_id = f.reading_id
     WHERE f.id IN (:ids)`,
    { ids },
  );
  const byId = new Map(rows.map((row) => [row.id, frameOf(row)]));
  return ids.flatMap((id) => byId.get(id) ?? []);
}

function frameOf(row: Row): FrameRow {
  return {
    id: row.id,
    fileName: row.file_name,
    bytes: row.bytes,
    sha256: row.sha256,
    state: row.state,
    code: row.code,
    message: row.message,
    receivedAt: row.received_at.toISOString(),
    uploadedBy: { id: row.uploaded_by, name: row.uploader },
    bench: { id: row.bench_id, name: row.bench },
    setupNumber: row.setup_number,
    subject: subjectOf(row),
    scan: isScan({ mediaType: row.media_type }) ? { detectorMm: row.detector_mm } : null,
    reading: briefOf(row),
    returned: row.return_reason ? { reason: row.return_reason, words: row.return_words ?? '' } : null,
  };
}

function subjectOf(row: Row): Subject {
  if (row.source_id !== null) {
    const { source_id: sourceId, source, vacuum_nm: vacuumNm, source_u_nm: uNm } = row;
    const isReference = Boolean(row.is_reference);
    return {
      kind: 'source',
      sourceId,
      name: source ?? '',
      vacuumNm: vacuumNm ?? 0,
      uNm: uNm ?? 0,
      isReference,
    };
  }
  if (row.unit_id === null || row.lot_id === null) return { kind: 'none' };
  return {
    kind: 'unit',
    unitId: row.unit_id,
    serial: row.serial ?? '',
    lotId: row.lot_id,
    lot: row.lot ?? '',
    // A lot always has its specification, so the join has filled every column.
    specification: specificationOf(row as SpecificationColumns),
  };
}
