import { HollowOrders } from '@/components/figures/hollow-orders';

const LIT = [5, 3, 2, 2, 1, 1];

/** While a list loads: the rows stand still, orders light up from the middle. */
export function LoadingList({ what }: { what: string }) {
  return (
    <div role="status">
      <span className="only-heard">{what} loading</span>
      {LIT.map((lit, i) => (
        <div className="loading-row" key={i} aria-hidden="true">
          <i />
          <HollowOrders of={17} lit={lit} />
          <i />
        </div>
      ))}
    </div>
  );
}
