'use client';

import { useCallback, useMemo, useState, type ReactNode } from 'react';
import { lightLine } from '@/lib/client/light';
import { useLook } from '@/lib/client/look';
import { useSize } from '@/lib/client/use-size';
import type { PlacedStrip } from '@/lib/domain/placed-strip';
import { isScanResult, type FitResult } from '@/lib/domain/scan-result';
import { formatNumber, formatPercent } from '@/lib/quantity/format';
import { LightBand } from '../fringe-strip';
import { MisfitBand } from './misfit-band';
import { OrderCard } from './order-card';
import { OrderTable } from './order-table';
import { isOut, OrderLadder } from './order-ladder';
import type { Scale } from './paths';
import { ProfileBand } from './profile-band';
import { stageData } from './stage-data';
import { stageLayout, type AxisView, type StageLayout } from './stage-layout';
import { StageZoom, zoomed } from './stage-zoom';

interface Props {
  result: FitResult;
  /** Of a frame; a scan is in mm already. */
  scaleUmPerPx: number;
  /** Wavelength in air that colours the light; null before one is known. */
  nm: number | null;
  leaveOut: readonly number[];
  picked: number | null;
  onPick: (m: number | null) => void;
  /** Leaves an order out or takes it back; absent where the reading cannot be changed. */
  onToggleOrder?: (m: number) => void;
  /** Counts all orders from this one. */
  onZeroHere?: (m: number) => void;
  /** A few words on where the numbers come from. */
  note?: ReactNode;
}

/** Room one dot needs, px; closer points are thinned and the caption says so. */
const DOT_ROOM = 2.6;
/** Width the card of an order takes; it never covers the order's own line. */
const CARD_ROOM_PX = 232;
/** From this width the captions are written out. */
const ROOMY_PX = 520;

/** Strip, profile, misfit and order ladder on one axis, the zero order in the middle. */
export function Stage(props: Props) {
  const [measure, size] = useSize<HTMLDivElement>();
  return (
    <section className="stage" aria-label="Fringes on one axis" ref={measure}>
      {size && size.width > 60 ? (
        <Drawing {...props} width={size.width} height={Math.max(560, size.height)} />
      ) : null}
    </section>
  );
}

function Drawing({
  result,
  scaleUmPerPx,
  nm,
  leaveOut,
  picked,
  onPick,
  onToggleOrder,
  onZeroHere,
  note,
  width,
  height,
}: Props & { width: number; height: number }) {
  const { theme, goggles } = useLook();
  const [zoom, setZoom] = useState({ factor: 1, middleMm: 0 });
  const data = useMemo(() => stageData(result, scaleUmPerPx), [result, scaleUmPerPx]);
  const layout = stageLayout(height, goggles);
  // A key press draws the page twice, for the region and for its numbers; the curves are drawn with the numbers only.
  const view = useMemo(() => zoomed(data.halfMm, zoom), [data, zoom]);
  const x: Scale = useCallback(
    (mm) => ((mm - view.fromMm) / (view.toMm - view.fromMm)) * width,
    [view, width],
  );
  const seen = useMemo(
    () => data.points.filter((p) => p.mm >= view.fromMm && p.mm <= view.toMm),
    [data, view],
  );
  const every = Math.max(1, Math.round((seen.length * DOT_ROOM) / width));
  const order = data.orders.find((o) => o.m === picked) ?? null;
  const used = data.orders.filter((o) => !isOut(o, leaveOut)).length;
  const style = {
    '--light-line': goggles ? 'var(--ink)' : lightLine(nm, theme, false),
  } as React.CSSProperties;

  return (
    <>
      <Band strip={data.strip} nm={nm} layout={layout} view={view} width={width} />
      <svg className="fig" width={width} height={height} style={style}>
        <g role="img" aria-label={describe(result, used, data.orders.length)}>
          <Captions
            layout={layout}
            width={width}
            result={result}
            used={used}
            total={data.orders.length}
            every={every}
            goggles={goggles}
          />
          <ZeroLine x={x(0)} layout={layout} width={width} />
          <ProfileBand
            points={seen}
            every={every}
            top={data.top}
            peak={peakWords(result)}
            x={x}
            width={width}
            from={layout.profile[0]}
            to={layout.profile[1]}
            goggles={goggles}
          />
          <MisfitBand
            points={seen}
            every={every}
            x={x}
            width={width}
            from={layout.misfit[0]}
            to={layout.misfit[1]}
            goggles={goggles}
          />
        </g>
        <OrderLadder
          orders={data.orders}
          leaveOut={leaveOut}
          picked={picked}
          onPick={(m) => onPick(m === picked ? null : m)}
          x={x}
          width={width}
          view={view}
          layout={layout}
          touchPx={44}
        />
        {order && order.mm >= view.fromMm && order.mm <= view.toMm ? (
          <ReadingLine x={x(order.mm)} layout={layout} bright={order.kind === 'bright'} />
        ) : null}
      </svg>
      {note ? (
        <div
          className={width > (goggles ? 1.4 : 1.1) * ROOMY_PX ? 'stage-note' : 'stage-note is-narrow'}
          style={{ top: layout[width > ROOMY_PX ? 'misfit' : 'profile'][0] - 30 }}
        >
          {note}
        </div>
      ) : null}
      <OrderTable orders={data.orders} unit={data.unit} leaveOut={leaveOut} top={layout.ladder[0] - 37} />
      <StageZoom zoom={zoom} halfMm={data.halfMm} onZoom={setZoom} top={layout.band[0] - 39} />
      {order ? (
        <OrderCard
          order={order}
          unit={data.unit}
          out={isOut(order, leaveOut)}
          top={layout.profile[0] + 6}
          side={x(order.mm) > width - CARD_ROOM_PX ? 'left' : 'right'}
          onToggle={onToggleOrder ? () => onToggleOrder(order.m) : undefined}
          onZero={
            onZeroHere && order.kind === 'bright' && order.m !== 0 ? () => onZeroHere(order.m) : undefined
          }
        />
      ) : null}
    </>
  );
}

