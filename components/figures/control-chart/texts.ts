/** What is written into the control charts: setups, limits, means, the reference value, letters of findings. */
import type { ChartFinding, ChartStretch, OverTimeView } from '@/lib/domain/views';
import { formatDay, formatNumber } from '@/lib/quantity/format';
import type { ChartColours } from './colours';
import { bracketAt, FACE, RANGE_DOMAIN, type Dict, type Extent } from './scale';

interface Said {
  text: string;
  size: number;
  color: string;
}

export function say(x: number, y: number, said: Said, more: Dict): Dict {
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
    ...limit(
      'y',
      s.standing === 'provisional' && roomPx > 14 * c.axisPx ? 'upper (provisional)' : 'upper',
      s.upperNm,
      true,
    ),
    ...limit('y', 'lower', s.lowerNm, false),
    ...limit('y2', 'upper', s.upperRangeNm, true),
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

/** Names of the two charts above their axes. */
function heads(view: OverTimeView, c: ChartColours): Dict[] {
  const medium = view.medium === 'air' ? 'air' : 'vac';
  const place: Dict = {
    xref: 'paper',
    yref: 'paper',
    xanchor: 'left',
    yanchor: 'bottom',
    xshift: c.axisPx > 13 ? -68 : -58,
  };
  const named = (name: string, more: string) => ({
    text: `<span style="color:${c.ink}"><b>${name}</b></span>  ${more}`,
    size: c.axisPx,
    color: c.ink2,
  });
  return [
    say(0, 1, named('Wavelength', `nm (${medium}), one run a point`), { ...place, yshift: 12 }),
    say(0, RANGE_DOMAIN[1], named('Moving range', 'nm, from run to run'), { ...place, yshift: 16 }),
  ];
}

/** Means of the last stretch and the reference value, beyond the right end; moved apart where they would touch. */
function ends(view: OverTimeView, extent: Extent, c: ChartColours): Dict[] {
  const last = view.stretches[view.stretches.length - 1];
  const end: Dict = { xref: 'paper', xanchor: 'left', xshift: 12, align: 'left' };
  const ref = view.referenceNm;
  const shown = ref !== null && ref >= extent.low && ref <= extent.high;
  const crowd = shown && last && Math.abs(ref - last.meanNm) < (extent.high - extent.low) * 0.05;
  const up = crowd && ref > last.meanNm ? 9 : crowd ? -9 : 0;
  const mean = (nm: number) => ({ text: `<b>mean ${formatNumber(nm, 2)}</b>`, size: c.axisPx, color: c.ink });
  const list: Dict[] = [];
  if (last) list.push(say(1, last.meanNm, mean(last.meanNm), { ...end, yref: 'y', yshift: -up }));
  if (last?.meanRangeNm != null)
    list.push(say(1, last.meanRangeNm, mean(last.meanRangeNm), { ...end, yref: 'y2' }));
  if (shown) {
    const text = `${view.referenceIsNominal ? 'nominal' : 'reference'} ${formatNumber(ref, 2)}`;
    list.push(say(1, ref, { text, size: c.axisPx, color: c.ink2 }, { ...end, yref: 'y', yshift: up }));
  }
  return list;
}

interface Room {
  timeZone: string;
  /** Width of the plot, and of the margin at its right end, px; 0 leaves the texts there out. */
  plotPx: number;
  endPx: number;
}

export function chartTexts(view: OverTimeView, extent: Extent, c: ChartColours, room: Room): Dict[] {
  const runPx = room.plotPx / Math.max(1, view.points.length);
  const lastOne = view.stretches.length - 1;
  return [
    ...heads(view, c),
    ...view.stretches.flatMap((s, i) =>
      stretchTexts(s, i, c, room.timeZone, (s.last - s.first + 1) * runPx + (i === lastOne ? room.endPx : 0)),
    ),
    ...(room.endPx > 0 ? ends(view, extent, c) : []),
    ...view.findings.flatMap((f) => letter(view, f, extent, c)),
  ];
}
