import { Field } from '@/components/ui/field';

/** The calendar day (UTC) before the moment an access ends; '' for one without end. */
export function lastDayOf(accessUntil: string | null): string {
  return accessUntil ? new Date(Date.parse(accessUntil) - 1).toISOString().slice(0, 10) : '';
}

interface Props {
  value: string;
  onChange: (value: string) => void;
  error?: string;
}

/** Until when a person may sign in; an auditor's pass must have an end. */
export function LastDay({ value, onChange, error }: Props) {
  return (
    <div className="max-w-[270px]">
      <Field
        label="Last day, empty for no end"
        type="date"
        value={value}
        error={error}
        onChange={(event) => onChange(event.target.value)}
      />
    </div>
  );
}
