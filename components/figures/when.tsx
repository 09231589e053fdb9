'use client';

import { useLook } from '@/lib/client/look';
import { formatDay, formatInstant } from '@/lib/quantity/format';

/** An instant in the zone of the person who looks, the same on the server's first paint. */
export function When({ at, dayOnly = false }: { at: string; dayOnly?: boolean }) {
  const { timeZone } = useLook();
  return (
    <time dateTime={at} className="whitespace-nowrap">
      {dayOnly ? formatDay(at, timeZone) : formatInstant(at, timeZone)}
    </time>
  );
}
