import Link from 'next/link';
import { Empty } from '@/components/states/empty';
import { buttonClass } from '@/components/ui/button';
import { count } from '@/lib/client/words';
import type { FramesQuery } from '@/lib/domain/views';
import { DAYS_AT_REST, framesHref } from './query';
import { sumOf } from './state-words';

interface Props {
  query: FramesQuery;
  bench: string;
  counts: Record<string, number>;
  mayAdd: boolean;
}

/** Nothing in the list: because nothing was taken, or because the filters leave nothing. */
export function NoFrames({ query, bench, counts, mayAdd }: Props) {
  const rest = { ...query, state: '' as const, find: '', mine: false, lotId: null, page: 1 };
  const filtered = query.find !== '' || query.state !== '' || query.mine || query.lotId !== null;
  if (!filtered) {
    return (
      <Empty
        title={
          query.days === 0
            ? `No frames from ${bench}`
            : `No frames from ${bench} in the last ${query.days} days`
        }
        acts={
          mayAdd ? (
            <Link className={buttonClass('main')} href="/intake">
              Go to Intake
            </Link>
          ) : (
            <Link className={buttonClass()} href={framesHref({ ...rest, days: 0 })}>
              Look at all time
            </Link>
          )
        }
      >
        The first frame added will show here as its fringe strip.
      </Empty>
    );
  }
  const all = sumOf(counts);
  return (
    <Empty
      searched
      title={query.find ? `No frame matches “${query.find}”` : 'No frame is in this state'}
      acts={
        <>
          {query.days !== 0 && query.days <= DAYS_AT_REST ? (
            <Link className={buttonClass()} href={framesHref({ ...query, days: 0, page: 1 })}>
              All time
            </Link>
          ) : null}
          <Link className={buttonClass()} href={framesHref(rest)}>
            Show all frames
          </Link>
        </>
      }
    >
      {query.find
        ? `Under these filters there ${all === 1 ? 'is' : 'are'} ${count(all, 'frame')}. Look further back, or check the serial.`
        : 'Choose another state, or show all.'}
    </Empty>
  );
}
