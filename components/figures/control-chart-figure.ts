/**
 * The control charts as a figure of the chart library: traces for what was measured, shapes and annotations for
 * limits, seams and findings. Runs stand at 1, 2, 3 …; a stretch reaches half a run beyond its ends.
 */
import type { ChartFinding, ChartStretch, OverTimeView } from '@/lib/domain/views';
import { formatDay, formatNumber } from '@/lib/quantity/format';
import type { ChartColours } from './control-chart-colours';
import { niceStep } from './stage/stage-layout';

type Dict = Record<string, unknown>;

const FACE = '"IBM Plex Sans","Helvetica Neue",Arial,sans-serif';
const HEIGHT = 620;
/** Shares of the height: moving range below, individuals above. */
const RANGE_DOMAIN = [0, 0.21];
const VALUE_DOMAIN = [0.32, 0.93];

interface Extent {
  low: number;
  high: number;
}

function valueExtent(view: OverTimeView): Extent {
  const all = [
    ...view.points.map((p) => p.valueNm),
    ...view.stretches.flatMap((s) => [s.lowerNm ?? s.meanNm, s.upperNm ?? s.meanNm]),
  ];
  // A nominal far from the runs would flatten them; a reference value near them belongs in the picture.
  const low = Math.min(...all);
  const high = Math.max(...all);
  const span = Math.max(high - low, 1e-6);
  const ref = view.referenceNm;
  const near = ref !== null && ref > low - 0.6 * span && ref < high + 0.6 * span;
  const from = near ? Math.min(low, ref) : low;
  const to = near ? Math.max(high, ref) : high;
  return { low: from - 0.1 * (to - from), high: to + 0.1 * (to - from) };
}

function rangeTop(view: OverTimeView): number {
  return (
    1.12 *
    Math.max(
      1e-6,
      ...view.points.map((p) => p.movingRangeNm ?? 0),
      ...view.stretches.map((s) => s.upperRangeNm ?? 0),
    )
  );
}

/** Tick texts with a true minus and grouped thousands. */
function yTicks({ low, high }: Extent): { values: number[]; texts: string[] } {
  const step = niceStep((high - low) / 7);
  const places = Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
  const values: number[] = [];
  for (let i = Math.ceil(low / step); i * step <= high; i += 1) values.push(i * step);
  return { values, texts: values.map((v) => formatNumber(v, places)) };
}

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
      text: view.points.map((p) => `${p.label}<br>${formatNumber(p.valueNm, 3)} nm, setup ${p.setupNumber}`),
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

const flat = (axis: 'y' | 'y2', from: number, to: number, at: number, line: Dict): Dict => ({
  type: 'line',
  xref: 'x',
  yref: axis,
  x0: from,
  x1: to,
  y0: at,
  y1: at,
  line,
});

/** Limits solid, mean dashed, in both charts; each stretch has its own. */
function limitShapes(view: OverTimeView, c: ChartColours): Dict[] {
  const solid = { color: c.ink2, width: 1.5 * c.stroke };
  const dashed = { color: c.ink2, width: 1.25 * c.stroke, dash: '9px,5px' };
  return view.stretches.flatMap((s) => {
    const from = s.first + 0.5;
    const to = s.last + 1.5;
    return [
      ...(s.upperNm === null ? [] : [flat('y', from, to, s.upperNm, solid)]),
      ...(s.lowerNm === null ? [] : [flat('y', from, to, s.lowerNm, solid)]),
      flat('y', from, to, s.meanNm, dashed),
      ...(s.upperRangeNm === null ? [] : [flat('y2', from, to, s.upperRangeNm, solid)]),
      ...(s.meanRangeNm === null ? [] : [flat('y2', from, to, s.meanRangeNm, dashed)]),
    ];
  });
}

/** A vertical line through both charts with a flag where a setup begins. */
function seamShapes(view: OverTimeView, c: ChartColours): Dict[] {
  return view.stretches.flatMap((s, i) => {
    const x = s.first + 0.5;
    const line: Dict = {
      type: 'line',
      xref: 'x',
      yref: 'paper',
      x0: x,
      x1: x,
      y0: 0,
      y1: i ? 1 : VALUE_DOMAIN[1],
      line: { color: i ? c.edge : c.line, width: c.stroke },
    };
    const flag: Dict = {
      type: 'path',
      xref: 'x',
      yref: 'paper',
      xsizemode: 'pixel',
      ysizemode: 'pixel',
      xanchor: x,
      yanchor: 1,
      path: 'M0 0H9L0 -11Z',
      fillcolor: c.ink,
      line: { width: 0 },
    };
    return i ? [line, flag] : [line];
  });
}

