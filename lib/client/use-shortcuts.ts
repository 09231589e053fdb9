'use client';

import { useEffect, useSyncExternalStore } from 'react';

const KEPT = 'single-keys';
const CHANGED = 'single-keys-changed';

function subscribe(onChange: () => void): () => void {
  window.addEventListener(CHANGED, onChange);
  return () => window.removeEventListener(CHANGED, onChange);
}

const isOn = () => localStorage.getItem(KEPT) !== 'off';

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
  const on = useSyncExternalStore(subscribe, isOn, () => true);
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
    localStorage.setItem(KEPT, next ? 'on' : 'off');
    window.dispatchEvent(new Event(CHANGED));
  };
  return { on, setOn };
}
