'use client';

import { useId, useState, type ReactNode } from 'react';

interface Props {
  /** The word inside the field. */
  label: ReactNode;
  /** Heard name with its unit. */
  heard: string;
  unit: string;
  value: number;
  places: number;
  /** With more decimals than usual: where there is little room its unit gives way. */
  long?: boolean;
  chosen: boolean;
  disabled?: boolean;
  onChoose: () => void;
  onChange: (value: number) => void;
  /** Arrow up and down in the field, with the keys held beside them. */
  onStep?: (sign: 1 | -1, keys: { shiftKey: boolean; altKey: boolean }) => void;
}

/** A number with its word inside. What is typed counts once it is a number; Escape brings the last one back. */
export function NumberField({
  label,
  heard,
  unit,
  value,
  places,
  long = false,
  chosen,
  disabled,
  onChoose,
  onChange,
  onStep,
}: Props) {
  const shown = value.toFixed(places).replace('-', '−');
  // What is being typed, and the value it was typed over: a new value from elsewhere wins.
  const [typed, setTyped] = useState<{ text: string; over: number } | null>(null);
  const text = typed && typed.over === value ? typed.text : null;
  const setText = (next: string | null) => setTyped(next === null ? null : { text: next, over: value });
  const id = useId();
  const parsed = text === null ? value : Number(text.trim().replace('−', '-').replace(',', '.'));
  const wrong = text !== null && (text.trim() === '' || !Number.isFinite(parsed));
  const settle = () => {
    if (text !== null && !wrong) onChange(parsed);
    setText(null);
  };
  return (
    <label
      htmlFor={id}
      className={`num-field ${chosen ? 'chosen' : ''} ${wrong ? 'wrong' : ''} ${long ? 'long' : ''}`}
    >
      <small aria-hidden="true">{label}</small>
      <input
        id={id}
        aria-label={heard}
        aria-invalid={wrong || undefined}
        inputMode="decimal"
        autoComplete="off"
        disabled={disabled}
        data-settled={text === null ? '' : undefined}
        value={text ?? shown}
        onFocus={onChoose}
        onChange={(event) => setText(event.target.value)}
        onBlur={settle}
        onKeyDown={(event) => {
          if (event.key === 'Enter') settle();
          if (event.key === 'Escape') setText(null);
          if (text === null && onStep && (event.key === 'ArrowUp' || event.key === 'ArrowDown')) {
            event.preventDefault();
            onStep(event.key === 'ArrowUp' ? 1 : -1, event);
          }
        }}
      />
      <span className="unit" aria-hidden="true">
        {unit}
      </span>
    </label>
  );
}
