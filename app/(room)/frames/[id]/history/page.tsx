import type { Metadata } from 'next';
import Link from 'next/link';
import { notFound } from 'next/navigation';
import { Mark, type MarkKind } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { buttonClass } from '@/components/ui/button';
import { count } from '@/lib/client/words';
import type { HistoryStep, MarkedStep } from '@/lib/domain/history';
import { historyOf } from '@/lib/server/queries/history';
import { requireMe } from '@/lib/server/session';

interface Props {
  params: Promise<{ id: string }>;
}

export const metadata: Metadata = { title: 'History' };

/** A step that is neither a state nor a check has no mark: the mark would say something else. */
const MARKS: Partial<Record<MarkedStep, MarkKind>> = {
  received: 'frame-waiting',
  fitted: 'frame-fitted',
  refused: 'frame-refused',
  sent: 'reading-review',
  returned: 'reading-returned',
  accepted: 'reading-accepted',
  withdrawn: 'reading-withdrawn',
};

export default async function History({ params }: Props) {
  await requireMe('frames.see');
  const id = Number((await params).id);
  if (!Number.isInteger(id) || id < 1) notFound();
  const history = (await historyOf(id)) ?? notFound();
  return (
    <div className="page pb-10">
      <div className="headline">
        <div className="l">
          <h1>{history.name}</h1>
          <span className="text-ink-2">
            its whole history, {count(history.steps.length, 'step')}, oldest first
          </span>
        </div>
        <div className="acts">
          <Link className={buttonClass()} href={`/frames/${id}`}>
            Back to the reading
          </Link>
        </div>
      </div>
      <p className="text-small break-all text-ink-2">
        <a className="link" href={`/api/frames/${id}/original`} download={history.fileName}>
          {history.fileName}
        </a>
        , SHA-256 {history.sha256}
      </p>
      <ol className="plain-list">
        {history.steps.map((step, i) => (
          <Step key={i} step={step} />
        ))}
      </ol>
    </div>
  );
}

function Step({ step }: { step: HistoryStep }) {
  const mark = MARKS[step.step];
  return (
    <li className="list-row history-row">
      {mark ? <Mark kind={mark} /> : <span />}
      <div className="sub">
        <When at={step.at} />
      </div>
      <div>
        {step.who}
        <div className="sub">{step.reading === null ? 'the frame' : `reading ${step.reading}`}</div>
      </div>
      <div className="min-w-0">
        <div className="font-medium">{step.title}</div>
        {step.lines.map((line, i) => (
          <div key={i} className="sub break-words">
            {line}
          </div>
        ))}
      </div>
    </li>
  );
}
