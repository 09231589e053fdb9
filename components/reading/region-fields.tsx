'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { WordPick } from '@/components/ui/choice';
import { NumberField } from '@/components/ui/number-field';
import { STEPS, stepSize, TILT_STEP_DEG, type StepSize } from '@/lib/client/region';
import { placesShown, stepText } from '@/lib/client/step-text';
import type { Region } from '@/lib/domain/reading-result';

type Key = keyof Region;

const FIELDS: readonly { key: Key; label: [string, string]; heard: string; unit: string; places: number }[] =
  [
    { key: 'cxPx', label: ['Centre ', 'x'], heard: 'Centre x, px', unit: 'px', places: 0 },
    { key: 'cyPx', label: ['Centre ', 'y'], heard: 'Centre y, px', unit: 'px', places: 0 },
    { key: 'lengthPx', label: ['', 'Length'], heard: 'Length across the fringes, px', unit: 'px', places: 0 },
    { key: 'heightPx', label: ['', 'Height'], heard: 'Height along the fringes, px', unit: 'px', places: 0 },
    { key: 'angleDeg', label: ['', 'Tilt'], heard: 'Tilt, degrees', unit: '°', places: 2 },
  ];

interface Props {
  region: Region;
  onChange?: (region: Region) => void;
  onKeys: () => void;
}

/** The region in numbers; one pair of buttons moves the chosen one. */
export function RegionFields({ region, onChange, onKeys }: Props) {
  const [chosen, setChosen] = useState<Key>('lengthPx');
  const [size, setSize] = useState<StepSize>(1);
  const unitStep = (key: Key) => (key === 'angleDeg' ? TILT_STEP_DEG : 1);
  const move = (key: Key, sign: 1 | -1, by: StepSize) =>
    onChange?.({ ...region, [key]: region[key] + sign * by * unitStep(key) });
  const name =
    FIELDS.find((field) => field.key === chosen)
      ?.label.join('')
      .toLowerCase() ?? '';
  return (
    <>
      <div className="region-head">
        <span className="pb-1.5">
          <b className="mr-2.5">Region</b>
          <button type="button" className="link min-h-[44px] px-1 text-small text-ink-2" onClick={onKeys}>
            Keys
          </button>
        </span>
        <div className="words" role="group" aria-label="One press moves">
          {STEPS.map((by) => (
            <WordPick key={by} chosen={size === by} onChoose={() => setSize(by)}>
              <span>
                {stepText(by * unitStep(chosen))}
                {by === 10 || chosen === 'angleDeg' ? (
                  <span className="max-[1240px]:hidden">{chosen === 'angleDeg' ? '°' : ' px'}</span>
                ) : null}
              </span>
            </WordPick>
          ))}
        </div>
      </div>
      <div className="roi">
        {FIELDS.map((field) => (
          <NumberField
            key={field.key}
            label={
              <>
                <i className="not-italic">{field.label[0]}</i>
                {field.label[1]}
              </>
            }
            heard={field.heard}
            unit={field.unit}
            places={placesShown(region[field.key], field.places)}
            long={placesShown(region[field.key], field.places) > field.places}
            value={region[field.key]}
            chosen={chosen === field.key}
            disabled={!onChange}
            onChoose={() => setChosen(field.key)}
            onChange={(value) => onChange?.({ ...region, [field.key]: value })}
            onStep={(sign, keys) => move(field.key, sign, stepSize(keys))}
          />
        ))}
        <div className="pair-keys">
          <Button aria-label={`Less ${name}`} disabled={!onChange} onClick={() => move(chosen, -1, size)}>
            −
          </Button>
          <Button aria-label={`More ${name}`} disabled={!onChange} onClick={() => move(chosen, 1, size)}>
            +
          </Button>
        </div>
      </div>
    </>
  );
}
