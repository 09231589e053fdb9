'use client';

import { useState } from 'react';
import { Dialog } from '@/components/ui/dialog';
import { formatNumber, formatSigned } from '@/lib/quantity/format';
import { isOut, orderName } from './order-ladder';
import type { StageOrder } from './stage-data';

interface Props {
  orders: readonly StageOrder[];
  /** Unit of the fit's own lengths. */
  unit: 'px' | 'mm';
  leaveOut: readonly number[];
  /** Where its button stands on the stage, px. */
  top: number;
}

/** The order centres of the stage as a table, opened on demand. */
export function OrderTable({ orders, unit, leaveOut, top }: Props) {
  const [open, setOpen] = useState(false);
  const [places, uPlaces] = unit === 'px' ? [2, 3] : [3, 4];
  return (
    <>
      <button type="button" className="stage-word stage-table" style={{ top }} onClick={() => setOpen(true)}>
        Table
      </button>
      <Dialog open={open} onClose={() => setOpen(false)} title="Order centres">
        <div className="table-scroll" tabIndex={0} role="region" aria-label="Order centres">
          <table className="figures text-small">
            <thead>
              <tr>
                <th scope="col">Order</th>
                <th scope="col">Kind</th>
                <th scope="col" className="num">
                  {unit === 'px' ? 'x, y in px' : 'Position, mm'}
                </th>
                <th scope="col" className="num">
                  From zero, mm
                </th>
                <th scope="col" className="num">
                  u, {unit}
                </th>
                <th scope="col" className="num">
                  Pull, {unit}
                </th>
                <th scope="col">In the fit</th>
              </tr>
            </thead>
            <tbody>
              {[...orders]
                .sort((a, b) => a.m - b.m)
                .map((order) => (
                  <tr key={order.m}>
                    <td>{orderName(order.m)}</td>
                    <td>{order.kind}</td>
                    <td className="num whitespace-nowrap">
                      {order.at.map((v) => formatNumber(v, places)).join(', ')}
                    </td>
                    <td className="num">{formatSigned(order.mm, 3)}</td>
                    <td className="num">{formatNumber(order.u, uPlaces)}</td>
                    <td className="num">
                      {order.pull === null ? 'none' : formatSigned(order.pull, uPlaces)}
                    </td>
                    <td>{isOut(order, leaveOut) ? 'left out' : 'yes'}</td>
                  </tr>
                ))}
            </tbody>
          </table>
        </div>
        <form method="dialog" className="mt-4">
          <button className="button">Close</button>
        </form>
      </Dialog>
    </>
  );
}
