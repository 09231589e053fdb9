import type { RegionChange, ServerFit } from '@/lib/domain/views';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';

/** A band stack as the server sent it. */
export interface SentStack {
  sha256: string;
  bytes: ArrayBuffer;
}

/** What the server said no to, in its own sentence. */
export class Refused extends Error {
  constructor(message: string) {
    super(message);
    this.name = 'Refused';
  }
}

const JSON_BODY = { 'content-type': 'application/json' };

/** Answers the response or throws its sentence; a lost connection gets one of its own. */
async function ask(address: string, init: RequestInit): Promise<Response> {
  let response: Response;
  try {
    response = await fetch(address, init);
  } catch (problem) {
    if (!(problem instanceof TypeError)) throw problem;
    throw new Refused('The service could not be reached. Your change is kept here; move it again to fit it.');
  }
  if (response.ok) return response;
  const body: unknown = await response.json().catch(() => null);
  const title = body && typeof body === 'object' && 'title' in body ? body.title : null;
  throw new Refused(typeof title === 'string' ? title : 'The fit could not be made. Try again.');
}

/** Packed where this browser can unpack. */
const ACCEPT = (): string =>
  'DecompressionStream' in globalThis
    ? 'application/gzip, application/octet-stream'
    : 'application/octet-stream';

async function stackFrom(response: Response): Promise<SentStack> {
  const sha256 = response.headers.get('x-stack-sha256') ?? '';
  const isPacked = response.headers.get('content-type') === 'application/gzip';
  const plain =
    isPacked && response.body
      ? new Response(response.body.pipeThrough(new DecompressionStream('gzip')))
      : response;
  return { sha256, bytes: await plain.arrayBuffer() };
}

/** The stack a reading was measured from. */
export async function fetchStack(
  frameId: number,
  readingId: number,
  signal: AbortSignal,
): Promise<SentStack> {
  const query = new URLSearchParams({ reading: String(readingId), engine: ENGINE_VERSION });
  return stackFrom(
    await ask(`/api/frames/${frameId}/stack?${query}`, { headers: { accept: ACCEPT() }, signal }),
  );
}

/** A new stack, made for a region that the one at hand does not hold. */
export async function makeStack(
  frameId: number,
  change: RegionChange,
  signal: AbortSignal,
): Promise<SentStack> {
  const body = JSON.stringify({ ...change, engine: ENGINE_VERSION });
  return stackFrom(
    await ask(`/api/frames/${frameId}/stack`, {
      method: 'POST',
      headers: { ...JSON_BODY, accept: ACCEPT() },
      body,
      signal,
    }),
  );
}

/** A fit by the server, for a browser that cannot make it. */
export async function fitOnServer(
  frameId: number,
  change: RegionChange,
  stackSha256: string | null,
  signal: AbortSignal,
): Promise<ServerFit> {
  const body = JSON.stringify({ ...change, stackSha256 });
  const response = await ask(`/api/frames/${frameId}/preview-fit`, {
    method: 'POST',
    headers: JSON_BODY,
    body,
    signal,
  });
  return (await response.json()) as ServerFit;
}
