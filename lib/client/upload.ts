import type { ErrorCode } from '@/lib/domain/errors';
import type { FrameRow } from '@/lib/domain/views';

export interface UploadTarget {
  benchId: number;
  lotId: number | null;
  sourceId: number | null;
  serial: string;
  /** Width of a line scan's detector; null is a point, and nothing to a picture. */
  detectorMm: number | null;
}

export type UploadAnswer =
  | { ok: true; frame: FrameRow; sameAs: number | null }
  | { ok: false; code: ErrorCode | 'LOST'; message: string };

interface Body {
  code?: ErrorCode;
  title?: string;
  frame?: FrameRow;
  sameAs?: number | null;
}

const LOST: UploadAnswer = {
  ok: false,
  code: 'LOST',
  message: 'The connection broke off. The file is kept here; it goes on when the network is back.',
};

function read(text: string): Body {
  try {
    return JSON.parse(text) as Body;
  } catch (problem) {
    if (problem instanceof SyntaxError) return {};
    throw problem;
  }
}

/** Sends one file's bytes as they are. Fetch cannot tell how much has left, so this is an XMLHttpRequest. */
export function upload(
  file: File,
  target: UploadTarget,
  onProgress: (sentBytes: number) => void,
  signal: AbortSignal,
): Promise<UploadAnswer> {
  const query = new URLSearchParams({ name: file.name, benchId: String(target.benchId) });
  if (target.lotId !== null) query.set('lotId', String(target.lotId));
  if (target.sourceId !== null) query.set('sourceId', String(target.sourceId));
  if (target.serial) query.set('serial', target.serial);
  if (target.detectorMm !== null) query.set('detectorMm', String(target.detectorMm));
  return new Promise((resolve) => {
    const request = new XMLHttpRequest();
    request.open('POST', `/api/upload?${query}`);
    request.setRequestHeader('content-type', 'application/octet-stream');
    request.upload.onprogress = (event) => onProgress(event.loaded);
    request.onerror = () => resolve(LOST);
    request.ontimeout = () => resolve(LOST);
    request.onabort = () => resolve(LOST);
    request.onload = () => {
      const body = read(request.responseText);
      if (request.status < 300 && body.frame)
        resolve({ ok: true, frame: body.frame, sameAs: body.sameAs ?? null });
      else if (request.status === 401)
        resolve({ ok: false, code: 'NOT_SIGNED_IN', message: 'Your session has ended.' });
      else {
        resolve({
          ok: false,
          code: body.code ?? 'BROKEN',
          message: body.title ?? 'The service did not take the file. It is kept here; send it again.',
        });
      }
    };
    signal.addEventListener('abort', () => request.abort(), { once: true });
    request.send(file);
  });
}
