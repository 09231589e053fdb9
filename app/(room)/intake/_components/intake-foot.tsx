'use client';

import { useEffect, useRef, useState } from 'react';
import { LaserCautionsSheet } from '@/components/setups/laser-cautions-sheet';
import { Button, buttonClass } from '@/components/ui/button';
import type { UploadItem } from '@/lib/client/use-uploads';
import { count } from '@/lib/client/words';
import { frameIsMoving } from '@/lib/domain/life-cycle';
import type { FrameRow } from '@/lib/domain/views';
import { ChooseFiles } from './choose-files';

interface Props {
  frames: FrameRow[];
  items: UploadItem[];
  /** What the last action said. */
  said: string;
  clear: number;
  waiting: boolean;
  closed: string | null;
  onAdd: (files: File[]) => void;
  onEmpty: () => void;
  onSend: () => void;
}

/** "5 frames: 2 fitted, 2 on the way, 1 unreadable" */
function summary(frames: readonly FrameRow[], items: readonly UploadItem[]): string {
  const all = frames.length + items.length;
  if (!all) return 'No frames in this intake yet';
  const of = (test: (frame: FrameRow) => boolean) => frames.filter(test).length;
  const failed = items.filter((item) => item.state === 'failed').length;
  const parts: [number, string][] = [
    [of((f) => f.reading !== null), 'fitted'],
    [of((f) => frameIsMoving(f.state)) + items.length - failed, 'on the way'],
    [of((f) => f.reading === null && f.state === 'refused'), 'refused'],
    [of((f) => f.state === 'unreadable'), 'unreadable'],
    [failed, 'not copied'],
  ];
  return `${count(all, 'frame')}: ${parts
    .filter(([n]) => n > 0)
    .map(([n, word]) => `${n} ${word}`)
    .join(', ')}`;
}

const SAY_EVERY_MS = 2000;

/** Says a text at most every two seconds, so that a screen reader is not flooded. */
function useSlowly(text: string): string {
  const [slow, setSlow] = useState(text);
  const last = useRef(0);
  useEffect(() => {
    const wait = Math.max(0, last.current + SAY_EVERY_MS - Date.now());
    const timer = setTimeout(() => {
      last.current = Date.now();
      setSlow(text);
    }, wait);
    return () => clearTimeout(timer);
  }, [text]);
  return slow;
}

export function IntakeFoot({ frames, items, said, clear, waiting, closed, onAdd, onEmpty, onSend }: Props) {
  const text = summary(frames, items);
  const slow = useSlowly(text);
  return (
    <div className="intake-bottom stuck">
      <ChooseFiles
        className={buttonClass('main', true, 'add-phone')}
        disabled={closed !== null}
        onFiles={onAdd}
      >
        Add frames
      </ChooseFiles>
      <div className="min-w-0 text-ink-2">
        <p>
          {text}
          {frames.length + items.length > 1 ? (
            <>
              <span className="not-phone-inline">, newest last</span>
              <span className="phone-inline">, newest first</span>
            </>
          ) : null}
        </p>
        <p className="only-heard" aria-live="polite">
          {slow}
        </p>
        <LaserCautionsSheet />
        <p className="mt-1 text-small font-medium text-ink empty:hidden" role="status">
          {said}
        </p>
        {closed ? <p className="phone-inline text-small font-medium text-ink">{closed}</p> : null}
      </div>
      <div className="do">
        <ChooseFiles
          camera
          className={buttonClass('plain', false, 'camera-phone')}
          disabled={closed !== null}
          onFiles={onAdd}
        >
          Photograph
        </ChooseFiles>
        <Button
          disabled={!frames.length && !items.length}
          busy={waiting}
          onClick={onEmpty}
          className="empty-list"
        >
          Empty the list
        </Button>
        <Button
          kind={clear ? 'main' : 'plain'}
          disabled={clear === 0}
          busy={waiting}
          onClick={onSend}
          className="send-clear"
        >
          <span>
            Send {clear}
            <span className="not-phone-inline"> to review</span>
          </span>
        </Button>
      </div>
    </div>
  );
}
