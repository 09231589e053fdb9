'use client';

import { useEffect, useState } from 'react';

const KEPT = 'single-keys';

function isTyping(target: EventTarget | null): boolean {
  return (
    target instanceof HTMLElement &&
    (target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName))
  );
}

/** Single-letter keys of a page. They can be switched off, and never act while someone types. */
export function useShortcuts(keys: Record<string, () => void>): {
  on: boolean;
  setOn: (on: boolean) => void;
} {
  const [on, setOnState] = useState(true);
  useEffect(() => {
    setOnState(localStorage.getItem(KEPT) !== 'off');
  }, []);
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target)) return;
      if (document.querySelector('dialog[open]')) return;
      if (!on && event.key !== '?') return;
      const act = keys[event.key];
      if (!act) return;
      event.preventDefault();
      act();
    };
    document.addEventListener('keydown', press);
    return () => document.removeEventListener('keydown', press);
  });
  const setOn = (next: boolean) => {
    setOnState(next);
    localStorage.setItem(KEPT, next ? 'on' : 'off');
  };
  return { on, setOn };
}
