'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { WordPick } from '@/components/ui/choice';
import { NumberField } from '@/components/ui/number-field';
import { TILT_STEP_DEG } from '@/lib/client/region';
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
  const [big, setBig] = useState(false);
  const step = (chosen === 'angleDeg' ? TILT_STEP_DEG : 1) * (big ? 10 : 1);
  const move = (sign: 1 | -1) => onChange?.({ ...region, [chosen]: region[chosen] + sign * step });
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
          <WordPick chosen={!big} onChoose={() => setBig(false)}>
            {chosen === 'angleDeg' ? '0.02°' : '1 px'}
          </WordPick>
          <WordPick chosen={big} onChoose={() => setBig(true)}>
            {chosen === 'angleDeg' ? '0.2°' : '10 px'}
          </WordPick>
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
            places={field.places}
            value={region[field.key]}
            chosen={chosen === field.key}
            disabled={!onChange}
            onChoose={() => setChosen(field.key)}
            onChange={(value) => onChange?.({ ...region, [field.key]: value })}
          />
        ))}
        <div className="pair-keys">
          <Button aria-label={`Less ${name}`} disabled={!onChange} onClick={() => move(-1)}>
            −
          </Button>
          <Button aria-label={`More ${name}`} disabled={!onChange} onClick={() => move(1)}>
            +
          </Button>
        </div>
      </div>
    </>
  );
}
