'use client';

import { useEffect, useId, useRef, useState, type ReactNode } from 'react';

interface Props {
  /** Heard name of the button. */
  label: string;
  face: ReactNode;
  /** Class of the sheet that opens; the default hangs under the button's right edge. */
  sheetClass?: string;
  /** When false the sheet is placed by an ancestor (a full-width panel under the bar). */
  anchored?: boolean;
  buttonClass?: string;
  children: (close: () => void) => ReactNode;
}

/** A button that opens a sheet of links and choices. Escape and a press outside close it. */
export function Menu({
  label,
  face,
  sheetClass = 'menu-sheet',
  anchored = true,
  buttonClass = 'pick',
  children,
}: Props) {
  const [open, setOpen] = useState(false);
  const root = useRef<HTMLDivElement>(null);
  const button = useRef<HTMLButtonElement>(null);
  const id = useId();

  useEffect(() => {
    if (!open) return;
    const outside = (event: PointerEvent) => {
      if (event.target instanceof Node && !root.current?.contains(event.target)) setOpen(false);
    };
    const escape = (event: KeyboardEvent) => {
      if (event.key !== 'Escape') return;
      setOpen(false);
      button.current?.focus();
    };
    document.addEventListener('pointerdown', outside);
    document.addEventListener('keydown', escape);
    return () => {
      document.removeEventListener('pointerdown', outside);
      document.removeEventListener('keydown', escape);
    };
  }, [open]);

  return (
    <div ref={root} className={anchored ? 'menu' : undefined}>
      <button
        ref={button}
        type="button"
        className={buttonClass}
        aria-label={label}
        aria-expanded={open}
        aria-controls={open ? id : undefined}
        onClick={() => setOpen(!open)}
      >
        {face}
      </button>
      {open ? (
        <div id={id} className={sheetClass}>
          {children(() => setOpen(false))}
        </div>
      ) : null}
    </div>
  );
}
