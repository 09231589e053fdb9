'use client';

import { useCallback, useEffect, useState } from 'react';
import { frameIsMoving } from '@/lib/domain/life-cycle';
import type { FrameRow } from '@/lib/domain/views';

const EVERY_MS = 1000;
/** Frames asked about in one request. */
const AT_ONCE = 200;

export interface LiveFrames {
  frames: FrameRow[];
  /** The last look did not reach the service. */
  lost: boolean;
  put: (frame: FrameRow) => void;
  hide: (keep: (frame: FrameRow) => boolean) => void;
  /** Looks again at these now. */
  look: (ids: readonly number[]) => Promise<void>;
}

async function fetchFrames(ids: readonly number[]): Promise<FrameRow[]> {
  const response = await fetch(`/api/frames/status?ids=${ids.slice(0, AT_ONCE).join(',')}`, {
    cache: 'no-store',
  });
  if (!response.ok) throw new TypeError(`status answered ${response.status}`);
  const body = (await response.json()) as { frames: FrameRow[] };
  return body.frames;
}

/** Frames of a list, looked at every second only while one of them moves. */
export function useLiveFrames(initial: readonly FrameRow[]): LiveFrames {
  const [frames, setFrames] = useState<FrameRow[]>([...initial]);
  const [lost, setLost] = useState(false);

  const look = useCallback(async (ids: readonly number[]) => {
    try {
      const fresh = new Map((await fetchFrames(ids)).map((frame) => [frame.id, frame]));
      setFrames((before) => before.map((frame) => fresh.get(frame.id) ?? frame));
      setLost(false);
    } catch (problem) {
      if (!(problem instanceof TypeError)) throw problem;
      setLost(true);
    }
  }, []);

  const moving = frames
    .filter((frame) => frameIsMoving(frame.state))
    .map((frame) => frame.id)
    .join(',');
  useEffect(() => {
    if (!moving) return undefined;
    const ids = moving.split(',').map(Number);
    let busy = false;
    const timer = setInterval(() => {
      if (busy) return;
      busy = true;
      void look(ids).finally(() => {
        busy = false;
      });
    }, EVERY_MS);
    return () => clearInterval(timer);
  }, [moving, look]);

  const put = useCallback((frame: FrameRow) => {
    setFrames((before) => [...before.filter((f) => f.id !== frame.id), frame]);
  }, []);
  const hide = useCallback((keep: (frame: FrameRow) => boolean) => {
    setFrames((before) => before.filter(keep));
  }, []);
  return { frames, lost, put, hide, look };
}
