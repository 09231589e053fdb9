import 'server-only';
import type { Readable } from 'node:stream';
import { AppError } from '@/lib/domain/errors';
import { FRAME_STEPS } from '@/lib/domain/life-cycle';
import type { ScanDrawing } from '@/lib/domain/scan-result';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';
import { loadFrame } from './frame-facts';
import { drawScanInPool, previewInPool } from './measure-pool';
import { isScan } from './scan-frames';
import { openObject, originalKey, previewKey, putObject, readObject } from './storage';

/** The bytes of a frame as received. Throws NOT_FOUND while they are not in the store. */
export async function frameOriginal(
  frameId: number,
): Promise<{ body: Readable; bytes: number; fileName: string; mediaType: string }> {
  const { sha256, fileName, mediaType } = await loadFrame(frameId);
  const object = await openObject(originalKey(sha256));
  if (!object) throw new AppError('NOT_FOUND', 'The bytes of this frame are not in the store.');
  return { ...object, fileName, mediaType };
}

/** The small picture of a frame, made when it is first asked for. Its tag changes with the engine that drew it. */
export async function framePhoto(frameId: number): Promise<{ webp: Uint8Array<ArrayBuffer>; tag: string }> {
  const frame = await loadFrame(frameId);
  if (isScan(frame)) throw new AppError('NOT_FOUND', 'This frame is a line scan, no picture.');
  const { sha256, state } = frame;
  const tag = `"${sha256.slice(0, 32)}-${ENGINE_VERSION}"`;
  const key = previewKey(sha256, ENGINE_VERSION);
  const kept = await readObject(key);
  if (kept) return { webp: kept, tag };
  const bytes = (FRAME_STEPS.land.from as readonly string[]).includes(state)
    ? null
    : await readObject(originalKey(sha256));
  if (!bytes) throw new AppError('NOT_FOUND', 'The bytes of this frame are not in the store yet.');
  const picture = await previewInPool(bytes);
  if (!picture) throw new AppError('NOT_FOUND', 'This file cannot be shown as a picture.');
  await putObject(key, picture.webp, picture.webp.length, 'image/webp');
  return { webp: new Uint8Array(picture.webp), tag };
}

/** The line scan of a frame; `draw` reads it. Throws NOT_FOUND where the frame is no scan or the file gives none. */
export async function frameScan(
  frameId: number,
): Promise<{ sha256: string; draw: () => Promise<ScanDrawing> }> {
  const frame = await loadFrame(frameId);
  if (!isScan(frame)) throw new AppError('NOT_FOUND', 'This frame is a picture, no line scan.');
  const draw = async () => {
    const bytes = await readObject(originalKey(frame.sha256));
    const drawing = bytes ? await drawScanInPool(bytes) : null;
    if (!drawing) throw new AppError('NOT_FOUND', 'The file of this frame gives no scan.');
    return drawing;
  };
  return { sha256: frame.sha256, draw };
}
