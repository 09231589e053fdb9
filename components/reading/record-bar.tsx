import Link from 'next/link';
import type { ReactNode } from 'react';
import { When } from '@/components/figures/when';
import type { FrameView } from '@/lib/domain/views';
import { subjectLine, subjectName } from '@/lib/client/words';

/** What is on the desk: unit, lot, who took it, when, on which setup. */
export function RecordBar({ frame, middle }: { frame: FrameView; middle?: ReactNode }) {
  return (
    <div className="record">
      <div className="who">
        <h1>{subjectName(frame)}</h1>
        <span className="text-ink-2">{subjectLine(frame.subject)}</span>
      </div>
      <div className="turnover">{middle}</div>
      <div className="facts">
        <span className="opt truncate">{frame.uploadedBy.name}</span>
        <span>
          <When at={frame.receivedAt} /> ·{' '}
          <Link className="link inline-block min-h-6" href={`/benches/${frame.bench.id}`} prefetch={false}>
            {frame.bench.name}, setup {frame.setupNumber}
          </Link>
        </span>
      </div>
    </div>
  );
}
