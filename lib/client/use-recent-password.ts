'use client';

import { useEffect, useState } from 'react';

/** True while a password typed before still signs; turns false by itself. */
export function useRecentPassword(until: string | null): boolean {
  const [over, setOver] = useState<string | null>(null);
  useEffect(() => {
    if (until === null) return undefined;
    const timer = setTimeout(() => setOver(until), Math.max(0, Date.parse(until) - Date.now()));
    return () => clearTimeout(timer);
  }, [until]);
  return until !== null && over !== until;
}
