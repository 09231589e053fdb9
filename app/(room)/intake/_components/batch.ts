'use client';

import { useState } from 'react';
import type { UploadItem } from '@/lib/client/use-uploads';
import { formatBytes } from '@/lib/quantity/format';

/** All files since the list of uploads was last at rest. */
export interface Batch {
  files: number;
  done: number;
  bytes: number;
  sentBytes: number;
}

const REST: { keys: Record<number, number> } = { keys: {} };

/** Follows a batch: files that have landed leave the list, but still count until all have. */
export function useBatch(items: readonly UploadItem[]): Batch | null {
  const [seen, setSeen] = useState(REST);
  const running = items.filter((item) => item.state !== 'failed');
  const fresh = running.filter((item) => !(item.key in seen.keys));
  if (running.length === 0 && seen !== REST) setSeen(REST);
  else if (fresh.length) {
    setSeen({
      keys: { ...seen.keys, ...Object.fromEntries(fresh.map((item) => [item.key, item.file.size])) },
    });
  }
  if (running.length === 0) return null;
  const bytes = Object.values(seen.keys).reduce((sum, size) => sum + size, 0);
  const left = running.reduce(
    (sum, item) => sum + item.file.size - Math.min(item.sentBytes, item.file.size),
    0,
  );
  const files = Object.keys(seen.keys).length;
  return { files, done: files - running.length, bytes, sentBytes: Math.max(0, bytes - left) };
}

export function shareOf(batch: Batch | null): number | null {
  return batch && batch.bytes > 0 ? batch.sentBytes / batch.bytes : null;
}

export function shareWords(batch: Batch | null): string {
  if (!batch) return '';
  return `${batch.done} of ${batch.files} copied, ${formatBytes(batch.sentBytes)} of ${formatBytes(batch.bytes)}`;
}
