'use client';

import { useState } from 'react';
import { ShortChoice } from '@/components/ui/choice';
import { Field, Select } from '@/components/ui/field';
import { useLook } from '@/lib/client/look';
import type { SetupView } from '@/lib/domain/views';
import { formatInstant } from '@/lib/quantity/format';
import type { FromText } from './setup-text';

interface Props {
  from: FromText;
  /** Setups of the bench, newest first. */
  setups: SetupView[];
  error?: string;
  onChange: (from: FromText) => void;
}

/** Tomorrow at the full hour, as a date-and-time field takes it in the zone of whoever looks. */
function tomorrow(): string {
  const at = new Date(Date.now() + 24 * 3_600_000);
  at.setMinutes(0, 0, 0);
  const local = new Date(at.getTime() - at.getTimezoneOffset() * 60_000);
  return local.toISOString().slice(0, 16);
}

/** From when the setup is to hold: with QA's approval, from a moment to come, or from one that has passed. */
export function InForceFrom({ from, setups, error, onChange }: Props) {
  const { timeZone } = useLook();
  const [now] = useState(() => new Date().toISOString());
  const begun = setups.filter((setup) => setup.from <= now);
  return (
    <div className="pb-4" role="group" aria-labelledby="from-label">
      <span className="label" id="from-label">
        In force from
      </span>
      <div className="flex flex-wrap items-start gap-3">
        <ShortChoice
          chosen={from.kind === 'approval'}
          onChoose={() => onChange({ kind: 'approval', at: '' })}
        >
          As soon as QA approves
        </ShortChoice>
        <ShortChoice
          chosen={from.kind === 'later'}
          onChoose={() => onChange({ kind: 'later', at: tomorrow() })}
        >
          A later moment
        </ShortChoice>
        {begun.length ? (
          <ShortChoice
            chosen={from.kind === 'correction'}
            onChoose={() => onChange({ kind: 'correction', at: begun[0].from })}
          >
            The past: a correction
          </ShortChoice>
        ) : null}
        {from.kind === 'later' ? (
          <Field
            label="Date and time"
            labelHidden
            type="datetime-local"
            value={from.at}
            error={error}
            onChange={(event) => onChange({ kind: 'later', at: event.target.value || tomorrow() })}
          />
        ) : null}
        {from.kind === 'correction' ? (
          <Select
            label="Corrects the time of"
            labelHidden
            value={from.at}
            error={error}
            onChange={(event) => onChange({ kind: 'correction', at: event.target.value })}
          >
            {begun.map((setup) => (
              <option key={setup.id} value={setup.from}>
                setup {setup.number}, from {formatInstant(setup.from, timeZone)}
              </option>
            ))}
          </Select>
        ) : null}
      </div>
      {from.kind === 'correction' ? (
        <p className="help max-w-[80ch]">
          Its readings up to the next setup are measured again with these values. QA sees them old beside new
          before deciding; the readings themselves stay, and get successors.
        </p>
      ) : null}
    </div>
  );
}