/** The reference value: two thick ticks at the ends, not another line. */
function referenceShapes(view: OverTimeView, extent: Extent, c: ChartColours): Dict[] {
  const at = view.referenceNm;
  if (at === null || at < extent.low || at > extent.high) return [];
  const line = { color: c.ink, width: 3 * c.stroke };
  const tick = (anchor: number, from: number, to: number): Dict => ({
    type: 'line',
    xref: 'paper',
    xsizemode: 'pixel',
    xanchor: anchor,
    x0: from,
    x1: to,
    yref: 'y',
    y0: at,
    y1: at,
    line,
  });
  return [tick(0, -3, 8), tick(1, -8, 3)];
}

/** A bracket beside each run on one side of the mean. */
function bracketShapes(view: OverTimeView, extent: Extent, c: ChartColours): Dict[] {
  const foot = (extent.high - extent.low) * 0.018;
  return view.findings
    .filter((f) => f.kind === 'nine')
    .map((f) => {
      const y = bracketAt(view, f, extent);
      const towards = y.below ? foot : -foot;
      return {
        type: 'path',
        xref: 'x',
        yref: 'y',
        path: `M${f.first + 1},${y.at + towards}L${f.first + 1},${y.at}L${f.last + 1},${y.at}L${f.last + 1},${y.at + towards}`,
        line: { color: c.ink, width: 2 * c.stroke },
      };
    });
}

/** Just clear of the run, on the side of the mean. */
function bracketAt(view: OverTimeView, f: ChartFinding, extent: Extent): { at: number; below: boolean } {
  const values = view.points.slice(f.first, f.last + 1).map((p) => p.valueNm);
  const stretch = view.stretches.find((s) => f.first >= s.first && f.first <= s.last);
  const below = values[0] > (stretch?.meanNm ?? values[0]);
  const room = (extent.high - extent.low) * 0.06;
  return { below, at: below ? Math.min(...values) - room : Math.max(...values) + room };
}

interface Said {
  text: string;
  size: number;
  color: string;
}

function say(x: number, y: number, said: Said, more: Dict): Dict {
  return {
    x,
    y,
    text: said.text,
    font: { family: FACE, size: said.size, color: said.color },
    showarrow: false,
    ...more,
  };
}

/** The names of what changed, without the values: "distance, plate". */
function changedNames(change: string): string {
  return change
    .split(', ')
    .map((part) => part.replace(/\s\S*\d.*$/, ''))
    .join(', ');
}

/** As much of setup, date and change as the stretch has room for. */
function seamText(s: ChartStretch, i: number, c: ChartColours, timeZone: string, roomPx: number): string {
  const day = formatDay(s.from, timeZone).replace(/ \d{4}$/, '');
  const name = `<span style="color:${c.ink}"><b>Setup ${s.setupNumber}</b></span>`;
  const what = i && s.change ? `, ${changedNames(s.change)}` : '';
  const longest: [string, number][] = [
    [`${name}  ${i ? '' : 'since '}${day}${what}`, 10 + (i ? 0 : 6) + day.length + what.length],
    [`${name}  ${day}`, 10 + day.length],
    [name, 8],
  ];
  const letters = (roomPx - 16) / (c.notePx * 0.54);
  return (
    longest.find(([, length]) => length <= letters)?.[0] ??
    `<span style="color:${c.ink}"><b>${s.setupNumber}</b></span>`
  );
}

/** Setup, date and what changed at each seam; the limits where they begin. */
function stretchTexts(s: ChartStretch, i: number, c: ChartColours, timeZone: string, roomPx: number): Dict[] {
  const x = s.first + 0.5;
  const left: Dict = { xanchor: 'left', align: 'left' };
  const short = seamText(s, i, c, timeZone, roomPx);
  const limit = (axis: 'y' | 'y2', word: string, at: number | null, above: boolean): Dict[] =>
    at === null || roomPx < 76
      ? []
      : [
          say(
            x,
            at,
            { text: `${word} ${formatNumber(at, 2)}`, size: c.axisPx, color: c.ink2 },
            { ...left, yref: axis, yanchor: above ? 'bottom' : 'top', xshift: 5, yshift: above ? 1 : -1 },
          ),
        ];
  return [
    say(
      x,
      1,
      { text: short, size: c.notePx, color: c.ink2 },
      { ...left, yref: 'paper', yanchor: 'top', xshift: i ? 13 : 5, yshift: 3 },
    ),
    ...limit('y', s.standing === 'provisional' ? 'upper (provisional)' : 'upper', s.upperNm, true),
    ...limit('y', 'lower', s.lowerNm, false),
    ...limit('y2', 'upper', s.upperRangeNm, true),
  ];
}

