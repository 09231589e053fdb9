import 'server-only';
import { createReadStream } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { AppError } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import type { ScaleKind, ScaleReading } from '@/lib/domain/scale-result';
import { scaleInPool } from '../measure-pool';
import { dropSpool, spoolBody } from '../spool';
import { originalKey, putObject, sizeOf } from '../storage';

/**
 * Measures a photographed ruler or grid and keeps the picture in the store under its hash, so that the certificate
 * text of a setup can name it. Throws CANNOT_FIT with the sentence when no scale is in the picture.
 */
export async function measureScalePicture(
  body: AsyncIterable<Uint8Array>,
  wanted: { kind: ScaleKind; pitchMm: number; uPitchRelative: number },
): Promise<ScaleReading> {
  const spooled = await spoolBody(body, LIMITS.fileBytes);
  try {
    const answer = await scaleInPool(new Uint8Array(await readFile(spooled.path)), wanted);
    if (!answer.ok) throw new AppError('CANNOT_FIT', answer.message);
    const key = originalKey(spooled.sha256);
    if ((await sizeOf(key)) !== spooled.bytes) {
      await putObject(key, createReadStream(spooled.path), spooled.bytes, spooled.mediaType);
    }
    return { scale: answer, sha256: spooled.sha256 };
  } finally {
    await dropSpool(spooled.path);
  }
}
