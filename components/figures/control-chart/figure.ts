/**
 * The control charts as a figure of the chart library: traces for what was measured, shapes and texts for limits,
 * seams and findings. Runs stand at 1, 2, 3 …; a stretch reaches half a run beyond its ends.
 */
import { MEDIUM_SHORT } from '../quantity';
import type { OverTimeView } from '@/lib/domain/views';
import { formatDay, formatNumber } from '@/lib/quantity/format';
import type { ChartColours } from './colours';
import { FACE, RANGE_DOMAIN, rangeTop, VALUE_DOMAIN, valueExtent, xTicks, yTicks, type Dict } from './scale';
import { chartShapes } from './shapes';
import { chartTexts, say } from './texts';

const HEIGHT = 620;

function traces(view: OverTimeView, c: ChartColours): Dict[] {
  const runs = view.points.map((_, i) => i + 1);
  const out = view.points.map((p) => p.outside);
  // The trace breaks where a stretch ends.
  const brokenX: (number | null)[] = [];
  const brokenY: (number | null)[] = [];
  view.stretches.forEach((s) => {
    for (let i = s.first; i <= s.last; i += 1) {
      brokenX.push(i + 1);
      brokenY.push(view.points[i].valueNm);
    }
    brokenX.push(null);
    brokenY.push(null);
  });
  const large = view.points.map((p) => {
    const stretch = view.stretches.find((s) => s.setupId === p.setupId && s.upperRangeNm !== null);
    return (
      p.movingRangeNm !== null && stretch?.upperRangeNm != null && p.movingRangeNm > stretch.upperRangeNm
    );
  });
  return [
    {
      type: 'scatter',
      mode: 'lines',
      x: brokenX,
      y: brokenY,
      line: { color: c.light, width: 1.5 * c.stroke },
      hoverinfo: 'skip',
      connectgaps: false,
    },
    {
      type: 'scatter',
      mode: 'markers',
      x: runs,
      y: view.points.map((p) => p.valueNm),
      text: view.points.map(
        (p) =>
          `${p.label}<br>${formatNumber(p.valueNm, 3)} nm (${MEDIUM_SHORT[view.medium]}), setup ${p.setupNumber}`,
      ),
      hovertemplate: '%{text}<extra></extra>',
      marker: {
        // With sizes of their own the library would make the points see-through.
        opacity: 1,
        symbol: out.map((o) => (o ? 'circle-open' : 'circle')),
        size: out.map((o) => (o ? 13 : 7.5)),
        color: c.ink,
        line: {
          color: out.map((o) => (o ? c.ink : c.ground)),
          width: out.map((o) => (o ? 2.25 * c.stroke : 1.25)),
        },
      },
    },
    {
      type: 'bar',
      x: runs,
      y: view.points.map((p) => p.movingRangeNm),
      yaxis: 'y2',
      width: 0.34,
      text: view.points.map((p) => `${p.label}<br>step ${formatNumber(p.movingRangeNm ?? 0, 3)} nm`),
      textposition: 'none',
      hovertemplate: '%{text}<extra></extra>',
      marker: {
        color: large.map((l) => (l ? c.ground : c.ink)),
        line: { color: c.ink, width: large.map((l) => (l ? 1.75 * c.stroke : 0)) },
      },
    },
  ];
}

export function controlChartFigure(
  view: OverTimeView,
  c: ChartColours,
  timeZone: string,
  width: number,
): { data: Dict[]; layout: Dict } {
  const extent = valueExtent(view);
  const top = rangeTop(view);
  const margin = {
    l: 58 + (c.axisPx > 13 ? 10 : 0),
    r: width < 560 ? 24 : 128 + (c.axisPx > 13 ? 26 : 0),
    t: 34,
    b: 40,
  };
  const endPx = Math.max(0, margin.r - 24);
  const plotPx = Math.max(120, width - margin.l - margin.r);
  const y = yTicks(extent);
  const y2 = yTicks({ low: 0, high: top });
  const sparse = y2.values.length > 4 ? y2.values.filter((_, i) => i % 2 === 0) : y2.values;
  const x = xTicks(view, timeZone, plotPx);
  const years = [...new Set(view.points.map((p) => formatDay(p.takenAt, timeZone).slice(-4)))].join(' to ');
  const axis: Dict = {
    tickfont: { family: FACE, size: c.axisPx, color: c.ink3 },
    showgrid: false,
    zeroline: false,
    fixedrange: true,
    tickcolor: c.edge,
    ticklen: 6,
  };
  return {
    data: traces(view, c),
    layout: {
      height: HEIGHT,
      autosize: true,
      margin,
      paper_bgcolor: 'rgba(0,0,0,0)',
      plot_bgcolor: 'rgba(0,0,0,0)',
      font: { family: FACE, size: c.axisPx, color: c.ink3 },
      showlegend: false,
      dragmode: false,
      hovermode: 'closest',
      hoverlabel: {
        bgcolor: c.ground,
        bordercolor: c.edge,
        font: { family: FACE, size: c.notePx, color: c.ink },
      },
      xaxis: {
        ...axis,
        range: [0.5, view.points.length + 0.5],
        tickvals: x.values,
        ticktext: x.texts,
        anchor: 'y2',
        showline: true,
        linecolor: c.edge,
        linewidth: 1.5,
        ticks: 'outside',
        showspikes: false,
      },
      yaxis: {
        ...axis,
        domain: VALUE_DOMAIN,
        range: [extent.low, extent.high],
        tickvals: y.values,
        ticktext: y.texts,
        ticks: 'outside',
      },
      yaxis2: {
        ...axis,
        domain: RANGE_DOMAIN,
        range: [0, top],
        tickvals: sparse,
        ticktext: sparse.map((v) => formatNumber(v, top > 1 ? 1 : 2)),
        ticks: '',
      },
      shapes: chartShapes(view, extent, c),
      annotations: [
        ...chartTexts(view, extent, c, { timeZone, plotPx, endPx }),
        ...(endPx > 0
          ? [
              say(
                1,
                0,
                { text: years, size: c.axisPx, color: c.ink3 },
                { xref: 'paper', yref: 'paper', xanchor: 'left', yanchor: 'top', xshift: 12, yshift: -8 },
              ),
            ]
          : []),
      ],
    },
  };
}
