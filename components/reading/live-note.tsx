import type { PreviewState } from '@/lib/client/use-preview-fit';

interface Words {
  long: string;
  /** For a stage as narrow as a phone. */
  short: string;
}

function wordsFor({ home, because }: PreviewState): Words | null {
  switch (home) {
    case 'loading':
      return { long: 'Getting the bands of this region…', short: 'Getting bands…' };
    case 'browser':
      return { long: 'Live; the server confirms on keeping', short: 'Live numbers' };
    case 'making':
      return { long: 'Making new bands for this region…', short: 'New bands…' };
    case 'server':
      return { long: because ?? 'The server fits', short: 'The server fits' };
    case null:
      return null;
  }
}

/** Where the numbers on the stage come from while a person changes the region, in a few words. */
export function LiveNote({ preview }: { preview: PreviewState }) {
  const words = wordsFor(preview);
  if (words === null) return null;
  return (
    <p role="status">
      <span className="long-words">{words.long}</span>
      <span className="short-words" aria-hidden="true">
        {words.short}
      </span>
    </p>
  );
}
