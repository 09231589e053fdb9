'use client';

import { ScanFigure } from '@/components/figures/scan-figure';
import { useScanDrawing } from '@/lib/client/use-scan-drawing';
import type { RegionDesk } from '@/lib/client/use-region-change';
import type { ScanRegion } from '@/lib/domain/scan-result';
import type { FrameView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { ScanFields } from './scan-fields';
import { UndoRedo } from './undo-redo';

interface Props {
  frame: FrameView;
  region: ScanRegion;
  desk: RegionDesk;
  mayFit: boolean;
  onKeys: () => void;
}

/** The whole scan with its jaws where the photo of a frame would be, and the same region in numbers. */
export function ScanPart({ frame, region, desk, mayFit, onKeys }: Props) {
  const { drawing, problem } = useScanDrawing(frame.id);
  const change = mayFit ? (next: ScanRegion) => desk.setRegion(next) : undefined;
  const length = frame.scanLength ?? region;
  return (
    <>
      <div className="cap">
        <h2>Scan</h2>
        <a
          className="link"
          href={`/api/frames/${frame.id}/original`}
          download={frame.fileName}
          title={frame.fileName}
        >
          {frame.scanLength
            ? `${formatNumber(frame.scanLength.points, 0)} points, original`
            : 'the file as received'}
        </a>
      </div>
      {problem ? (
        <p className="shot p-4 text-small text-[#c3bcaf]">{problem}</p>
      ) : (
        <ScanFigure
          drawing={drawing}
          length={length}
          region={region}
          nm={(desk.preview.fit?.result ?? frame.shown?.result)?.wavelengthNm ?? null}
          label={`Scan ${frame.fileName}`}
          onChange={change}
        />
      )}
      <ScanFields
        length={length}
        region={region}
        detectorMm={desk.detectorMm}
        onChange={change}
        onDetector={mayFit ? desk.setDetector : undefined}
        onKeys={onKeys}
      />
      {mayFit ? <UndoRedo desk={desk} /> : null}
    </>
  );
}
