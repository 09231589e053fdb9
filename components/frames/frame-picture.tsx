import { FringeStrip } from '@/components/figures/fringe-strip';
import { HollowOrders, litFor } from '@/components/figures/hollow-orders';
import { frameIsMoving } from '@/lib/domain/life-cycle';
import type { FrameRow } from '@/lib/domain/views';
import { subjectName } from '@/lib/client/words';

/** Share of the way from bytes to reading each moving state stands for. */
const WAY = { copying: 0.3, waiting: 0.45, fitting: 0.7 } as const;

interface Props {
  frame: FrameRow;
  spanMm: number;
  /** Share of the bytes sent, while this browser sends them. */
  sent?: number;
}

/** The frame's strip, or the outlines where it will be. */
export function FramePicture({ frame, spanMm, sent }: Props) {
  const { reading } = frame;
  if (reading) {
    return (
      <FringeStrip
        strip={reading.strip}
        spanMm={spanMm}
        nm={reading.wavelengthNm}
        label={`Fringe strip of ${subjectName(frame)}`}
      />
    );
  }
  if (!frameIsMoving(frame.state)) return <HollowOrders broken />;
  const share =
    frame.state === 'copying' && sent !== undefined ? 0.4 * sent : WAY[frame.state as keyof typeof WAY];
  return <HollowOrders lit={litFor(share)} />;
}
