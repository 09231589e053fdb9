import Link from 'next/link';
import { FRAME_WORDS, READING_WORDS } from '@/lib/domain/life-cycle';
import type { FramesQuery } from '@/lib/domain/views';
import { framesHref } from './query';

const WORDS: readonly [FramesQuery['state'], string][] = [
  ['', 'All'],
  ['copying', FRAME_WORDS.copying],
  ['waiting', FRAME_WORDS.waiting],
  ['fitting', FRAME_WORDS.fitting],
  ['draft', READING_WORDS.draft],
  ['review', READING_WORDS.review],
  ['returned', READING_WORDS.returned],
  ['accepted', READING_WORDS.accepted],
  ['withdrawn', READING_WORDS.withdrawn],
  ['refused', FRAME_WORDS.refused],
  ['unreadable', FRAME_WORDS.unreadable],
];
/** States that pass by themselves, and the rare one, show only while a frame is in them. */
const PASSING: readonly string[] = ['copying', 'waiting', 'fitting', 'withdrawn'];

/** All frames under the other filters. */
export function sumOf(counts: Record<string, number>): number {
  return Object.values(counts).reduce((sum, n) => sum + n, 0);
}

interface Props {
  query: FramesQuery;
  counts: Record<string, number>;
}

/** Filter by state: words in the address, with the count each would show. */
export function StateWords({ query, counts }: Props) {
  const all = sumOf(counts);
  const shown = WORDS.filter(
    ([state]) => !PASSING.includes(state) || (counts[state] ?? 0) > 0 || query.state === state,
  );
  return (
    <nav className="filters words" aria-label="State">
      {shown.map(([state, word]) => (
        <Link
          key={state}
          className="word-pick"
          href={framesHref({ ...query, state, page: 1 })}
          aria-current={query.state === state ? 'true' : undefined}
          scroll={false}
        >
          {word}
          <span className="count">{state === '' ? all : (counts[state] ?? 0)}</span>
        </Link>
      ))}
      <Link
        className="word-pick"
        href={framesHref({ ...query, mine: !query.mine, page: 1 })}
        aria-current={query.mine ? 'true' : undefined}
        scroll={false}
      >
        Mine only
        <span className="count">{query.mine ? 'on' : 'off'}</span>
      </Link>
    </nav>
  );
}
