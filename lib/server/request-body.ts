import 'server-only';
import { describe, log } from './log';

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
 * broken line. A line that is broken itself has no rest.
 */
export async function readAway(body: AsyncIterableIterator<Uint8Array>): Promise<void> {
  try {
    let part = await body.next();
    while (!part.done) part = await body.next();
  } catch (problem) {
    log().debug({ problem: describe(problem) }, 'a refused body broke off');
  }
}
