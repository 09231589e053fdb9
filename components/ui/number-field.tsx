'use client';

import { useEffect, useId, useState, type ReactNode } from 'react';

interface Props {
  /** The word inside the field. */
  label: ReactNode;
  /** Heard name with its unit. */
  heard: string;
  unit: string;
  value: number;
  places: number;
  chosen: boolean;
  disabled?: boolean;
  onChoose: () => void;
  onChange: (value: number) => void;
}

/** A number with its word inside. What is typed counts once it is a number; Escape brings the last one back. */
export function NumberField({
  label,
  heard,
  unit,
  value,
  places,
  chosen,
  disabled,
  onChoose,
  onChange,
}: Props) {
  const shown = value.toFixed(places).replace('-', '−');
  const [text, setText] = useState<string | null>(null);
  const id = useId();
  useEffect(() => setText(null), [value]);
  const parsed = text === null ? value : Number(text.trim().replace('−', '-').replace(',', '.'));
  const wrong = text !== null && (text.trim() === '' || !Number.isFinite(parsed));
  const settle = () => {
    if (text !== null && !wrong) onChange(parsed);
    setText(null);
  };
  return (
    <label htmlFor={id} className={`num-field ${chosen ? 'chosen' : ''} ${wrong ? 'wrong' : ''}`}>
      <small aria-hidden="true">{label}</small>
      <input
        id={id}
        aria-label={heard}
        aria-invalid={wrong || undefined}
        inputMode="decimal"
        autoComplete="off"
        disabled={disabled}
        value={text ?? shown}
        onFocus={onChoose}
        onChange={(event) => setText(event.target.value)}
        onBlur={settle}
        onKeyDown={(event) => {
          if (event.key === 'Enter') settle();
          if (event.key === 'Escape') setText(null);
        }}
      />
      <span className="unit" aria-hidden="true">
        {unit}
      </span>
    </label>
  );
}
