import Link from 'next/link';
import { Mark } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { MEDIUM_WORDS } from '@/lib/client/words';
import type { OverTimeView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';

/** Readings that were accepted and withdrawn since: none of them counts in a mean or a limit. */
export function WithdrawnPoints({ view }: { view: OverTimeView }) {
  if (!view.withdrawn.length) return null;
  return (
    <section className="mt-6" aria-labelledby="withdrawn-points">
      <h2 id="withdrawn-points" className="mb-2">
        Withdrawn, not in the limits
      </h2>
      <ul className="grid gap-3 text-small">
        {view.withdrawn.map((point) => (
          <li key={point.readingId} className="finding">
            <Mark kind="reading-withdrawn" />
            <p>
              <Link
                className="link inline-block min-h-6"
                href={`/frames/${point.frameId}?reading=${point.readingId}`}
                prefetch={false}
              >
                {point.label}
              </Link>
              , {formatNumber(point.valueNm, 2)} nm ({MEDIUM_WORDS[view.medium]}), <When at={point.takenAt} />
              . {point.reason}
            </p>
          </li>
        ))}
      </ul>
    </section>
  );
}
