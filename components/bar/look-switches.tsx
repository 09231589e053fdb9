'use client';

import { GogglesIcon, SheetIcon } from '@/components/ui/icons';
import { useLook } from '@/lib/client/look';

/** Goggles and theme, kept per person in this browser. */
export function LookSwitches({ icons = true }: { icons?: boolean }) {
  const { theme, goggles, setTheme, setGoggles } = useLook();
  const other = theme === 'dark' ? 'paper' : 'dark';
  return (
    <>
      <button
        type="button"
        className="switch"
        aria-pressed={goggles}
        aria-label="Goggles: light without colour, larger type, thicker strokes"
        onClick={() => setGoggles(!goggles)}
      >
        {icons ? <GogglesIcon /> : null}
        <span className={icons ? 'word' : undefined}>Goggles</span>
      </button>
      <button
        type="button"
        className="switch"
        aria-label={`Theme: change to ${other}`}
        onClick={() => setTheme(other)}
      >
        {icons ? <SheetIcon /> : null}
        <span className={icons ? 'word' : undefined}>{other === 'paper' ? 'Paper' : 'Dark'}</span>
      </button>
    </>
  );
}
