'use client';

import { useEffect, useRef, useState } from 'react';
import type { UploadItem } from '@/lib/client/use-uploads';
import type { FrameRow } from '@/lib/domain/views';
import { FrameLine, ItemLine } from './intake-rows';

interface Props {
  frames: FrameRow[];
  items: UploadItem[];
  sameAs: Record<number, number>;
  spanMm: number;
  onSend: (frame: FrameRow, note: string) => Promise<void>;
  onReplaceFrame: (frame: FrameRow, file: File) => void;
  onRetry: (key: number, serial?: string) => void;
  onRemove: (key: number) => void;
  onReplaceItem: (item: UploadItem, file: File) => void;
}

/** A clock for the time left, ticking only while something is copied. */
function useNow(running: boolean): number {
  const [now, setNow] = useState(0);
  useEffect(() => {
    if (!running) return undefined;
    const timer = setInterval(() => setNow(Date.now()), 500);
    return () => clearInterval(timer);
  }, [running]);
  return now;
}

/** Frames that have landed, then the files on their way, newest last; a phone shows the newest first. */
export function IntakeList(props: Props) {
  const { frames, items, sameAs, spanMm } = props;
  const nowMs = useNow(items.some((item) => item.state === 'sending'));
  const end = useRef<HTMLDivElement>(null);
  // Newest last: a file just added would else come to stand below the edge of the screen.
  useEffect(() => {
    if (items.length) end.current?.scrollIntoView({ block: 'nearest' });
  }, [items.length]);
  if (!frames.length && !items.length) return null;
  return (
    <div className="intake-list" role="list" aria-label="Frames of this intake">
      {frames.map((frame) => (
        <FrameLine
          key={frame.id}
          frame={frame}
          spanMm={spanMm}
          sameAs={sameAs[frame.id] ?? null}
          onSend={props.onSend}
          onReplace={props.onReplaceFrame}
        />
      ))}
      {items.map((item) => (
        <ItemLine
          key={`item-${item.key}`}
          item={item}
          nowMs={nowMs}
          onRetry={(serial) => props.onRetry(item.key, serial)}
          onRemove={() => props.onRemove(item.key)}
          onReplace={(file) => props.onReplaceItem(item, file)}
        />
      ))}
      <div ref={end} className="list-end" />
    </div>
  );
}
