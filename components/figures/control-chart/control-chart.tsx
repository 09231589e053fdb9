'use client';

import Plotly from 'plotly.js';
import createPlotlyComponent from 'react-plotly.js/factory';
import { useMemo } from 'react';
import { MEDIUM_SHORT } from '../quantity';
import { useLook } from '@/lib/client/look';
import { useSize } from '@/lib/client/use-size';
import type { OverTimeView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { chartColours } from './colours';
import { controlChartFigure } from './figure';

const Plot = createPlotlyComponent(Plotly);

/** No buttons of its own, nothing sent anywhere. */
const CONFIG = {
  displayModeBar: false,
  displaylogo: false,
  showSendToCloud: false,
  plotlyServerURL: '',
  scrollZoom: false,
  doubleClick: false,
} as const;

/** Individuals above, moving range below, on one axis of runs; everything breaks at each change of setup. */
export function ControlChart({ view }: { view: OverTimeView }) {
  const { theme, goggles, timeZone } = useLook();
  const [measure, size] = useSize<HTMLDivElement>();
  const width = size?.width ?? 0;
  const figure = useMemo(
    () =>
      controlChartFigure(
        view,
        chartColours(view.points[0]?.valueNm ?? null, theme, goggles),
        timeZone,
        width,
      ),
    [view, theme, goggles, timeZone, width],
  );
  return (
    <div ref={measure} className="chart-place" role="img" aria-label={describe(view)}>
      {width > 0 ? (
        <Plot data={figure.data} layout={figure.layout} config={CONFIG} style={{ width: '100%' }} />
      ) : null}
    </div>
  );
}

function describe(view: OverTimeView): string {
  const last = view.stretches[view.stretches.length - 1];
  const limits =
    last && last.lowerNm !== null && last.upperNm !== null
      ? `The limits of setup ${last.setupNumber} are ${formatNumber(last.lowerNm, 2)} and ${formatNumber(last.upperNm, 2)} nm (${MEDIUM_SHORT[view.medium]}).`
      : '';
  return `Wavelength of ${view.subjectName}${view.bench ? ` on ${view.bench.name}` : ''}, ${view.points.length} runs over ${view.stretches.length} setups, with limits and ${view.findings.length} findings; moving range below. ${limits} The same is in the table.`;
}
