'use client';

import { useEffect, useRef, useState } from 'react';
import { Mark } from '@/components/figures/marks';
import { Button } from '@/components/ui/button';
import { Disclosure } from '@/components/ui/disclosure';
import { Field, Select } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { measureScalePhoto } from '@/lib/client/measure-scale-photo';
import { parseNumber } from '@/lib/client/use-submit';
import { count } from '@/lib/client/words';
import {
  SCALE_KINDS,
  SCALE_WORDS,
  type ScaleAnswer,
  type ScaleKind,
  type ScaleReading,
} from '@/lib/domain/scale-result';
import { formatNumber, formatPercent, formatQuantity } from '@/lib/quantity/format';

interface Props {
  onUse: (reading: ScaleReading) => void;
}

/** The pixel scale from a picture of a ruler, a grid or a chessboard of known pitch. */
export function ScalePhoto({ onUse }: Props) {
  return (
    <Disclosure word="Pixel scale from a photographed scale…" title="Pixel scale from a photographed scale">
      {(close) => (
        <PhotoForm
          onUse={(reading) => {
            onUse(reading);
            close();
          }}
          onBack={close}
        />
      )}
    </Disclosure>
  );
}

function PhotoForm({ onUse, onBack }: Props & { onBack: () => void }) {
  const [kind, setKind] = useState<ScaleKind>('lines');
  const [pitch, setPitch] = useState('1');
  const [percent, setPercent] = useState('0.02');
  const [waiting, setWaiting] = useState(false);
  const [problem, setProblem] = useState('');
  const [reading, setReading] = useState<ScaleReading | null>(null);
  const [picture, setPicture] = useState<string | null>(null);
  const input = useRef<HTMLInputElement>(null);
  useEffect(() => () => (picture ? URL.revokeObjectURL(picture) : undefined), [picture]);

  const measure = async (file: File) => {
    setWaiting(true);
    setProblem('');
    setReading(null);
    const answer = await measureScalePhoto(file, kind, parseNumber(pitch), parseNumber(percent));
    setWaiting(false);
    if (!answer.ok) {
      setProblem(answer.message);
      return;
    }
    setReading(answer.reading);
    setPicture(file.type === 'image/tiff' ? null : URL.createObjectURL(file));
  };
  return (
    <div className="grid gap-4">
      <p className="text-small text-ink-2">
        Lay the scale where the fringes fall, in the same plane, and photograph it with the bench’s camera as
        it stands.
      </p>
      <div className="form-grid">
        <Select
          label="In the picture"
          value={kind}
          onChange={(event) => setKind(event.target.value as ScaleKind)}
        >
          {SCALE_KINDS.map((word) => (
            <option key={word} value={word}>
              {SCALE_WORDS[word]}
            </option>
          ))}
        </Select>
        <Field
          label={kind === 'lines' ? 'Line to line, mm' : 'Side of a field, mm'}
          inputMode="decimal"
          value={pitch}
          onChange={(event) => setPitch(event.target.value)}
        />
        <Field
          label="± of that, per cent at k = 2"
          inputMode="decimal"
          value={percent}
          onChange={(event) => setPercent(event.target.value)}
        />
      </div>
      <div className="flex flex-wrap gap-3">
        <Button busy={waiting} onClick={() => input.current?.click()}>
          {reading ? 'Photograph again' : 'Choose the picture'}
        </Button>
        <Button kind="quiet" onClick={onBack}>
          Back
        </Button>
        <input
          ref={input}
          type="file"
          hidden
          aria-label="Picture of the scale"
          accept="image/png,image/jpeg,image/tiff,image/webp,.tif,.tiff"
          onChange={(event) => {
            const file = event.target.files?.[0];
            event.target.value = '';
            if (file) void measure(file);
          }}
        />
      </div>
      {problem ? (
        <Notice stop live mark={<Mark kind="check-stop" />} title="No scale was measured">
          {problem}
        </Notice>
      ) : null}
      {reading ? <Found reading={reading} picture={picture} onUse={() => onUse(reading)} /> : null}
    </div>
  );
}

function Found({
  reading,
  picture,
  onUse,
}: {
  reading: ScaleReading;
  picture: string | null;
  onUse: () => void;
}) {
  const { scale } = reading;
  const text = formatQuantity(scale.scaleUmPerPx, 2 * scale.uScaleUmPerPx);
  return (
    <div className="grid gap-3" aria-live="polite">
      {picture ? <Marked scale={scale} picture={picture} /> : null}
      <p className="qty head">
        <b>{text.value}</b>
        <span className="pm">±</span>
        <span className="u">{text.uncertainty}</span>
        <span className="unit">µm/px</span>
      </p>
      <ul className="grid gap-1 text-small text-ink-2">
        {sentencesOf(scale).map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
      <div>
        <Button kind="main" onClick={onUse}>
          Use this value
        </Button>
      </div>
    </div>
  );
}

/** What was found and what it means, in words. */
function sentencesOf(scale: ScaleAnswer): string[] {
  const what =
    scale.kind === 'lines' ? count(scale.points.length, 'line') : count(scale.points.length, 'corner');
  const lines = [
    `${what} found, ${formatNumber(scale.pitchMm, 2)} mm apart; largest misfit ${formatNumber(scale.largestMisfitPx, 2)} px.`,
    `The scale runs at ${formatNumber(scale.angleDeg, 2)}° to the picture.`,
  ];
  if (scale.changeAcross !== null && Math.abs(scale.changeAcross) > 1e-3) {
    lines.push(
      `The pitch changes by ${formatPercent(Math.abs(scale.changeAcross))} across the ${scale.kind === 'lines' ? 'scale' : 'picture'}: the camera looks at it from the side. The value holds for the middle.`,
    );
  }
  if (scale.distortion !== null) {
    lines.push(
      `The lens bends the picture by ${formatPercent(Math.abs(scale.distortion))} at half its width.`,
    );
  }
  return lines;
}

/** The picture with every line or corner marked where it was found; a larger ring is a larger misfit. */
function Marked({ scale, picture }: { scale: ScaleAnswer; picture: string }) {
  const { widthPx, heightPx } = scale;
  const unit = widthPx / 160;
  return (
    <svg
      viewBox={`0 0 ${widthPx} ${heightPx}`}
      className="w-full max-w-[520px] bg-dark-room"
      role="img"
      aria-label={`The photographed scale with ${scale.points.length} places marked`}
    >
      <image href={picture} width={widthPx} height={heightPx} preserveAspectRatio="none" />
      {scale.points.map((point, index) => (
        <circle
          key={index}
          cx={point.xPx}
          cy={point.yPx}
          r={unit * (0.6 + Math.min(3, 4 * point.misfitPx ** 2))}
          fill="none"
          stroke="#f4f0e7"
          strokeWidth={unit / 2.5}
        />
      ))}
    </svg>
  );
}
