import { Button } from '@/components/ui/button';
import { formatNumber, formatSigned } from '@/lib/quantity/format';
import { orderName } from './order-ladder';
import type { StageOrder } from './stage-data';

interface Props {
  order: StageOrder;
  /** Unit of the fit's own lengths. */
  unit: 'px' | 'mm';
  out: boolean;
  top: number;
  side: 'left' | 'right';
  onToggle?: () => void;
  onZero?: () => void;
}

/** What the reading line crosses: centre, its uncertainty, the pull, and whether the fit uses it. */
export function OrderCard({ order, unit, out, top, side, onToggle, onZero }: Props) {
  return (
    <div className="order-card" style={{ top, [side]: 0 }} role="status">
      <dl>
        <dt>Order {orderName(order.m)}</dt>
        <dd className="text-ink-2">{out ? 'left out' : order.kind}</dd>
        <dt>centre</dt>
        <dd>{formatSigned(order.mm, 3)} mm</dd>
        <dt>u of centre</dt>
        <dd>
          {formatNumber(order.u, unit === 'px' ? 3 : 4)} {unit}
        </dd>
        <dt>pull</dt>
        <dd>{order.pullMm === null ? 'no raw middle' : `${formatSigned(order.pullMm, 3)} mm`}</dd>
      </dl>
      {onToggle || onZero ? (
        <div className="acts">
          {onToggle ? <Button onClick={onToggle}>{out ? 'Take it back' : 'Leave it out'}</Button> : null}
          {onZero ? <Button onClick={onZero}>Zero here</Button> : null}
        </div>
      ) : null}
    </div>
  );
}
