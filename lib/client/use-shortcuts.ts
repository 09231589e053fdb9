'use client';

import { useEffect, useSyncExternalStore } from 'react';

const KEPT = 'single-keys';
const CHANGED = 'single-keys-changed';

function subscribe(onChange: () => void): () => void {
  window.addEventListener(CHANGED, onChange);
  return () => window.removeEventListener(CHANGED, onChange);
}

const isOn = () => localStorage.getItem(KEPT) !== 'off';

function isTyping(target: EventTarget | null, withControl: boolean): boolean {
  if (!(target instanceof HTMLElement)) return false;
  // A number that is not being typed has nothing of its own to undo.
  if (withControl && target.dataset.settled !== undefined) return false;
  return target.isContentEditable || /^(INPUT|TEXTAREA|SELECT)$/.test(target.tagName);
}

/** "x", "ctrl+z", "ctrl+shift+z", "alt+["; of a single key Shift is in the key itself. The command key counts as control. */
function nameOf(event: KeyboardEvent): string {
  if (event.ctrlKey || event.metaKey)
    return `ctrl+${event.shiftKey ? 'shift+' : ''}${event.key.toLowerCase()}`;
  return `${event.altKey ? 'alt+' : ''}${event.key}`;
}

/** Keys of a page. The single-letter ones can be switched off; none acts while someone types. */
export function useShortcuts(keys: Record<string, () => void>): {
  on: boolean;
  setOn: (on: boolean) => void;
} {
  const on = useSyncExternalStore(subscribe, isOn, () => true);
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      const name = nameOf(event);
      const act = keys[name];
      const single = name.length === 1;
      if (!act || isTyping(event.target, !single) || document.querySelector('dialog[open]')) return;
      if (single && !on && name !== '?') return;
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
