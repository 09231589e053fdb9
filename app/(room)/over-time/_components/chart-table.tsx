'use client';

import Link from 'next/link';
import { useState } from 'react';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import type { OverTimeView } from '@/lib/domain/views';
import { MEDIUM_WORDS } from '@/lib/client/words';
import { formatNumber } from '@/lib/quantity/format';

/** The chart as a table, opened on demand. */
export function ChartTable({ view }: { view: OverTimeView }) {
  const [open, setOpen] = useState(false);
  if (!open) return <Button onClick={() => setOpen(true)}>Open the table</Button>;
  return (
    <div className="w-full">
      <Button onClick={() => setOpen(false)} aria-expanded>
        Close the table
      </Button>
      <div className="chart-table mt-3" tabIndex={0} role="region" aria-label="Runs of the chart">
        <table className="figures">
          <thead>
            <tr>
              <th scope="col">Run</th>
              <th scope="col">Taken</th>
              <th scope="col">Frame of</th>
              <th scope="col" className="num">
                nm ({MEDIUM_WORDS[view.medium]})
              </th>
              <th scope="col" className="num">
                Moving range, nm
              </th>
              <th scope="col">Setup</th>
              <th scope="col">Findings</th>
            </tr>
          </thead>
          <tbody>
            {view.points.map((point, i) => (
              <tr key={point.readingId}>
                <td>{i + 1}</td>
                <td>
                  <When at={point.takenAt} />
                </td>
                <td>
                  <Link
                    className="link"
                    href={`/frames/${point.frameId}?reading=${point.readingId}`}
                    prefetch={false}
                  >
                    {point.label}
                  </Link>
                </td>
                <td className="num">{formatNumber(point.valueNm, 3)}</td>
                <td className="num">
                  {point.movingRangeNm === null ? '' : formatNumber(point.movingRangeNm, 3)}
                </td>
                <td>{point.setupNumber}</td>
                <td>
                  {view.findings
                    .filter((f) => i >= f.first && i <= f.last)
                    .map((f) => f.letter)
                    .join(', ')}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </div>
  );
}
