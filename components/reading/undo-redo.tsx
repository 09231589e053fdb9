import { Button } from '@/components/ui/button';
import type { RegionDesk } from '@/lib/client/use-region-change';

/** Steps back and forward through the changes of this reading; not shown before there is one. */
export function UndoRedo({ desk }: { desk: RegionDesk }) {
  const { undo, redo } = desk;
  if (!undo && !redo) return null;
  return (
    <div className="mt-2 grid grid-cols-2 gap-2" role="group" aria-label="Changes of the region">
      <Button disabled={!undo} onClick={undo ?? undefined} aria-keyshortcuts="Control+Z">
        Undo
      </Button>
      <Button disabled={!redo} onClick={redo ?? undefined} aria-keyshortcuts="Control+Shift+Z">
        Redo
      </Button>
    </div>
  );
}
