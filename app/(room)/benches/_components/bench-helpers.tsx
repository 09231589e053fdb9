'use client';

import { useState } from 'react';
import { SaidCheck } from '@/components/figures/marks';
import { Field } from '@/components/ui/field';
import { parseNumber } from '@/lib/client/use-submit';
import type { FindingWord } from '@/lib/domain/reading-result';
import type { SetupView } from '@/lib/domain/views';
import {
  exposureFor,
  FAR_FIELD_LOOK,
  FAR_FIELD_STOP,
  farFieldErrorNm,
  farFieldNumber,
  viewOf,
  widestSourceSlit,
} from '@/lib/quantity/bench-helpers';
import { formatNumber } from '@/lib/quantity/format';

interface Props {
  setup: SetupView;
  /** Wavelength in air the drawing uses, nm. */
  nm: number;
  /** Of the newest picture of this bench; null without one. */
  pictureWidthPx: number | null;
}

/** A sensor as many cameras have, where no picture says otherwise. */
const USUAL_WIDTH_PX = 2448;

/** Fewer pixels a fringe are worth a look, spoil the slit width, or give no answer at all. */
const PX_LOOK = 40;
const PX_STOP = 10;

const KEYS = ['wavelength', 'separation', 'width', 'distance', 'scale', 'picture'] as const;
const LABELS: Record<(typeof KEYS)[number], string> = {
  wavelength: 'Wavelength λ, nm (air)',
  separation: 'Slit separation d, µm',
  width: 'Slit width w, µm',
  distance: 'Distance L, mm',
  scale: 'Pixel scale s, µm/px',
  picture: 'Picture across the fringes, px',
};

/** Planning: what the camera will see, how to expose, how wide a source slit may be. Nothing here changes the setup. */
export function BenchHelpers({ setup, nm, pictureWidthPx }: Props) {
  const [text, setText] = useState(() => ({
    wavelength: String(Math.round(10 * nm) / 10),
    separation: String(setup.separationUm.value),
    width: String(setup.widthUm.value),
    distance: String(setup.distanceMm.value),
    scale: String(setup.scaleUmPerPx.value),
    picture: String(pictureWidthPx ?? USUAL_WIDTH_PX),
    exposure: '',
    peak: '',
    sourceDistance: '200',
    visibility: '0.9',
  }));
  const field = (key: keyof typeof text, label: string) => (
    <Field
      key={key}
      label={label}
      inputMode="decimal"
      value={text[key]}
      onChange={(event) => setText({ ...text, [key]: event.target.value })}
    />
  );
  const value = (key: keyof typeof text) => parseNumber(text[key]);
  return (
    <details className="helpers">
      <summary className="link inline-flex min-h-[44px] items-center">Plan a setup</summary>
      <p className="text-small text-ink-2">
        Starts from setup {setup.number}. Change a value to see what the camera would make of it; the setup
        itself stays as it is.
      </p>
      <div className="helper-cols">
        <section aria-labelledby="helper-view">
          <h3 id="helper-view">What the camera sees</h3>
          <div className="helper-fields">{KEYS.map((key) => field(key, LABELS[key]))}</div>
          <CameraView
            plan={{
              wavelengthNm: value('wavelength'),
              separationUm: value('separation'),
              widthUm: value('width'),
              distanceMm: value('distance'),
              scaleUmPerPx: value('scale'),
              pictureWidthPx: value('picture'),
            }}
          />
        </section>
        <section aria-labelledby="helper-exposure">
          <h3 id="helper-exposure">Exposure</h3>
          <div className="helper-fields">
            {field('exposure', 'Exposure of a frame, ms')}
            {field('peak', 'Its peak, % of full scale')}
          </div>
          <Exposure exposureMs={value('exposure')} peak={value('peak') / 100} />
        </section>
        <section aria-labelledby="helper-slit">
          <h3 id="helper-slit">Slit before a lamp</h3>
          <div className="helper-fields">
            {field('sourceDistance', 'From that slit to the plate, mm')}
            {field('visibility', 'Visibility V wanted')}
          </div>
          <SourceSlit
            slitMm={widestSourceSlit(
              value('visibility'),
              value('sourceDistance'),
              value('separation'),
              value('wavelength'),
            )}
          />
        </section>
      </div>
    </details>
  );
}

type Plan = Parameters<typeof viewOf>[0];

function CameraView({ plan }: { plan: Plan }) {
  const view = viewOf(plan);
  if (!view)
    return (
      <p className="help" role="status">
        Each value is above 0, and the slits are narrower than they are apart.
      </p>
    );
  const near = farFieldNumber(plan.widthUm, plan.wavelengthNm, plan.distanceMm);
  const nearWord: FindingWord = near > FAR_FIELD_STOP ? 'stop' : near > FAR_FIELD_LOOK ? 'look' : 'clear';
  const pxWord: FindingWord =
    view.pxPerFringe < PX_STOP ? 'stop' : view.pxPerFringe < PX_LOOK ? 'look' : 'clear';
  const errorNm = farFieldErrorNm(plan.widthUm, plan.wavelengthNm, plan.distanceMm);
  return (
    <div role="status">
      <ul className="helper-says">
        <li>
          <SaidCheck word={pxWord}>{formatNumber(view.pxPerFringe, 1)} px a fringe</SaidCheck>
          <span>
            {pxWord === 'clear'
              ? 'Fine enough.'
              : 'Move the camera back from the lens, or take a finer scale.'}
          </span>
        </li>
        <li>
          <SaidCheck word={view.fringesInLobe < 7 ? 'look' : 'clear'}>
            {formatNumber(view.fringes, 0)} bright fringes
          </SaidCheck>
          <span>
            {formatNumber(view.fringesInLobe, 0)} of them in the central lobe; a report wants at least 7.
          </span>
        </li>
        <li>
          <SaidCheck word={nearWord}>w²/(λL) = {formatNumber(near, 4)}</SaidCheck>
          <span>
            The far-field formula adds {errorNm < 0.0005 ? 'less than 0.001' : formatNumber(errorNm, 3)} nm.{' '}
            {nearWord === 'clear' ? '' : 'The plate is near for slits this wide: make L longer.'}
          </span>
        </li>
      </ul>
    </div>
  );
}

function Exposure({ exposureMs, peak }: { exposureMs: number; peak: number }) {
  if (Number.isNaN(exposureMs) || Number.isNaN(peak))
    return <p className="help">With a frame’s exposure and peak, the exposure for 50 to 85 % follows.</p>;
  const range = exposureFor(exposureMs, peak);
  return (
    <p className="helper-answer" role="status">
      {range
        ? `${formatNumber(range.from, 2)} to ${formatNumber(range.to, 2)} ms, at the same gain.`
        : 'A peak at 100 % is clipped. Halve the exposure and take the frame again.'}
    </p>
  );
}

function SourceSlit({ slitMm }: { slitMm: number | null }) {
  return (
    <p className="helper-answer" role="status">
      {slitMm === null
        ? 'A visibility lies between 0 and 1, a distance is above 0.'
        : `At most ${formatNumber(slitMm, 3)} mm wide.`}
    </p>
  );
}
