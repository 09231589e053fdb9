import type { BudgetRow } from '@/lib/domain/reading-result';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';

interface Props {
  rows: readonly BudgetRow[];
  uNm: number;
  expandedNm: number;
}

const bySize = (a: BudgetRow, b: BudgetRow) => Math.abs(b.contributionNm) - Math.abs(a.contributionNm);

/** Largest first: contributions in nm at k = 1 as bars of one scale; the sum as shown is the sum of the rows as shown. */
export function BudgetBars({ rows, uNm, expandedNm }: Props) {
  const largest = Math.max(...rows.map((row) => Math.abs(row.contributionNm)), 1e-12);
  const places = Math.min(6, Math.max(2, 2 - Math.floor(Math.log10(uNm))));
  return (
    <div className="bars">
      {[...rows].sort(bySize).map((row) => (
        <Row key={row.key} row={row} share={Math.abs(row.contributionNm) / largest} places={places} />
      ))}
      <div className="sum">
        <span>
          In quadrature <b>{formatNumber(uNm, places)}</b>
        </span>
        <span>
          U <b>{formatQuantity(0, expandedNm).uncertainty} nm</b>
        </span>
      </div>
    </div>
  );
}

function Row({ row, share, places }: { row: BudgetRow; share: number; places: number }) {
  return (
    <>
      <span title={row.known}>
        {row.name} {row.symbol ? <span className="sym">{row.symbol}</span> : null}
      </span>
      <span className="trk" aria-hidden="true">
        <i style={{ width: `${100 * share}%` }} />
      </span>
      <span className="amount">{formatNumber(Math.abs(row.contributionNm), places)}</span>
    </>
  );
}
