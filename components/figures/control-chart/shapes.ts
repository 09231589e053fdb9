/** Limits, seams, the reference value and the brackets of the control charts. */
import type { OverTimeView } from '@/lib/domain/views';
import type { ChartColours } from './colours';
import { bracketAt, VALUE_DOMAIN, type Dict, type Extent } from './scale';

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

export function chartShapes(view: OverTimeView, extent: Extent, c: ChartColours): Dict[] {
  return [
    ...seamShapes(view, c),
    ...limitShapes(view, c),
    ...referenceShapes(view, extent, c),
    ...bracketShapes(view, extent, c),
  ];
}
