'use client';

import { Select } from '@/components/ui/field';
import { actionWords } from './action-words';

/** Which kind of change; choosing one sends the form. */
export function ActionSelect({ actions, action }: { actions: string[]; action: string }) {
  return (
    <div className="w-[220px]">
      <Select
        label="What"
        labelHidden
        name="action"
        key={action}
        defaultValue={action}
        onChange={(event) => event.currentTarget.form?.requestSubmit()}
      >
        <option value="">Every change</option>
        {actions.map((name) => (
          <option key={name} value={name}>
            {actionWords(name)}
          </option>
        ))}
      </Select>
    </div>
  );
}
