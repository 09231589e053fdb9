'use client';

import dynamic from 'next/dynamic';
import { HollowOrders } from '@/components/figures/hollow-orders';
import type { OverTimeView } from '@/lib/domain/views';

// The chart library is large: it comes only with this page, and only in the browser.
const ControlChart = dynamic(
  () => import('@/components/figures/control-chart/control-chart').then((module) => module.ControlChart),
  {
    ssr: false,
    loading: () => (
      <div className="chart-place grid place-items-center" role="status">
        <span className="only-heard">The chart is loading</span>
        <div className="w-[60%]">
          <HollowOrders of={17} lit={4} />
        </div>
      </div>
    ),
  },
);

export function ChartLoader({ view }: { view: OverTimeView }) {
  return <ControlChart view={view} />;
}
