import 'server-only';
import { createReadStream } from 'node:fs';
import { AppError } from '@/lib/domain/errors';
import { CERTIFICATE_BYTES } from '@/lib/domain/setup';
import type { CertificateLink } from '@/lib/domain/views';
import { certificateTypeOf } from '../certificate-type';
import type { CommandContext } from '../context';
import { db } from '../db';
import { brokeOff, dropSpool, spoolBody, type Spooled } from '../spool';
import { certificateKey, putObject, sizeOf } from '../storage';
import { inTransaction } from '../transaction';

interface Incoming {
  fileName: string;
  declaredBytes: number;
  body: AsyncIterable<Uint8Array>;
}

/**
 * Keeps a certificate in the store under its hash, so that a value can name it. The same bytes are kept once, under the
 * name they came with first. Its row is written when the bytes are there.
 */
export async function addCertificate(context: CommandContext, incoming: Incoming): Promise<CertificateLink> {
  if (incoming.declaredBytes > CERTIFICATE_BYTES) {
    throw new AppError(
      'TOO_LARGE',
      `A certificate has at most ${CERTIFICATE_BYTES / 1024 / 1024} MB. Scan it with less resolution.`,
    );
  }
  const fileName = (incoming.fileName.split(/[/\\]/).at(-1) ?? '').replace(/[\p{Cc}\p{Cf}]/gu, '').trim();
  if (!fileName) throw new AppError('BAD_INPUT', 'The file has no name.');
  const spooled = await spoolBody(incoming.body, CERTIFICATE_BYTES, certificateTypeOf);
  try {
    if (spooled.bytes !== incoming.declaredBytes) throw brokeOff();
    const key = certificateKey(spooled.sha256);
    if ((await sizeOf(key)) !== spooled.bytes)
      await putObject(key, createReadStream(spooled.path), spooled.bytes, spooled.mediaType);
    return await keep(context, spooled, fileName.slice(-255));
  } finally {
    await dropSpool(spooled.path);
  }
}

async function keep(context: CommandContext, spooled: Spooled, fileName: string): Promise<CertificateLink> {
  const { sha256, mediaType, bytes } = spooled;
  return inTransaction(context, async (work) => {
    const [row, isNew] = await db().tables.certificateFiles.findOrCreate({
      where: { sha256 },
      defaults: { sha256, fileName, mediaType, bytes, addedBy: context.actor.id, addedAt: context.at },
      transaction: work.transaction,
    });
    if (isNew)
      work.audit({
        action: 'certificate.add',
        subject: { kind: 'certificate', id: null, text: fileName },
        before: null,
        after: { sha256, mediaType, bytes },
      });
    return { sha256, fileName: row.fileName };
  });
}
