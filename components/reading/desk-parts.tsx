'use client';

import { useState, type ReactNode } from 'react';
import { Stage } from '@/components/figures/stage/stage';
import type { RegionDesk } from '@/lib/client/use-region-change';
import type { Region } from '@/lib/domain/reading-result';
import type { FrameView, ReadingView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { LiveNote } from './live-note';
import { PhotoRegion } from './photo-region';
import { RegionFields } from './region-fields';

/** Size of the frame, from the row or from the fit; null for a file without a picture. */
export function pictureOf(frame: FrameView): { widthPx: number; heightPx: number } | null {
  // A file that breaks off may still have said its size; there is nothing to lay a calliper on.
  if (frame.state === 'unreadable') return null;
  if (frame.widthPx && frame.heightPx) return { widthPx: frame.widthPx, heightPx: frame.heightPx };
  return frame.shown?.result.picture ?? null;
}

interface PhotoProps {
  frame: FrameView;
  desk: RegionDesk;
  mayFit: boolean;
  onKeys: () => void;
}

/** Photo with the calliper, and the same region in numbers. */
export function PhotoPart({ frame, desk, mayFit, onKeys }: PhotoProps) {
  const picture = pictureOf(frame);
  if (!picture) {
    return (
      <>
        <div className="cap">
          <h2>Photo</h2>
          <a className="link" href={`/api/frames/${frame.id}/original`} download={frame.fileName}>
            the file as received
          </a>
        </div>
        <p className="text-small text-ink-2">The file gives no picture.</p>
      </>
    );
  }
  const change = mayFit ? (region: Region) => desk.setRegion(region) : undefined;
  return (
    <>
      <div className="cap">
        <h2>Photo</h2>
        <a
          className="link"
          href={`/api/frames/${frame.id}/original`}
          download={frame.fileName}
          title={frame.fileName}
        >
          {formatNumber(picture.widthPx, 0)} × {formatNumber(picture.heightPx, 0)} px, original
        </a>
      </div>
      <PhotoRegion
        frameId={frame.id}
        picture={picture}
        alt={`Photo ${frame.fileName}`}
        region={desk.region}
        onChange={change}
      />
      <RegionFields region={desk.region} onChange={change} onKeys={onKeys} />
    </>
  );
}

interface StageProps {
  reading: ReadingView;
  desk: RegionDesk;
  mayFit: boolean;
  picked: number | null;
  onPick: (m: number | null) => void;
}

/** The stage of the kept reading, or of the fit a change would give. */
export function StagePart({ reading, desk, mayFit, picked, onPick }: StageProps) {
  const fit = desk.preview.fit;
  return (
    <Stage
      result={fit?.result ?? reading.result}
      scaleUmPerPx={reading.scaleUmPerPx}
      nm={fit?.result.wavelengthNm ?? reading.result.wavelengthNm}
      leaveOut={desk.leaveOut}
      picked={picked}
      onPick={onPick}
      note={<LiveNote preview={desk.preview} />}
      onToggleOrder={mayFit ? desk.toggleOrder : undefined}
      onZeroHere={mayFit ? desk.zeroAt : undefined}
    />
  );
}

/** The order the reading line stands on. */
export function usePicked(): [number | null, (m: number | null) => void] {
  return useState<number | null>(null);
}

/** A column with nothing to show on the stage, and why. */
export function StageNote({ children }: { children: ReactNode }) {
  return (
    <section className="stage grid place-items-center px-6 text-center" aria-label="Fringes on one axis">
      <div className="max-w-[52ch] text-ink-2">{children}</div>
    </section>
  );
}
