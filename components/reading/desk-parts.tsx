'use client';

import { useMemo, useState, type ReactNode } from 'react';
import { Stage } from '@/components/figures/stage/stage';
import type { RegionDesk } from '@/lib/client/use-region-change';
import type { Picture } from '@/lib/client/region';
import type { Region } from '@/lib/domain/reading-result';
import { isScanRegion, type ScanRegion } from '@/lib/domain/scan-result';
import type { FrameView, ReadingView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { LiveNote } from './live-note';
import { PhotoRegion } from './photo-region';
import { RegionFields } from './region-fields';
import { ScanPart } from './scan-part';
import { UndoRedo } from './undo-redo';

/** What a region can lie on: the picture's size or the scan's length; null for a file that gives neither. */
export function boundsOf(frame: FrameView): Picture | ScanRegion | null {
  // A file that breaks off may still have said its size; there is nothing to lay a calliper on.
  if (frame.state === 'unreadable') return null;
  if (frame.scan) return frame.scanLength;
  return frame.widthPx && frame.heightPx ? { widthPx: frame.widthPx, heightPx: frame.heightPx } : null;
}

/** The same, the same object while the frame is. */
export function useBounds(frame: FrameView): Picture | ScanRegion | null {
  return useMemo(() => boundsOf(frame), [frame]);
}

interface PhotoProps {
  frame: FrameView;
  desk: RegionDesk;
  mayFit: boolean;
  onKeys: () => void;
}

/** Photo with the calliper, and the same region in numbers. */
export function PhotoPart({ frame, desk, mayFit, onKeys }: PhotoProps) {
  const { region } = desk;
  const bounds = boundsOf(frame);
  if (isScanRegion(region))
    return <ScanPart frame={frame} region={region} desk={desk} mayFit={mayFit} onKeys={onKeys} />;
  if (!bounds || 'fromMm' in bounds) {
    return (
      <>
        <div className="cap">
          <h2>{frame.scan ? 'Scan' : 'Photo'}</h2>
          <a className="link" href={`/api/frames/${frame.id}/original`} download={frame.fileName}>
            the file as received
          </a>
        </div>
        <p className="text-small text-ink-2">The file gives no {frame.scan ? 'scan' : 'picture'}.</p>
      </>
    );
  }
  const change = mayFit ? (next: Region) => desk.setRegion(next) : undefined;
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
          {formatNumber(bounds.widthPx, 0)} × {formatNumber(bounds.heightPx, 0)} px, original
        </a>
      </div>
      <PhotoRegion
        frameId={frame.id}
        picture={bounds}
        alt={`Photo ${frame.fileName}`}
        region={region}
        onChange={change}
      />
      <RegionFields region={region} onChange={change} onKeys={onKeys} />
      {mayFit ? <UndoRedo desk={desk} /> : null}
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
      scaleUmPerPx={reading.setup.scaleUmPerPx.value}
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