function texts(
  view: OverTimeView,
  extent: Extent,
  c: ChartColours,
  timeZone: string,
  plotPx: number,
): Dict[] {
  const medium = view.medium === 'air' ? 'air' : 'vac';
  const runPx = plotPx / Math.max(1, view.points.length);
  const last = view.stretches[view.stretches.length - 1];
  const end: Dict = { xref: 'paper', xanchor: 'left', xshift: 12, align: 'left' };
  const ref = view.referenceNm;
  const refShown = ref !== null && ref >= extent.low && ref <= extent.high;
  const crowd = refShown && last ? Math.abs(ref - last.meanNm) < (extent.high - extent.low) * 0.05 : false;
  return [
    ...view.stretches.flatMap((s, i) => stretchTexts(s, i, c, timeZone, (s.last - s.first + 1) * runPx)),
    say(
      0,
      1,
      {
        text: `<span style="color:${c.ink}"><b>Wavelength</b></span>  nm (${medium}), one run a point`,
        size: c.axisPx,
        color: c.ink2,
      },
      { xref: 'paper', yref: 'paper', xanchor: 'left', yanchor: 'bottom', xshift: -58, yshift: 12 },
    ),
    say(
      0,
      RANGE_DOMAIN[1],
      {
        text: `<span style="color:${c.ink}"><b>Moving range</b></span>  nm, from run to run`,
        size: c.axisPx,
        color: c.ink2,
      },
      { xref: 'paper', yref: 'paper', xanchor: 'left', yanchor: 'bottom', xshift: -58, yshift: 16 },
    ),
    ...(last
      ? [
          say(
            1,
            last.meanNm,
            { text: `<b>mean ${formatNumber(last.meanNm, 2)}</b>`, size: c.axisPx, color: c.ink },
            { ...end, yref: 'y', yshift: crowd ? (ref !== null && ref > last.meanNm ? -9 : 9) : 0 },
          ),
        ]
      : []),
    ...(last?.meanRangeNm != null
      ? [
          say(
            1,
            last.meanRangeNm,
            { text: `<b>mean ${formatNumber(last.meanRangeNm, 2)}</b>`, size: c.axisPx, color: c.ink },
            { ...end, yref: 'y2' },
          ),
        ]
      : []),
    ...(refShown
      ? [
          say(
            1,
            ref,
            {
              text: `${view.referenceIsNominal ? 'nominal' : 'reference'} ${formatNumber(ref, 2)}`,
              size: c.axisPx,
              color: c.ink2,
            },
            { ...end, yref: 'y', yshift: crowd ? (last && ref > last.meanNm ? 9 : -9) : 0 },
          ),
        ]
      : []),
    ...view.findings.flatMap((f) => letter(view, f, extent, c)),
  ];
}

function letter(view: OverTimeView, f: ChartFinding, extent: Extent, c: ChartColours): Dict[] {
  const said = { text: `<b>${f.letter}</b>`, size: 16, color: c.ink };
  if (f.kind === 'nine') {
    const y = bracketAt(view, f, extent);
    return [
      say((f.first + f.last) / 2 + 1, y.at, said, {
        yref: 'y',
        yanchor: y.below ? 'top' : 'bottom',
        yshift: y.below ? -2 : 2,
      }),
    ];
  }
  const point = view.points[f.first];
  if (f.kind === 'range')
    return [
      say(
        f.first + 1,
        point.movingRangeNm ?? 0,
        { ...said, size: c.notePx },
        { yref: 'y2', xanchor: 'left', xshift: 7 },
      ),
    ];
  return [say(f.first + 1, point.valueNm, said, { yref: 'y', xanchor: 'left', xshift: 11 })];
}

/** Dates of about eight runs, and the year at the end. */
function xTicks(view: OverTimeView, timeZone: string, plotPx: number): { values: number[]; texts: string[] } {
  const n = view.points.length;
  const every = Math.max(1, Math.ceil(n / Math.max(2, Math.floor(plotPx / 90))));
  const values: number[] = [];
  for (let i = 0; i < n; i += every) values.push(i + 1);
  return {
    values,
    texts: values.map((run) => formatDay(view.points[run - 1].takenAt, timeZone).replace(/ \d{4}$/, '')),
  };
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
      shapes: [
        ...seamShapes(view, c),
        ...limitShapes(view, c),
        ...referenceShapes(view, extent, c),
        ...bracketShapes(view, extent, c),
      ],
      annotations: [
        ...texts(view, extent, c, timeZone, plotPx),
        say(
          1,
          0,
          { text: years, size: c.axisPx, color: c.ink3 },
          { xref: 'paper', yref: 'paper', xanchor: 'left', yanchor: 'top', xshift: 12, yshift: -8 },
        ),
      ],
    },
  };
}
