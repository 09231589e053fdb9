'use client';

import Form from 'next/form';
import { Field, Select } from '@/components/ui/field';
import type { FramesQuery } from '@/lib/domain/views';
import { DAYS, DAYS_AT_REST } from './query';

/** Search and time; both end up in the address. */
export function FindForm({ query }: { query: FramesQuery }) {
  return (
    <Form action="/frames" className="flex flex-wrap gap-3" role="search">
      {query.state ? <input type="hidden" name="state" value={query.state} /> : null}
      {query.lotId ? <input type="hidden" name="lot" value={query.lotId} /> : null}
      {query.mine ? <input type="hidden" name="mine" value="1" /> : null}
      <div className="w-[190px] max-[1240px]:w-[150px]">
        <Field
          label="Serial, lot, file or fingerprint"
          labelHidden
          name="find"
          type="search"
          placeholder="Serial, lot, file…"
          defaultValue={query.find}
          key={query.find}
        />
      </div>
      <div className="w-[160px]">
        <Select
          label="Time"
          labelHidden
          name="days"
          key={query.days}
          defaultValue={query.days === 0 ? 'all' : String(query.days)}
          onChange={(event) => event.currentTarget.form?.requestSubmit()}
        >
          {[...new Set<number>([...DAYS, query.days, DAYS_AT_REST])].map((days) => (
            <option key={days} value={days === 0 ? 'all' : days}>
              {days === 0 ? 'All time' : `Last ${days} days`}
            </option>
          ))}
        </Select>
      </div>
    </Form>
  );
}
