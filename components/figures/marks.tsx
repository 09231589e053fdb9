import type { ReactNode } from 'react';
import { FRAME_WORDS, READING_WORDS, type FrameState, type ReadingState } from '@/lib/domain/life-cycle';
import type { FindingWord } from '@/lib/domain/reading-result';
import { VERDICT_WORDS, type Verdict } from '@/lib/domain/specification';

/** Squares are verdicts, three bars are states, diamonds are checks; each kind has its own name here. */
export type MarkKind =
  `verdict-${Verdict | 'none'}` | `frame-${FrameState}` | `reading-${ReadingState}` | `check-${FindingWord}`;

/** How much of one bar is filled: whole, none, up to a diagonal, or only a line where a bar will be. */
type Fill = 'full' | 'hollow' | 'half' | 'line';

function Bar({ x, y, height, fill }: { x: number; y: number; height: number; fill: Fill }) {
  const middle = y + height / 2;
  if (fill === 'line') {
    return (
      <path
        d={`M${x + 2} ${y}v${height}`}
        stroke="currentColor"
        strokeWidth="1.25"
        strokeDasharray="1.6 1.6"
      />
    );
  }
  if (fill === 'full') return <rect x={x} y={y} width="4" height={height} fill="currentColor" />;
  return (
    <>
      <rect
        x={x + 0.65}
        y={y + 0.65}
        width="2.7"
        height={height - 1.3}
        fill="none"
        stroke="currentColor"
        strokeWidth="1.3"
      />
      {fill === 'half' ? (
        <path d={`M${x} ${middle - 3}L${x + 4} ${middle + 3}V${y + height}H${x}Z`} fill="currentColor" />
      ) : null}
    </>
  );
}

function Bars({ sides, middle, over }: { sides: Fill; middle: Fill; over?: ReactNode }) {
  return (
    <>
      <Bar x={1} y={5} height={10} fill={sides} />
      <Bar x={8} y={1} height={18} fill={middle} />
      <Bar x={15} y={5} height={10} fill={sides} />
      {over}
    </>
  );
}

const STRIKE = (
  <>
    <path d="M0 10H20" stroke="var(--cut,var(--ground))" strokeWidth="6.5" />
    <path d="M0 10H20" stroke="currentColor" strokeWidth="2.25" />
  </>
);
const CROSS = (
  <>
    <path d="M0 1.5 20 18.5M0 18.5 20 1.5" stroke="var(--cut,var(--ground))" strokeWidth="5" />
    <path d="M0 1.5 20 18.5M0 18.5 20 1.5" stroke="currentColor" strokeWidth="2" />
  </>
);
const HOLLOW_SQUARE = (
  <rect x="4" y="4" width="12" height="12" fill="none" stroke="currentColor" strokeWidth="2.4" />
);

const SHAPES: Record<MarkKind, ReactNode> = {
  'verdict-within': <rect x="3" y="3" width="14" height="14" fill="currentColor" />,
  'verdict-undecided': (
    <>
      <rect x="4" y="4" width="12" height="12" fill="none" stroke="currentColor" strokeWidth="2" />
      <path d="M3 3v14h14Z" fill="currentColor" />
    </>
  ),
  'verdict-outside': HOLLOW_SQUARE,
  'verdict-no-verdict': (
    <>
      <rect x="5" y="5" width="10" height="10" fill="none" stroke="currentColor" strokeWidth="2" />
      <path d="M0 10H5M15 10h5" stroke="currentColor" strokeWidth="2" />
      <path d="M5 10H15" stroke="currentColor" strokeWidth="1.25" />
    </>
  ),
  'verdict-none': (
    <path d="M3 7V3h4M13 3h4v4M17 13v4h-4M7 17H3v-4" fill="none" stroke="currentColor" strokeWidth="1.75" />
  ),
  'check-clear': <path d="M10 2.5 17.5 10 10 17.5 2.5 10Z" fill="currentColor" />,
  'check-look': (
    <>
      <path d="M10 3.2 16.8 10 10 16.8 3.2 10Z" fill="none" stroke="currentColor" strokeWidth="1.9" />
      <path d="M6.2 6.2 2.2 10 10 17.8 13.8 13.8Z" fill="currentColor" />
    </>
  ),
  'check-stop': (
    <path d="M10 3.4 16.6 10 10 16.6 3.4 10Z" fill="none" stroke="currentColor" strokeWidth="2.4" />
  ),
  'frame-copying': <Bars sides="line" middle="hollow" />,
  'frame-waiting': <Bars sides="hollow" middle="hollow" />,
  'frame-fitting': <Bars sides="hollow" middle="half" />,
  'frame-fitted': <Bars sides="hollow" middle="full" />,
  'frame-refused': <Bars sides="hollow" middle="hollow" over={STRIKE} />,
  'frame-unreadable': <path d="M1 10H5M8 10h4M15 10h4" stroke="currentColor" strokeWidth="2.25" />,
  'reading-draft': <Bars sides="line" middle="full" />,
  'reading-review': <Bars sides="half" middle="full" />,
  'reading-returned': <Bars sides="full" middle="full" over={STRIKE} />,
  'reading-accepted': <Bars sides="full" middle="full" />,
  'reading-withdrawn': <Bars sides="full" middle="full" over={CROSS} />,
  'reading-replaced': (
    <>
      <g transform="scale(1 .74)">
        <Bars sides="hollow" middle="hollow" />
      </g>
      <rect x="1" y="16.5" width="18" height="3" fill="currentColor" />
    </>
  ),
};

export function Mark({ kind, className = '' }: { kind: MarkKind; className?: string }) {
  return (
    <span className={`mark ${className}`}>
      <svg viewBox="0 0 20 20" aria-hidden="true">
        {SHAPES[kind]}
      </svg>
    </span>
  );
}

/** Plain for the calm case, lined for the half and for no verdict, turned for the hollow. */
const MANNER: Partial<Record<MarkKind, 'lined' | 'turned'>> = {
  'verdict-undecided': 'lined',
  'verdict-no-verdict': 'lined',
  'verdict-outside': 'turned',
  'check-look': 'lined',
  'check-stop': 'turned',
};

export const CHECK_WORDS: Record<FindingWord, string> = { clear: 'Clear', look: 'Look', stop: 'Stop' };

function Said({ kind, children }: { kind: MarkKind; children: ReactNode }) {
  return (
    <span className={`said ${MANNER[kind] ?? 'plain'}`}>
      <Mark kind={kind} />
      <span>{children}</span>
    </span>
  );
}

export function SaidVerdict({ verdict }: { verdict: Verdict | null }) {
  return <Said kind={`verdict-${verdict ?? 'none'}`}>{VERDICT_WORDS[verdict ?? 'none']}</Said>;
}

export function SaidCheck({ word, children }: { word: FindingWord; children?: ReactNode }) {
  return <Said kind={`check-${word}`}>{children ?? CHECK_WORDS[word]}</Said>;
}

/** State of a frame, or of its reading once there is one. */
export function stateOf(frame: { state: FrameState; reading: { status: ReadingState } | null }): {
  kind: MarkKind;
  word: string;
} {
  if (frame.reading && frame.state === 'fitted') {
    return { kind: `reading-${frame.reading.status}`, word: READING_WORDS[frame.reading.status] };
  }
  return { kind: `frame-${frame.state}`, word: FRAME_WORDS[frame.state] };
}
