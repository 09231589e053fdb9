'use client';

import { useCallback, useEffect, useReducer, useRef } from 'react';
import type { ErrorCode } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import type { FrameRow } from '@/lib/domain/views';
import { upload, type UploadTarget } from './upload';

export interface UploadItem {
  key: number;
  file: File;
  target: UploadTarget;
  addedAt: string;
  state: 'ready' | 'sending' | 'failed';
  sentBytes: number;
  startedMs: number;
  problem: { code: ErrorCode | 'LOST'; message: string } | null;
}

type Step =
  | { do: 'add'; items: UploadItem[] }
  | { do: 'change'; key: number; part: Partial<UploadItem> }
  | { do: 'remove'; key: number }
  | { do: 'retry'; codes: readonly (ErrorCode | 'LOST')[] };

const ready = { state: 'ready', sentBytes: 0, problem: null } as const;

function step(items: UploadItem[], action: Step): UploadItem[] {
  switch (action.do) {
    case 'add':
      return [...items, ...action.items];
    case 'change':
      return items.map((item) => (item.key === action.key ? { ...item, ...action.part } : item));
    case 'remove':
      return items.filter((item) => item.key !== action.key);
    case 'retry':
      return items.map((item) =>
        item.state === 'failed' && item.problem && action.codes.includes(item.problem.code)
          ? { ...item, ...ready }
          : item,
      );
  }
}

/** What is wrong with a file before a byte is sent. */
function wrongAtOnce(file: File): UploadItem['problem'] {
  if (file.size === 0)
    return { code: 'NOT_A_PICTURE', message: 'The file is empty. Copy it again, then replace it.' };
  if (file.size > LIMITS.fileBytes) {
    return {
      code: 'TOO_LARGE',
      message: 'The file is larger than 200 MB. Save it in a smaller format, then replace it.',
    };
  }
  return null;
}

const AT_ONCE = 2;
const WAITS_FOR_PERSON = [
  'LOST',
  'NOT_SIGNED_IN',
  'BUSY',
  'STORE_DOWN',
  'DATABASE_DOWN',
  'TOO_MANY',
  'BROKEN',
] as const;

export interface Uploads {
  items: UploadItem[];
  /** The session ended: nothing more is sent until the person has signed in again. */
  expired: boolean;
  add: (files: readonly File[], target: UploadTarget) => void;
  retry: (key: number, target?: Partial<UploadTarget>) => void;
  remove: (key: number) => void;
  goOn: () => void;
}

/** Sends files two at a time. A file stays in the list until its bytes and its row are safe on the server. */
export function useUploads(onLanded: (frame: FrameRow, sameAs: number | null) => void): Uploads {
  const [items, dispatch] = useReducer(step, []);
  const nextKey = useRef(1);
  const running = useRef(new Map<number, AbortController>());
  const landed = useRef(onLanded);
  useEffect(() => {
    landed.current = onLanded;
  });
  const expired = items.some((item) => item.problem?.code === 'NOT_SIGNED_IN');

  const send = useCallback(async (item: UploadItem, abort: AbortController) => {
    const progress = (sentBytes: number) => dispatch({ do: 'change', key: item.key, part: { sentBytes } });
    const answer = await upload(item.file, item.target, progress, abort.signal);
    running.current.delete(item.key);
    if (answer.ok) {
      landed.current(answer.frame, answer.sameAs);
      dispatch({ do: 'remove', key: item.key });
    } else {
      dispatch({ do: 'change', key: item.key, part: { state: 'failed', problem: answer } });
    }
  }, []);

  useEffect(() => {
    if (expired) return;
    const free = AT_ONCE - running.current.size;
    const next = items
      .filter((item) => item.state === 'ready' && !running.current.has(item.key))
      .slice(0, Math.max(0, free));
    for (const item of next) {
      const abort = new AbortController();
      running.current.set(item.key, abort);
      dispatch({ do: 'change', key: item.key, part: { state: 'sending', startedMs: Date.now() } });
      void send(item, abort);
    }
  }, [items, expired, send]);

  useEffect(() => {
    const back = () => dispatch({ do: 'retry', codes: ['LOST'] });
    window.addEventListener('online', back);
    return () => window.removeEventListener('online', back);
  }, []);

  const waiting = items.some(
    (item) => item.state !== 'failed' || WAITS_FOR_PERSON.some((code) => code === item.problem?.code),
  );
  useEffect(() => {
    if (!waiting) return undefined;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [waiting]);

  return {
    items,
    expired,
    add: (files, target) =>
      dispatch({
        do: 'add',
        items: files.map((file) => {
          const problem = wrongAtOnce(file);
          return {
            key: nextKey.current++,
            file,
            target,
            addedAt: new Date().toISOString(),
            state: problem ? 'failed' : 'ready',
            sentBytes: 0,
            startedMs: 0,
            problem,
          };
        }),
      }),
    retry: (key, target) => {
      const item = items.find((i) => i.key === key);
      if (item) dispatch({ do: 'change', key, part: { ...ready, target: { ...item.target, ...target } } });
    },
    remove: (key) => {
      running.current.get(key)?.abort();
      running.current.delete(key);
      dispatch({ do: 'remove', key });
    },
    goOn: () => dispatch({ do: 'retry', codes: WAITS_FOR_PERSON }),
  };
}
