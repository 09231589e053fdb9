import type { ActionAnswer } from '@/lib/domain/errors';

/** Calls a server action; a lost connection becomes an answer too, so that a form never loses what was typed. */
export async function callAction<T>(call: () => Promise<ActionAnswer<T>>): Promise<ActionAnswer<T>> {
  try {
    return await call();
  } catch (problem) {
    const lost = problem instanceof TypeError;
    return {
      ok: false,
      code: 'BUSY',
      message: lost
        ? 'The service could not be reached. What you typed is kept; try again when the network is back.'
        : 'The service did not answer as it should. What you typed is kept; try again.',
    };
  }
}
