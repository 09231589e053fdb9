import type { Metadata } from 'next';
import Form from 'next/form';
import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { ListFoot } from '@/components/states/list-foot';
import { buttonClass } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import type { SearchParams } from '@/lib/client/address';
import { idParam } from '@/lib/client/address';
import { ageText, queueHref, readQueueFilter } from '@/lib/client/queue-address';
import { count } from '@/lib/client/words';
import { LIMITS } from '@/lib/domain/limits';
import { RISK_WORDS, RISKS, type QueueFilter, type QueueView } from '@/lib/domain/review-queue';
import { queuePage } from '@/lib/server/queries/review-queue';
import { requireMe } from '@/lib/server/session';
import { QueueRows } from './_components/queue-rows';

export const metadata: Metadata = { title: 'To review' };

const PATH = '/review/queue';

/** Everything that waits for a reviewer, riskiest first, with the reason each stands where it stands. */
export default async function Queue({ searchParams }: { searchParams: Promise<SearchParams> }) {
  await requireMe('readings.accept');
  const params = await searchParams;
  const filter = readQueueFilter(params);
  const [queue, now] = [await queuePage(filter, idParam(params, 'page') ?? 1), new Date().getTime()];
  const [first] = queue.rows;
  return (
    <div className="page pb-10">
      <div className="headline">
        <div className="l">
          <h1>To review</h1>
          <span className="text-ink-2">
            {count(sum(queue), 'reading')}, riskiest first
            {queue.oldestAt ? `; the oldest waits ${ageText(queue.oldestAt, now)}` : ''}
          </span>
        </div>
        <div className="acts flex-wrap">
          <Find filter={filter} />
          <Link className={buttonClass()} href={queueHref('/review/sheet', { ...filter, risk: null })}>
            Contact sheet
          </Link>
          {first ? (
            <Link
              className={buttonClass('main')}
              href={queueHref(`/review/${first.readingId}`, filter)}
              prefetch={false}
            >
              Review the first
            </Link>
          ) : null}
        </div>
      </div>
      <Words filter={filter} queue={queue} />
      {queue.rows.length ? (
        <>
          <QueueRows rows={queue.rows} filter={filter} nowMs={now} />
          <ListFoot
            page={queue.page}
            pages={queue.pages}
            total={queue.total}
            perPage={LIMITS.pageRows}
            href={(page) => queueHref(PATH, filter, page)}
          />
        </>
      ) : (
        <Empty
          searched={filter.find !== '' || filter.risk !== null}
          title="Nothing waits here"
          acts={
            <Link className={buttonClass()} href={PATH}>
              Show the whole queue
            </Link>
          }
        >
          Readings stand here once a technician has sent them.
        </Empty>
      )}
    </div>
  );
}

const sum = ({ counts }: QueueView) => RISKS.reduce((total, risk) => total + counts[risk], 0);

function Find({ filter }: { filter: QueueFilter }) {
  return (
    <Form action={PATH} role="search" className="w-[190px]">
      {filter.risk ? <input type="hidden" name="risk" value={filter.risk} /> : null}
      {filter.benchId ? <input type="hidden" name="bench" value={filter.benchId} /> : null}
      <Field
        label="Serial, lot or file"
        labelHidden
        name="find"
        type="search"
        placeholder="Serial or lot"
        defaultValue={filter.find}
        key={filter.find}
      />
    </Form>
  );
}

/** Filters: by risk with counts, then by bench where there are several. */
function Words({ filter, queue }: { filter: QueueFilter; queue: QueueView }) {
  const word = (key: string, text: string, to: QueueFilter, chosen: boolean, many?: number) => (
    <Link
      key={key}
      className="word-pick"
      href={queueHref(PATH, to)}
      aria-current={chosen ? 'true' : undefined}
      scroll={false}
    >
      {text}
      <span className="count">{many ?? ''}</span>
    </Link>
  );
  return (
    <>
      <nav className="filters words" aria-label="Risk">
        {word('all', 'All', { ...filter, risk: null }, filter.risk === null, sum(queue))}
        {RISKS.filter((risk) => queue.counts[risk] > 0 || filter.risk === risk).map((risk) =>
          word(risk, RISK_WORDS[risk], { ...filter, risk }, filter.risk === risk, queue.counts[risk]),
        )}
      </nav>
      {queue.benches.length > 1 ? (
        <nav className="filters words mt-1" aria-label="Bench">
          {word('all', 'All benches', { ...filter, benchId: null }, filter.benchId === null)}
          {queue.benches.map(({ id, name }) =>
            word(String(id), name, { ...filter, benchId: id }, filter.benchId === id),
          )}
        </nav>
      ) : null}
    </>
  );
}
