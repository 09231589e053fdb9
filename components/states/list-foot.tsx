import Link from 'next/link';
import { buttonClass } from '@/components/ui/button';
import { Pager } from '@/components/ui/pager';
import { formatNumber } from '@/lib/quantity/format';

interface Props {
  page: number;
  pages: number;
  total: number;
  perPage: number;
  href: (page: number) => string;
}

/** "1 to 25 of 148" and the pages. */
export function ListFoot({ page, pages, total, perPage, href }: Props) {
  const first = (page - 1) * perPage + 1;
  const last = Math.min(total, page * perPage);
  return (
    <div className="list-foot">
      <span className="text-small text-ink-2">
        {total === 0
          ? ''
          : `${formatNumber(first, 0)} to ${formatNumber(last, 0)} of ${formatNumber(total, 0)}`}
      </span>
      <Pager
        page={page}
        pages={pages}
        step={(word, target) =>
          target === null ? (
            <span className={buttonClass()} aria-disabled="true">
              {word}
            </span>
          ) : (
            <Link className={buttonClass()} href={href(target)}>
              {word}
            </Link>
          )
        }
      />
      <span />
    </div>
  );
}
