'use client';

import { useId, useState, type ReactNode } from 'react';
import { Button, type ButtonKind } from './button';

interface Props {
  /** Word on the button while closed. */
  word: string;
  kind?: ButtonKind;
  title: string;
  children: (close: () => void) => ReactNode;
}

/** A button that opens a form in place, under a rule; the button gives way to it. */
export function Disclosure({ word, kind = 'plain', title, children }: Props) {
  const [open, setOpen] = useState(false);
  const id = useId();
  if (!open) {
    return (
      <Button kind={kind} onClick={() => setOpen(true)} aria-expanded={false}>
        {word}
      </Button>
    );
  }
  return (
    <section className="opened" aria-labelledby={id}>
      <h2 id={id}>{title}</h2>
      {children(() => setOpen(false))}
    </section>
  );
}
