'use client';

import { useRef, type KeyboardEvent } from 'react';
import { formatNumber, formatSigned } from '@/lib/quantity/format';
import type { Scale } from './paths';
import type { StageOrder } from './stage-data';
import { niceStep, ticks, type AxisView, type StageLayout } from './stage-layout';

const BRIGHT_HEIGHT = 40;
const DARK_HEIGHT = 20;
/** Room an order's number needs beside the next, px. */
const NUMBER_ROOM = 34;

/** "+5" or "+4.5"; the zero order is "0". */
export function orderName(m: number): string {
  return Number.isInteger(m) ? formatSigned(m, 0) : formatSigned(m, 1);
}

interface Props {
  orders: readonly StageOrder[];
  leaveOut: readonly number[];
  picked: number | null;
  onPick: (m: number) => void;
  x: Scale;
  width: number;
  view: AxisView;
  layout: StageLayout;
  touchPx: number;
}

export function isOut(order: StageOrder, leaveOut: readonly number[]): boolean {
  return !order.used || leaveOut.includes(order.m);
}

function heard(order: StageOrder, out: boolean): string {
  const pull = order.pullMm === null ? '' : `, pull ${formatSigned(order.pullMm, 3)} mm`;
  return `${order.kind === 'bright' ? 'Bright' : 'Dark'} order ${orderName(order.m)}, centre ${formatSigned(order.mm, 3)} mm${pull}${out ? ', left out' : ''}`;
}

/** Bright centres filled, dark ones hollow and half an order apart on a second row; each can be picked. */
export function OrderLadder({ orders, leaveOut, picked, onPick, x, width, view, layout, touchPx }: Props) {
  const group = useRef<SVGGElement>(null);
  const shown = orders.filter((order) => order.mm >= view.fromMm && order.mm <= view.toMm);
  const bright = shown.filter((order) => order.kind === 'bright');
  const pitch = bright.length > 1 ? Math.abs(x(bright[1].mm) - x(bright[0].mm)) : width;
  const skip = Math.max(1, Math.ceil(NUMBER_ROOM / pitch));
  const tabStop = shown.some((o) => o.m === picked) ? picked : (shown.find((o) => o.m === 0) ?? shown[0])?.m;

  const press = (m: number) => (event: KeyboardEvent<SVGGElement>) => {
    const step = event.key === 'ArrowRight' ? 1 : event.key === 'ArrowLeft' ? -1 : 0;
    if (step === 0 && event.key !== 'Enter' && event.key !== ' ') return;
    event.preventDefault();
    event.stopPropagation();
    const sorted = [...orders].sort((a, b) => a.m - b.m);
    const next = step === 0 ? m : (sorted[sorted.findIndex((o) => o.m === m) + step]?.m ?? m);
    if (step === 0 || next !== m) onPick(next);
    group.current?.querySelector<SVGGElement>(`[data-order="${next}"]`)?.focus();
  };

  return (
    <g>
      <path d={`M0 ${layout.ladder[1]}H${width}`} className="l-edge" />
      <Axis x={x} width={width} view={view} y={layout.ladder[1]} />
      <g ref={group} role="group" aria-label="Orders">
        {shown.map((order) => {
          const out = isOut(order, leaveOut);
          return (
            <g
              key={order.m}
              data-order={order.m}
              className="order-step"
              role="button"
              aria-pressed={order.m === picked}
              aria-label={heard(order, out)}
              tabIndex={order.m === tabStop ? 0 : -1}
              onClick={() => onPick(order.m)}
              onKeyDown={press(order.m)}
            >
              <OrderBar
                order={order}
                out={out}
                x={x(order.mm)}
                layout={layout}
                place={Math.min(touchPx, pitch)}
              />
              {order.kind === 'bright' && (order.m % skip === 0 || order.m === picked) ? (
                <text
                  x={x(order.mm)}
                  y={layout.brightY + BRIGHT_HEIGHT + 18}
                  textAnchor="middle"
                  className={
                    order.m === 0 ? 's16 t-ink t-600' : order.m === picked ? 's14 t-ink t-600' : 's14 t-2'
                  }
                >
                  {orderName(order.m)}
                </text>
              ) : null}
            </g>
          );
        })}
      </g>
    </g>
  );
}

interface BarProps {
  order: StageOrder;
  out: boolean;
  x: number;
  layout: StageLayout;
  place: number;
}

function OrderBar({ order, out, x, layout, place }: BarProps) {
  const dark = order.kind === 'dark';
  const y = dark ? layout.darkY : layout.brightY;
  const height = dark ? DARK_HEIGHT : BRIGHT_HEIGHT;
  const barWidth = Math.min(dark ? 9 : order.m === 0 ? 13 : 11, place * 0.6);
  const placeY = dark ? layout.darkY - 10 : layout.brightY - 4;
  return (
    <>
      <rect
        className="ring"
        x={x - place / 2}
        y={placeY}
        width={place}
        height={dark ? 40 : BRIGHT_HEIGHT + 24}
        fill="transparent"
      />
      <rect
        x={x - barWidth / 2}
        y={y}
        width={barWidth}
        height={height}
        fill={dark || out ? 'none' : 'var(--ink)'}
        stroke={out ? 'var(--ink)' : dark ? 'var(--ink-2)' : 'none'}
        strokeDasharray={out ? '3 3' : undefined}
        style={{ strokeWidth: 'calc(1.5px * var(--g))' }}
      />
      {out ? (
        <path
          d={`M${x - Math.min(15, place / 2)} ${y + height - (dark ? 2 : 6)}L${x + Math.min(15, place / 2)} ${y + (dark ? 2 : 6)}`}
          className="l-ink"
          style={{ strokeWidth: 'calc(2.25px * var(--g))' }}
        />
      ) : null}
    </>
  );
}

interface AxisProps {
  x: Scale;
  width: number;
  view: AxisView;
  y: number;
}

function Axis({ x, width, view, y }: AxisProps) {
  const step = niceStep(((view.toMm - view.fromMm) * 70) / width);
  const places = Math.max(0, -Math.floor(Math.log10(step)));
  return (
    <g aria-hidden="true">
      {ticks(view, step / 2).map((mm) => {
        const named = Math.abs(mm / step - Math.round(mm / step)) < 1e-6;
        const at = x(mm);
        return (
          <g key={mm}>
            <path d={`M${at} ${y}v${named ? 8 : 5}`} className="l-edge" />
            {named && at > 12 && at < width - 44 ? (
              <text x={at} y={y + 24} textAnchor="middle">
                {Math.abs(mm) < step / 4 ? formatNumber(0, 0) : formatSigned(mm, places)}
              </text>
            ) : null}
          </g>
        );
      })}
      <text x={width} y={y + 24} textAnchor="end">
        mm
      </text>
    </g>
  );
}
