import type { ReactNode } from 'react';

interface Props {
  page: number;
  pages: number;
  /** Draws one step; `href` is null where there is no further page. */
  step: (word: 'Previous' | 'Next', page: number | null) => ReactNode;
}

export function Pager({ page, pages, step }: Props) {
  if (pages <= 1) return null;
  return (
    <nav className="pager" aria-label="Pages">
      {step('Previous', page > 1 ? page - 1 : null)}
      <span className="px-3.5 text-ink-2">
        Page {page} of {pages}
      </span>
      {step('Next', page < pages ? page + 1 : null)}
    </nav>
  );
}
