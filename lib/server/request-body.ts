import 'server-only';

/** The body part by part, once: a refusal half way can go on where it stopped. */
export function bodyOf(request: Request): AsyncIterableIterator<Uint8Array> {
  const reader = request.body?.getReader();
  return {
    async next() {
      const part = await reader?.read();
      return part?.value ? { done: false, value: part.value } : { done: true, value: undefined };
    },
    [Symbol.asyncIterator]() {
      return this;
    },
  };
}

/**
 * Takes the rest of a body that is refused: a browser shows an answer that comes before it has sent everything as a
 * broken line.
 */
export async function readAway(body: AsyncIterableIterator<Uint8Array>): Promise<void> {
  let part = await body.next();
  while (!part.done) part = await body.next();
}
