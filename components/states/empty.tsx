import type { ReactNode } from 'react';
import { HollowOrders } from '@/components/figures/hollow-orders';

interface Props {
  title: ReactNode;
  children?: ReactNode;
  /** Something was looked for: the middle order is lit. */
  searched?: boolean;
  acts?: ReactNode;
  /** Where it is the whole page, its title is the page's. */
  page?: boolean;
}

/** A place with nothing in it yet, or where nothing was found; it says what to do. */
export function Empty({ title, children, searched = false, acts, page = false }: Props) {
  return (
    <div className="empty">
      <HollowOrders of={15} lit={searched ? 1 : 0} />
      {page ? <h1>{title}</h1> : <h2>{title}</h2>}
      <p>{children}</p>
      {acts ? <div className="do">{acts}</div> : null}
    </div>
  );
}
