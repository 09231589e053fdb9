'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { WordPick } from '@/components/ui/choice';
import { NumberField } from '@/components/ui/number-field';
import { STEPS, stepSize, type StepSize } from '@/lib/client/region';
import { placesOf, pressMm } from '@/lib/client/scan-region';
import { placesShown, stepText } from '@/lib/client/step-text';
import type { ScanRegion } from '@/lib/domain/scan-result';

type Key = 'fromMm' | 'toMm' | 'detectorMm';

const NAMES: Record<Key, { label: string; heard: string }> = {
  fromMm: { label: 'From', heard: 'From, mm' },
  toMm: { label: 'To', heard: 'To, mm' },
  detectorMm: { label: 'Detector', heard: 'Width of the detector, mm; 0 is a point' },
};

interface Props {
  length: ScanRegion;
  region: ScanRegion;
  /** null: a point. */
  detectorMm: number | null;
  onChange?: (region: ScanRegion) => void;
  onDetector?: (detectorMm: number | null) => void;
  onKeys: () => void;
}

/** Region and detector of a scan in numbers; one pair of buttons moves the chosen one. */
export function ScanFields({ length, region, detectorMm, onChange, onDetector, onKeys }: Props) {
  const [chosen, setChosen] = useState<Key>('fromMm');
  const [size, setSize] = useState<StepSize>(1);
  const press = pressMm(length);
  const places = placesOf(length);
  const values: Record<Key, number> = { ...region, detectorMm: detectorMm ?? 0 };
  const set = (key: Key, value: number) => {
    if (key !== 'detectorMm') onChange?.({ ...region, [key]: value });
    else onDetector?.(value > 0 ? Number(Math.min(1000, value).toFixed(6)) : null);
  };
  const move = (key: Key, sign: 1 | -1, by: StepSize) => set(key, values[key] + sign * press * by);
  const name = NAMES[chosen].label.toLowerCase();
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
                {stepText(by * press)}
                {by === 10 ? <span className="max-[1240px]:hidden"> mm</span> : null}
              </span>
            </WordPick>
          ))}
        </div>
      </div>
      <div className="roi">
        {(['fromMm', 'toMm', 'detectorMm'] as const).map((key) => (
          <NumberField
            key={key}
            label={NAMES[key].label}
            heard={NAMES[key].heard}
            unit="mm"
            places={
              key === 'detectorMm'
                ? placesOfWidth(values.detectorMm)
                : placesShown(values[key], Math.min(3, places))
            }
            value={values[key]}
            chosen={chosen === key}
            disabled={key === 'detectorMm' ? !onDetector : !onChange}
            onChoose={() => setChosen(key)}
            onChange={(value) => set(key, value)}
            onStep={(sign, keys) => move(key, sign, stepSize(keys))}
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

/** As many places as the width was typed with, at least one. */
function placesOfWidth(mm: number): number {
  const decimals = String(mm).split('.')[1]?.length ?? 0;
  return Math.min(6, Math.max(1, decimals));
}
