import Link from 'next/link';
import { spanForMm } from '@/components/figures/strip-scale';
import { Mark, SaidVerdict, stateOf } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { ToleranceWhisker } from '@/components/figures/tolerance-whisker';
import { When } from '@/components/figures/when';
import { RETURN_WORDS, type FrameRow } from '@/lib/domain/views';
import { specificationOf, subjectLine, subjectName } from '@/lib/client/words';
import { FramePicture } from './frame-picture';
import { MmScale } from './mm-scale';

/** Where a row leads: to review when it waits there and the person reviews, else to the frame. */
export type HrefOf = (frame: FrameRow) => string;

/** Frames with their strips on one scale and one middle. */
export function FrameList({ frames, hrefOf }: { frames: FrameRow[]; hrefOf: HrefOf }) {
  const spanMm = spanForMm(frames.flatMap((frame) => (frame.reading ? [frame.reading] : [])));
  return (
    <div>
      <div className="heads" aria-hidden="true">
        <div className="a">
          <span />
          <span>Unit, lot, nominal</span>
          <span>State, taken at</span>
        </div>
        <MmScale spanMm={spanMm} />
        <div className="c">
          <span>
            Wavelength <span className="sym">λ</span>, k = 2
          </span>
          <span className="against">Against tolerance</span>
          <span>Verdict</span>
        </div>
      </div>
      <div className="rows" role="list" aria-label="Frames">
        {frames.map((frame) => (
          <div role="listitem" key={frame.id}>
            <Row frame={frame} spanMm={spanMm} href={hrefOf(frame)} />
          </div>
        ))}
      </div>
    </div>
  );
}

function Row({ frame, spanMm, href }: { frame: FrameRow; spanMm: number; href: string }) {
  const state = stateOf(frame);
  return (
    <Link className="row" href={href} prefetch={false}>
      <div className="a">
        <Mark kind={state.kind} />
        <div>
          <div className="name">{subjectName(frame)}</div>
          <div className="sub">{subjectLine(frame.subject)}</div>
        </div>
        <div>
          <div className="state">{state.word}</div>
          <div className="sub" title={frame.returned?.words}>
            {frame.returned ? (
              `${RETURN_WORDS[frame.returned.reason]}${frame.returned.words ? `: ${frame.returned.words}` : ''}`
            ) : (
              <When at={frame.receivedAt} />
            )}
          </div>
        </div>
      </div>
      <FramePicture frame={frame} spanMm={spanMm} />
      <div className="c">
        <Outcome frame={frame} />
      </div>
    </Link>
  );
}

const MOVING_WORDS: Record<string, string> = {
  copying: 'The bytes are still coming.',
  waiting: 'The frame is safe; it is fitted next.',
  fitting: 'Finding the order centres.',
};

function Outcome({ frame }: { frame: FrameRow }) {
  const { reading } = frame;
  if (!reading) {
    return <span className="msg">{frame.message ?? MOVING_WORDS[frame.state] ?? ''}</span>;
  }
  const spec = specificationOf(frame.subject);
  if (reading.wavelengthNm === null) {
    return (
      <>
        <Quantity
          value={reading.spacing.value}
          expanded={2 * reading.spacing.u}
          unit={reading.spacing.unit}
        />
        <span className="text-small text-ink-2">spacing; the setup gives no wavelength</span>
        <span />
      </>
    );
  }
  return (
    <>
      <Quantity value={reading.wavelengthNm} expanded={reading.expandedNm} medium={reading.medium} />
      {spec && reading.expandedNm !== null ? (
        <ToleranceWhisker
          specification={spec}
          valueNm={reading.wavelengthNm}
          expandedNm={reading.expandedNm}
          judgement={reading.judgement}
        />
      ) : (
        <span className="text-small text-ink-2">no tolerance</span>
      )}
      <span className="v">
        {reading.judgement ? <SaidVerdict verdict={reading.judgement.verdict} /> : null}
      </span>
    </>
  );
}
