'use client';

import { ShortChoice } from '@/components/ui/choice';
import { Field } from '@/components/ui/field';

interface Props {
  /** '' : as soon as it is approved. */
  from: string;
  error?: string;
  onChange: (from: string) => void;
}

/** Tomorrow at the full hour, as a date-and-time field takes it in the zone of whoever looks. */
function tomorrow(): string {
  const at = new Date(Date.now() + 24 * 3_600_000);
  at.setMinutes(0, 0, 0);
  const local = new Date(at.getTime() - at.getTimezoneOffset() * 60_000);
  return local.toISOString().slice(0, 16);
}

/** From when the setup is to hold: at once with QA's approval, or from a moment to come. */
export function InForceFrom({ from, error, onChange }: Props) {
  return (
    <div className="pb-4" role="group" aria-labelledby="from-label">
      <span className="label" id="from-label">
        In force from
      </span>
      <div className="flex flex-wrap items-start gap-3">
        <ShortChoice chosen={from === ''} onChoose={() => onChange('')}>
          As soon as QA approves
        </ShortChoice>
        <ShortChoice chosen={from !== ''} onChoose={() => onChange(from || tomorrow())}>
          A later moment
        </ShortChoice>
        {from === '' ? null : (
          <Field
            label="Date and time"
            labelHidden
            type="datetime-local"
            value={from}
            error={error}
            onChange={(event) => onChange(event.target.value || tomorrow())}
          />
        )}
      </div>
    </div>
  );
}
