'use client';

import Form from 'next/form';
import { Select } from '@/components/ui/field';
import type { OverTimeView } from '@/lib/domain/views';

const LASTS = [20, 60, 200] as const;

/** What the chart is about and how many runs it shows; both stand in the address. */
export function PickForm({ view, last }: { view: OverTimeView; last: number }) {
  const send = (event: React.ChangeEvent<HTMLSelectElement>) => event.currentTarget.form?.requestSubmit();
  return (
    <Form action="/over-time" className="acts">
      <Select
        label="Source or lot"
        labelHidden
        name="choice"
        key={view.chosen}
        defaultValue={view.chosen}
        onChange={send}
      >
        {view.choices.map((choice) => (
          <option key={choice.value} value={choice.value}>
            {choice.label}, {choice.points} {choice.points === 1 ? 'run' : 'runs'}
          </option>
        ))}
      </Select>
      <Select
        label="Runs"
        labelHidden
        name="last"
        key={last}
        defaultValue={last === 0 ? 'all' : String(last)}
        onChange={send}
      >
        {[...new Set<number>([...LASTS, ...(last ? [last] : [])])].map((n) => (
          <option key={n} value={n}>
            Last {n} runs
          </option>
        ))}
        <option value="all">All runs</option>
      </Select>
    </Form>
  );
}
