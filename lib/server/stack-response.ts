import 'server-only';
import { promisify } from 'node:util';
import { gzip } from 'node:zlib';
import type { StoredStack } from './band-stacks';

/** Packed by zlib's own threads; the lowest level already takes the even parts of a stack. */
const pack = promisify(gzip);
const LEVEL = 1;

/**
 * The bytes of a band stack under their hash, packed where the client takes application/gzip. (A content encoding would
 * be the usual way, but the framework takes that header away.)
 */
export async function stackResponse(
  { sha256, bytes }: StoredStack,
  request: Request,
  cacheControl: string,
): Promise<Response> {
  const etag = `"${sha256}"`;
  const headers: Record<string, string> = {
    etag,
    'x-stack-sha256': sha256,
    'cache-control': cacheControl,
    // A shared computer's cache must not answer the next person.
    vary: 'cookie, accept',
  };
  if (request.headers.get('if-none-match')?.includes(etag))
    return new Response(null, { status: 304, headers });
  const takesGzip = request.headers.get('accept')?.includes('application/gzip') ?? false;
  const body = takesGzip ? await pack(bytes, { level: LEVEL }) : bytes;
  return new Response(body, {
    headers: {
      ...headers,
      'content-type': takesGzip ? 'application/gzip' : 'application/octet-stream',
      'content-length': String(body.length),
    },
  });
}
