import 'server-only';
import type { SourceView } from '@/lib/domain/views';
import { db, select } from '../db';
import { certificateLinks } from './certificates';

export async function listSources(): Promise<SourceView[]> {
  const rows = await db().tables.sources.findAll({ order: [['name', 'ASC']] });
  const revisions = await select<{ source_id: number; many: number }>(
    'SELECT source_id, MAX(number) AS many FROM source_certificates GROUP BY source_id',
  );
  const numberOf = new Map(revisions.map(({ source_id, many }) => [source_id, many]));
  const files = await certificateLinks(rows.map(({ file }) => file));
  return rows.map(({ id, name, kind, isReference, vacuumNm, uNm, certificate, file, due, note }) => ({
    id,
    name,
    kind,
    isReference,
    vacuumNm,
    uNm,
    certificate,
    file: file === null ? null : (files.get(file) ?? null),
    due,
    note,
    revision: numberOf.get(id) ?? 1,
  }));
}
