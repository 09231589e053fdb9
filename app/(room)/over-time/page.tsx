import type { Metadata } from 'next';
import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import { addressOf, idParam, textParam, type SearchParams } from '@/lib/client/address';
import { can } from '@/lib/domain/permissions';
import type { OverTimeView } from '@/lib/domain/views';
import { overTime } from '@/lib/server/queries/over-time';
import { benchInUse, requireMe } from '@/lib/server/session';
import { BenchesBeside } from './_components/benches-beside';
import { ChartLoader } from './_components/chart-loader';
import { ChartTable } from './_components/chart-table';
import { Findings } from './_components/findings';
import { Headlines } from './_components/headlines';
import { PickForm } from './_components/pick-form';
import { WithdrawnPoints } from './_components/withdrawn-points';

export const metadata: Metadata = { title: 'Over time' };

const RUNS_AT_REST = 60;

export default async function OverTime({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const me = await requireMe('charts.see');
  const params = await searchParams;
  const lastText = textParam(params, 'last');
  const last = lastText === 'all' ? 0 : (idParam(params, 'last') ?? RUNS_AT_REST);
  const benchId = idParam(params, 'bench') ?? (await benchInUse());
  const view = await overTime({ benchId, choice: textParam(params, 'choice'), last });
  const csv = addressOf('/api/over-time', { bench: view.bench?.id ?? null, choice: view.chosen, last });
  return (
    <div className="page pb-10">
      <div className="headline">
        <div className="l">
          <h1>Over time</h1>
          <span className="text-ink-2">{view.bench ? `of ${view.bench.name}` : 'no bench yet'}</span>
        </div>
        {view.choices.length ? <PickForm view={view} last={last} /> : null}
      </div>
      {view.points.length ? (
        <div className="over-cols">
          <section className="min-w-0" aria-label="Control charts">
            <Headlines view={view} />
            <ChartLoader view={view} />
            <div className="mt-3 flex flex-wrap items-start gap-3">
              <ChartTable view={view} />
              <a className={buttonClass('quiet')} href={csv} download>
                Save as CSV
              </a>
            </div>
          </section>
          <aside>
            <BenchesBeside view={view} />
            <Findings view={view} />
            <WithdrawnPoints view={view} />
          </aside>
        </div>
      ) : (
        <>
          <NoPoints view={view} mayTake={can(me, 'frames.upload')} />
          <WithdrawnPoints view={view} />
        </>
      )}
    </div>
  );
}

function NoPoints({ view, mayTake }: { view: OverTimeView; mayTake: boolean }) {
  return (
    <Empty
      title={view.bench ? `No accepted reading of ${view.bench.name} yet` : 'No accepted reading yet'}
      acts={
        mayTake ? (
          <Link className={buttonClass()} href="/intake">
            Go to Intake
          </Link>
        ) : (
          <Link className={buttonClass()} href="/frames">
            Go to Frames
          </Link>
        )
      }
    >
      Accepted readings of a reference source or a lot stand here one after the other, with limits that begin
      anew at each setup.
    </Empty>
  );
}
