import type { ReactNode } from 'react';

interface ChoiceProps {
  chosen: boolean;
  onChoose: () => void;
  title: ReactNode;
  lines?: ReactNode[];
  mark?: ReactNode;
  disabled?: boolean;
}

/** A thing one can choose, with what one must know about it. */
export function Choice({ chosen, onChoose, title, lines = [], mark, disabled }: ChoiceProps) {
  return (
    <button type="button" className="choice" aria-pressed={chosen} onClick={onChoose} disabled={disabled}>
      <b>{title}</b>
      {lines.map((line, i) => (
        <small key={i}>{line}</small>
      ))}
      {mark}
    </button>
  );
}

interface ShortChoiceProps {
  chosen: boolean;
  onChoose: () => void;
  children: ReactNode;
}

/** A choice of one or two words: an answer, a reason. */
export function ShortChoice({ chosen, onChoose, children }: ShortChoiceProps) {
  return (
    <button type="button" className="choice short" aria-pressed={chosen} onClick={onChoose}>
      {children}
    </button>
  );
}

interface WordPickProps {
  chosen: boolean;
  onChoose: () => void;
  count?: ReactNode;
  children: ReactNode;
}

export function WordPick({ chosen, onChoose, count, children }: WordPickProps) {
  return (
    <button type="button" className="word-pick" aria-pressed={chosen} onClick={onChoose}>
      {children}
      {count === undefined ? null : <span className="count">{count}</span>}
    </button>
  );
}
