'use client';

import { useEffect, useId, useRef, type ReactNode } from 'react';

interface Props {
  open: boolean;
  onClose: () => void;
  title: ReactNode;
  /** For a table. */
  wide?: boolean;
  children: ReactNode;
}

/** A modal sheet. The browser keeps the focus inside, Escape closes it, focus goes back where it was. */
export function Dialog({ open, onClose, title, wide = false, children }: Props) {
  const ref = useRef<HTMLDialogElement>(null);
  const id = useId();
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog) return;
    if (open && !dialog.open) {
      dialog.showModal();
      // The first control may lie further down; the sheet still opens at its title.
      dialog.scrollTop = 0;
    }
    if (!open && dialog.open) dialog.close();
  }, [open]);
  return (
    <dialog ref={ref} className={wide ? 'dialog wide' : 'dialog'} aria-labelledby={id} onClose={onClose}>
      {open ? (
        <>
          <h2 id={id} className="mb-4 text-value">
            {title}
          </h2>
          {children}
        </>
      ) : null}
    </dialog>
  );
}
