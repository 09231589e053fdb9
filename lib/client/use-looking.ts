'use client';

import { useEffect, useState } from 'react';

const EVERY_MS = 10_000;

async function ask(readingId: number, signal: AbortSignal): Promise<string[]> {
  const response = await fetch(`/api/readings/${readingId}/looking`, { method: 'POST', signal });
  if (!response.ok) return [];
  const body = (await response.json()) as { others: string[] };
  return body.others;
}

/** Who else has this reading open, by name; asked while the page is in sight. */
export function useLooking(readingId: number): string[] {
  const [others, setOthers] = useState<string[]>([]);
  useEffect(() => {
    const abort = new AbortController();
    const look = () => {
      if (document.visibilityState !== 'visible') return;
      // Without an answer nobody is named: it is a courtesy, and the server refuses what comes second anyway.
      ask(readingId, abort.signal).then(setOthers, () => setOthers([]));
    };
    look();
    const timer = setInterval(look, EVERY_MS);
    return () => {
      clearInterval(timer);
      abort.abort();
    };
  }, [readingId]);
  return others;
}