/** Of a camera's full scale, or in the unit of the scan. */
function peakWords(result: FitResult): string {
  if (!isScanResult(result)) return `Peak at ${formatPercent(result.peakShare)} of full scale`;
  return `Peak at ${formatNumber(result.peak, result.peak < 100 ? 2 : 0)}`;
}

function takenWords(result: FitResult): [name: string, more: string] {
  if (!isScanResult(result))
    return ['Fringes, straightened', `${formatNumber(result.rows, 0)} rows averaged`];
  const points = result.curves.xMm.length;
  return ['Fringes, along the scan', `${formatNumber(points, 0)} points`];
}

function describe(result: FitResult, used: number, total: number): string {
  return `${takenWords(result)[0]}, profile with the fitted curve, misfit over its uncertainty. ${used} of ${total} order centres used, visibility ${formatNumber(result.visibility, 2)}.`;
}

interface BandProps {
  strip: PlacedStrip;
  nm: number | null;
  layout: StageLayout;
  view: AxisView;
  width: number;
}

function Band({ strip, nm, layout, view, width }: BandProps) {
  const { fromMm: from, toMm: to, light } = strip;
  const share = (mm: number) => (100 * mm) / (view.toMm - view.fromMm);
  return (
    <div className="band" style={{ top: layout.band[0], height: layout.band[1] - layout.band[0], width }}>
      <LightBand
        light={light}
        nm={nm}
        label="Fringes, averaged along their length"
        style={{ left: `${share(from - view.fromMm)}%`, width: `${share(to - from)}%` }}
      />
    </div>
  );
}

function ZeroLine({ x, layout, width }: { x: number; layout: StageLayout; width: number }) {
  if (x < 0 || x > width) return null;
  return (
    <path
      d={`M${x} 0V${layout.band[0]}M${x} ${layout.band[1]}V${layout.ladder[0] + 10}`}
      className="l-edge"
    />
  );
}

function ReadingLine({ x, layout, bright }: { x: number; layout: StageLayout; bright: boolean }) {
  const end = bright ? layout.brightY - 4 : layout.darkY - 4;
  const dots = {
    strokeDasharray: '1 4',
    strokeLinecap: 'round' as const,
    style: { strokeWidth: 'calc(1.25px * var(--g))' },
  };
  return (
    <g aria-hidden="true">
      <path d={`M${x} ${layout.profile[0]}V${end}`} className="l-ink" {...dots} />
      <path d={`M${x} ${layout.band[0]}V${layout.band[1]}`} stroke="#f4f0e7" {...dots} />
    </g>
  );
}

interface CaptionsProps {
  layout: StageLayout;
  width: number;
  result: FitResult;
  used: number;
  total: number;
  every: number;
  goggles: boolean;
}

function Captions({ layout, width, result, used, total, every, goggles }: CaptionsProps) {
  const line = (y: number, name: string, more: string) => (
    <text x="0" y={y - 10} className="t-2 s14">
      <tspan className="t-ink t-500">{name}</tspan>
      {more ? <tspan dx="12">{more}</tspan> : null}
    </text>
  );
  const y = layout.profile[0] - 10;
  const at = goggles ? 92 : 82;
  const tone = goggles ? 'var(--edge)' : 'var(--ink)';
  const zero = result.envelopeZeroOrder;
  const roomy = width > ROOMY_PX;
  const [taken, more] = takenWords(result);
  return (
    <>
      {line(layout.band[0], `1 ${taken}`, more)}
      {line(layout.profile[0], '2 Profile', '')}
      {line(layout.misfit[0], '3 Misfit over its uncertainty', every > 1 ? `1 of ${every} points drawn` : '')}
      {line(layout.ladder[0], '4 Orders', `${used} of ${total} centres used`)}
      <path
        d={`M${at} ${y - 5}h0M${at + 8} ${y - 7}h0M${at + 16} ${y - 4}h0`}
        stroke={tone}
        strokeWidth="4"
        strokeLinecap="round"
      />
      <text x={at + 25} y={y} className="t-2 s14">
        data
      </text>
      <path
        d={`M${at + 66} ${y - 5}h22`}
        stroke="var(--light-line)"
        style={{ strokeWidth: 'calc(2.25px * var(--g))' }}
      />
      <text x={at + 95} y={y} className="t-2 s14">
        fit
      </text>
      {roomy ? (
        <>
          <path
            d={`M${width / 2 + 14} ${y - 5}h22`}
            stroke="var(--ink-2)"
            strokeDasharray="5 4"
            style={{ strokeWidth: 'calc(1.5px * var(--g))' }}
          />
          <text x={width / 2 + 43} y={y} className="t-2 s14">
            {zero === null ? 'envelope' : `envelope, zero at order ${formatNumber(zero, 1)}`}
          </text>
        </>
      ) : null}
    </>
  );
}
