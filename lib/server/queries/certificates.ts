import 'server-only';
import type { Readable } from 'node:stream';
import type { Transaction } from 'sequelize';
import { AppError } from '@/lib/domain/errors';
import type { CertificateLink } from '@/lib/domain/views';
import { db, select } from '../db';
import { certificateKey, openObject } from '../storage';

/** The certificates behind these hashes. */
export async function certificateLinks(
  hashes: readonly (string | null)[],
  transaction?: Transaction,
): Promise<Map<string, CertificateLink>> {
  const wanted = [...new Set(hashes.filter((hash) => hash !== null))];
  if (!wanted.length) return new Map();
  const rows = await select<CertificateLink>(
    'SELECT sha256, file_name AS fileName FROM certificate_files WHERE sha256 IN (:wanted)',
    { wanted },
    transaction,
  );
  return new Map(rows.map((row) => [row.sha256, row]));
}

/** Throws beside its field when a value names a certificate nobody handed in. */
export async function requireCertificate(
  file: string | null,
  field: string,
  transaction?: Transaction,
): Promise<void> {
  if (file === null || (await certificateLinks([file], transaction)).has(file)) return;
  const message = 'This certificate is not in the store. Add its file again.';
  throw new AppError('BAD_INPUT', message, { [field]: message });
}

/** A certificate's bytes as they were handed in. Throws NOT_FOUND for a hash nobody handed in. */
export async function openCertificate(
  sha256: string,
): Promise<{ body: Readable; bytes: number; fileName: string; mediaType: string }> {
  const row = await db().tables.certificateFiles.findByPk(sha256);
  if (!row) throw new AppError('NOT_FOUND', 'There is no such certificate.');
  const object = await openObject(certificateKey(sha256));
  if (!object) throw new AppError('NOT_FOUND', 'The bytes of this certificate are not in the store.');
  return { ...object, fileName: row.fileName, mediaType: row.mediaType };
}
