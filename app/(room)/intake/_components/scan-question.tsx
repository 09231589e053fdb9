'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import type { UploadTarget } from '@/lib/client/upload';
import { count } from '@/lib/client/words';
import { looksLikeScan, textOf } from '@/lib/measure/read-scan';

interface Held {
  file: File;
  target: UploadTarget;
}

/** As many bytes as it takes to know a scan by its first lines. */
const FIRST_BYTES = 8192;

async function isScan(file: File): Promise<boolean> {
  const first = await file
    .slice(0, FIRST_BYTES)
    .arrayBuffer()
    .catch((problem: unknown) => {
      // A file that can no longer be read: its upload says so.
      if (problem instanceof DOMException) return null;
      throw problem;
    });
  const text = first ? textOf(new Uint8Array(first)) : null;
  return text !== null && looksLikeScan(text);
}

export interface HeldScans {
  held: readonly Held[];
  /** Pictures go at once, line scans are held for the question about their detector. */
  add: (files: readonly File[], target: UploadTarget) => Promise<void>;
  go: (detectorMm: number | null) => void;
  drop: () => void;
}

export function useHeldScans(send: (files: readonly File[], target: UploadTarget) => void): HeldScans {
  const [held, setHeld] = useState<readonly Held[]>([]);
  return {
    held,
    add: async (files, target) => {
      const scans = await Promise.all(files.map(isScan));
      const pictures = files.filter((_, i) => !scans[i]);
      if (pictures.length) send(pictures, target);
      const more = files.filter((_, i) => scans[i]).map((file) => ({ file, target }));
      if (more.length) setHeld((before) => [...before, ...more]);
    },
    go: (detectorMm) => {
      held.forEach(({ file, target }) => send([file], { ...target, detectorMm }));
      setHeld([]);
    },
    drop: () => setHeld([]),
  };
}

interface Props {
  held: readonly Held[];
  onGo: (detectorMm: number | null) => void;
  onDrop: () => void;
}

/** Asked once for all line scans just chosen: how wide is the detector? */
export function ScanQuestion({ held, onGo, onDrop }: Props) {
  const first = held[0].target.detectorMm;
  const [typed, setTyped] = useState(first === null ? '' : String(first));
  const text = typed.trim().replace(',', '.');
  const width = Number(text);
  const wrong = text !== '' && !(width > 0 && width <= 1000);
  return (
    <form
      className="ask scan-question"
      aria-label="Line scans"
      onSubmit={(event) => {
        event.preventDefault();
        if (!wrong) onGo(text === '' ? null : width);
      }}
    >
      <div className="min-w-0">
        <p>
          <b>{count(held.length, 'line scan')}</b> among the files
        </p>
        <p className="truncate text-small text-ink-2">{held.map(({ file }) => file.name).join(', ')}</p>
      </div>
      <Field
        label="Width of the detector, mm"
        value={typed}
        inputMode="decimal"
        autoFocus
        autoComplete="off"
        placeholder="a point"
        help="Empty where it is narrow against a fringe."
        error={wrong ? 'The width is a number above 0, at most 1000 mm.' : undefined}
        onChange={(event) => setTyped(event.target.value)}
      />
      <div className="do">
        <Button type="submit" disabled={wrong}>
          Add {held.length === 1 ? 'the scan' : `${held.length} scans`}
        </Button>
        <Button kind="quiet" onClick={onDrop}>
          Leave out
        </Button>
      </div>
    </form>
  );
}
