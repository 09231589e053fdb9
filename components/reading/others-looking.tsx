'use client';

import { useLooking } from '@/lib/client/use-looking';

/** Who else has this reading open just now. */
export function OthersLooking({ readingId }: { readingId: number }) {
  const others = useLooking(readingId);
  return (
    <p className="text-small text-ink-2" role="status">
      {others.length
        ? `${others.join(' and ')} ${others.length === 1 ? 'is' : 'are'} looking at this reading too.`
        : ''}
    </p>
  );
}
