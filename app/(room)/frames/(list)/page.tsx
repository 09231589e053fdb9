import type { Metadata } from 'next';
import Link from 'next/link';
import { ReturnedNotice } from '@/components/frames/returned-notice';
import { FrameList } from '@/components/frames/frame-list';
import { ListFoot } from '@/components/states/list-foot';
import { buttonClass } from '@/components/ui/button';
import type { SearchParams } from '@/lib/client/address';
import { LIMITS } from '@/lib/domain/limits';
import { can } from '@/lib/domain/permissions';
import type { FrameRow, Me } from '@/lib/domain/views';
import { listBenchChoices } from '@/lib/server/queries/benches';
import { listFrames } from '@/lib/server/queries/frames';
import { returnedTo } from '@/lib/server/queries/frames-page';
import { benchInUse, requireMe } from '@/lib/server/session';
import { FindForm } from '../_components/find-form';
import { framesHref, readFramesQuery } from '../_components/query';
import { StateWords } from '../_components/state-words';
import { NoFrames } from '../_components/no-frames';

export const metadata: Metadata = { title: 'Frames' };

function hrefFor(me: Me) {
  const reviews = can(me, 'readings.accept');
  return (frame: FrameRow) =>
    reviews && frame.reading?.status === 'review' ? `/review/${frame.reading.id}` : `/frames/${frame.id}`;
}

export default async function FramesPage({ searchParams }: { searchParams: Promise<SearchParams> }) {
  const me = await requireMe('frames.see');
  const query = readFramesQuery(await searchParams, await benchInUse());
  const sends = can(me, 'readings.send');
  const [list, benches, returned] = await Promise.all([
    listFrames(query),
    listBenchChoices(),
    sends ? returnedTo(me.id) : 0,
  ]);
  const bench = benches.find((b) => b.id === query.benchId)?.name ?? 'all benches';
  return (
    <div className="page">
      <div className="headline">
        <div className="l">
          <h1>Frames</h1>
          <span className="text-ink-2">of {bench}, newest first</span>
        </div>
        <div className="acts">
          <FindForm query={query} />
          {can(me, 'readings.accept') && list.toReview > 0 ? (
            <Link className={buttonClass('main')} href="/review">
              Review the next of {list.toReview}
            </Link>
          ) : null}
          {can(me, 'frames.upload') ? (
            <Link
              className={buttonClass(can(me, 'readings.accept') && list.toReview > 0 ? 'plain' : 'main')}
              href="/intake"
            >
              Add frames
            </Link>
          ) : null}
        </div>
      </div>
      {query.state === 'returned' ? null : <ReturnedNotice returned={returned} />}
      <StateWords query={query} counts={list.counts} />
      {list.rows.length ? (
        <FrameList frames={list.rows} hrefOf={hrefFor(me)} />
      ) : (
        <NoFrames query={query} bench={bench} counts={list.counts} mayAdd={can(me, 'frames.upload')} />
      )}
      {list.rows.length ? (
        <ListFoot
          page={list.page}
          pages={list.pages}
          total={list.total}
          perPage={LIMITS.pageRows}
          href={(page) => framesHref({ ...query, page })}
        />
      ) : null}
    </div>
  );
}
