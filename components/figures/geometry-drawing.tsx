'use client';

import { cssColour, lightLine, lightRgb, STRIP_EXPONENT } from '@/lib/client/light';
import { useLook } from '@/lib/client/look';
import { twoSlitLight } from '@/lib/client/two-slit-light';
import { useSize } from '@/lib/client/use-size';
import type { SetupView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';
import { orderPositionMm, spacingPx } from '@/lib/quantity/two-slit';
import { statedText } from './stated';

interface Props {
  setup: SetupView;
  /** Wavelength in air that draws it, nm. */
  nm: number;
  drawnFrom: 'reading' | 'example';
}

const SLICES = 236;

/** The bench drawn from its own values: unit, slit plate, screen with the fringes they give, camera. */
export function GeometryDrawing(props: Props) {
  const [measure, size] = useSize<HTMLDivElement>();
  return (
    <div className="bench-draw" ref={measure}>
      {size && size.width > 200 ? <Drawing {...props} width={size.width} height={size.height} /> : null}
    </div>
  );
}

/** Orders whose distance from the middle is within the screen's half height, mm. */
function ordersOnScreen(setup: SetupView, nm: number, halfMm: number): { m: number; mm: number }[] {
  const d = setup.separationUm.value;
  const list = [];
  for (let m = 0; m <= 40 && (m * nm) / 1000 < d * 0.99; m += 1) {
    const mm = orderPositionMm(m, nm, d, setup.distanceMm.value);
    if (mm > halfMm) break;
    list.push({ m, mm });
    if (m) list.push({ m: -m, mm: -mm });
  }
  return list;
}

function Drawing({ setup, nm, drawnFrom, width: W, height: H }: Props & { width: number; height: number }) {
  const { theme, goggles } = useLook();
  const small = W < 820;
  // On a phone the values stand in the list below; the drawing keeps its shapes only.
  const tiny = W < 640;
  const y = H / 2 - 8;
  const plateX = W * (small ? 0.24 : 0.2);
  const screenX = W * (small ? 0.76 : 0.8);
  const half = Math.min(146, H / 2 - 44);
  const spacingMm =
    (spacingPx(nm, setup.separationUm.value, setup.distanceMm.value, setup.scaleUmPerPx.value) *
      setup.scaleUmPerPx.value) /
    1000;
  const halfMm = 8.5 * spacingMm;
  const line = goggles ? 'var(--ink)' : lightLine(nm, theme, false);
  const rgb = lightRgb(nm, goggles);
  const bench = {
    wavelengthNm: nm,
    separationUm: setup.separationUm.value,
    widthUm: setup.widthUm.value,
    distanceMm: setup.distanceMm.value,
    visibility: 0.94,
  };
  const light = twoSlitLight(bench, 2 * halfMm, SLICES);
  const at = (mm: number) => y + (mm / halfMm) * half;
  const brightness = (mm: number) =>
    light[Math.min(SLICES - 1, Math.max(0, Math.floor(((mm + halfMm) / (2 * halfMm)) * SLICES)))];

  return (
    <svg
      className="fig absolute inset-0"
      width={W}
      height={H}
      role="img"
      aria-label={`The bench: unit, slit plate ${setup.plate}, screen ${formatNumber(setup.distanceMm.value, 1)} mm behind it, camera. Spacing ${formatNumber(spacingMm, 4)} mm at ${formatNumber(nm, 2)} nm in air.`}
    >
      <path d={`M0 ${y}H${W}`} className="l-edge" strokeDasharray="14 4 2 4" />
      <rect
        x="10"
        y={y - 24}
        width={small ? 72 : 104}
        height="48"
        fill="var(--ground)"
        className="l-ink"
        strokeWidth="2"
      />
      <text x={10 + (small ? 36 : 52)} y={y + 5} textAnchor="middle" className="t-ink t-500 s15">
        Unit
      </text>
      <rect
        x={small ? 83 : 115}
        y={y - 2.5}
        width={Math.max(4, plateX - (small ? 87 : 119))}
        height="5"
        fill={line}
      />
      {ordersOnScreen(setup, nm, halfMm).map(({ m, mm }) => (
        <path
          key={m}
          d={`M${plateX + 6} ${y - 3.5}L${screenX} ${at(mm)}M${plateX + 6} ${y + 3.5}L${screenX} ${at(mm)}`}
          stroke={line}
          strokeWidth="1"
          opacity={(0.1 + 0.62 * brightness(mm)).toFixed(2)}
        />
      ))}
      <path
        d={`M${plateX} ${y - 78}V${y - 10}M${plateX} ${y - 4}v8M${plateX} ${y + 10}V${y + 78}`}
        className="l-ink"
        strokeWidth="8"
      />
      {light.map((v, i) => (
        <rect
          key={i}
          x={screenX}
          y={y - half + (i * 2 * half) / SLICES}
          width="26"
          height={(2 * half) / SLICES + 0.6}
          fill={cssColour([
            rgb[0] * v ** STRIP_EXPONENT,
            rgb[1] * v ** STRIP_EXPONENT,
            rgb[2] * v ** STRIP_EXPONENT,
          ])}
        />
      ))}
      <rect x={screenX + 26} y={y - half - 6} width="6" height={2 * half + 12} fill="var(--ink)" />
      <text x={plateX} y={y - 92} textAnchor="middle" className="t-ink t-500 s15">
        Slit plate {setup.plate}
      </text>
      <text x={screenX + 16} y={y - half - 18} textAnchor="middle" className="t-ink t-500 s15">
        Screen
      </text>
      <Distance from={plateX} to={screenX} y={H - 24} text={statedText(setup.distanceMm, 'mm')} />
      <path d={`M${plateX} ${y + 84}V${H - 36}M${screenX} ${y + half + 8}V${H - 36}`} className="l-line" />
      {tiny ? null : <Slits x={plateX} y={y} setup={setup} />}
      {tiny ? null : (
        <Camera x={screenX} y={y} half={half} text={statedText(setup.scaleUmPerPx, 'µm/px')} named={!small} />
      )}
      <Spacing
        x={screenX}
        y={y}
        up={(spacingMm / halfMm) * half}
        mm={spacingMm}
        nm={nm}
        drawnFrom={drawnFrom}
        named={!tiny}
      />
    </svg>
  );
}

function Slits({ x, y, setup }: { x: number; y: number; setup: SetupView }) {
  const toX = x + 60;
  const toY = y - 118;
  return (
    <>
      <path d={`M${x + 6} ${y - 8}L${toX} ${toY + 34}`} className="l-edge" />
      <text x={toX + 4} y={toY + 4} className="t-2 s14">
        slit separation d <tspan className="t-ink t-500 s16">{statedText(setup.separationUm, 'µm')}</tspan>
      </text>
      <text x={toX + 4} y={toY + 26} className="t-2 s14">
        slit width w <tspan className="t-ink t-500 s16">{statedText(setup.widthUm, 'µm')}</tspan>
      </text>
    </>
  );
}

interface CameraProps {
  x: number;
  y: number;
  half: number;
  text: string;
  named: boolean;
}

function Camera({ x, y, half, text, named }: CameraProps) {
  return (
    <>
      <g transform={`translate(${x - 176} ${y - half - 4}) rotate(22)`}>
        <rect x="0" y="-15" width="46" height="30" fill="var(--ground)" className="l-ink" strokeWidth="2" />
        <rect x="46" y="-9" width="13" height="18" fill="var(--ground)" className="l-ink" strokeWidth="2" />
      </g>
      <path
        d={`M${x - 121} ${y - half + 22}L${x - 2} ${y - half}M${x - 121} ${y - half + 22}L${x - 2} ${y + half}`}
        className="l-edge"
        strokeDasharray="3 4"
        fill="none"
      />
      {named ? (
        <>
          <text x={x - 192} y={y - half - 4} textAnchor="end" className="t-2 s14">
            pixel scale s
          </text>
          <text x={x - 192} y={y - half + 17} textAnchor="end" className="t-ink t-500 s16">
            {text}
          </text>
        </>
      ) : null}
    </>
  );
}

interface SpacingProps {
  named: boolean;
  x: number;
  y: number;
  /** Spacing as drawn, px. */
  up: number;
  mm: number;
  nm: number;
  drawnFrom: 'reading' | 'example';
}

function Spacing({ x, y, up, mm, nm, drawnFrom, named }: SpacingProps) {
  return (
    <>
      <path
        d={`M${x + 40} ${y - up}h16M${x + 40} ${y}h16M${x + 50} ${y - up}V${y}`}
        className="l-ink"
        strokeWidth="1.5"
        fill="none"
      />
      {named ? (
        <>
          <text x={x + 66} y={y - 46} className="t-2 s14">
            spacing Λ
          </text>
          <text x={x + 66} y={y - 25} className="t-ink t-500 s16">
            {formatNumber(mm, 4)} mm
          </text>
          <text x={x + 66} y={y - 7} className="t-2 s14">
            at {formatNumber(nm, 2)} nm (air)
          </text>
          <text x={x + 66} y={y + 20} className="s14">
            {drawnFrom === 'reading' ? 'the last accepted' : 'an example'}
          </text>
        </>
      ) : null}
    </>
  );
}

function Distance({ from, to, y, text }: { from: number; to: number; y: number; text: string }) {
  const middle = (from + to) / 2;
  // Where the text does not fit into the line it stands over it.
  const gap = to - from > 300 ? 128 : 0;
  return (
    <>
      <path d={`M${from} ${y - 9}v18M${to} ${y - 9}v18`} className="l-ink" strokeWidth="1.5" />
      <path
        d={`M${from} ${y}H${middle - gap}M${middle + gap} ${y}H${to}`}
        className="l-ink"
        strokeWidth="1.25"
      />
      <path
        d={`M${from + 10} ${y - 4.5}L${from} ${y}l10 4.5M${to - 10} ${y - 4.5}L${to} ${y}l-10 4.5`}
        fill="none"
        className="l-ink"
        strokeWidth="1.5"
      />
      <text x={middle} y={gap ? y + 6 : y - 14} textAnchor="middle" className="t-2 s15">
        distance L
        <tspan dx="10" className="t-ink t-500 s18">
          {text}
        </tspan>
      </text>
    </>
  );
}
