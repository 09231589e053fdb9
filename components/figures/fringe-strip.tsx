'use client';

import { useEffect, useRef } from 'react';
import { encode, lightRgb, STRIP_EXPONENT, type Rgb } from '@/lib/client/light';
import { useLook } from '@/lib/client/look';
import type { PlacedStrip } from '@/lib/domain/placed-strip';

/** One pixel per sample, one high: the browser stretches it, so no size has to be measured. */
function paint(canvas: HTMLCanvasElement, light: readonly number[], colour: Rgb) {
  const context = canvas.getContext('2d');
  if (!context || light.length === 0) return;
  canvas.width = light.length;
  canvas.height = 1;
  const image = context.createImageData(light.length, 1);
  light.forEach((sample, i) => {
    const v = Math.pow(Math.max(0, Math.min(1, sample)), STRIP_EXPONENT);
    image.data[4 * i] = 255 * encode(colour[0] * v);
    image.data[4 * i + 1] = 255 * encode(colour[1] * v);
    image.data[4 * i + 2] = 255 * encode(colour[2] * v);
    image.data[4 * i + 3] = 255;
  });
  context.putImageData(image, 0, 0);
}

interface LightProps {
  light: readonly number[];
  /** Measured wavelength, nm; null draws bone. */
  nm: number | null;
  label: string;
  style?: React.CSSProperties;
}

/** Samples of linear light as a picture that fills its place. */
export function LightBand({ light, nm, label, style }: LightProps) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const { goggles } = useLook();
  useEffect(() => {
    if (canvas.current) paint(canvas.current, light, lightRgb(nm, goggles));
  }, [light, nm, goggles]);
  return <canvas ref={canvas} role="img" aria-label={label} style={style} />;
}

interface Props {
  strip: PlacedStrip;
  spanMm: number;
  nm: number | null;
  label: string;
}

/** A strip on a list's scale, its zero order on the middle. */
export function FringeStrip({ strip, spanMm, nm, label }: Props) {
  const { fromMm, toMm, light } = strip;
  const left = 50 + (100 * fromMm) / spanMm;
  const width = (100 * (toMm - fromMm)) / spanMm;
  return (
    <div className="strip-bed">
      <LightBand light={light} nm={nm} label={label} style={{ left: `${left}%`, width: `${width}%` }} />
    </div>
  );
}
