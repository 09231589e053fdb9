'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { CautionWords } from './laser-cautions';

/** Where frames are taken: one sentence in sight, the cautions on a sheet of their own. */
export function LaserCautionsSheet() {
  const [open, setOpen] = useState(false);
  return (
    <div className="flex flex-wrap items-center gap-x-3 text-small text-ink-3">
      <span>Laser light: keep to the rules of your laser safety officer.</span>
      <button type="button" className="link min-h-[44px]" onClick={() => setOpen(true)}>
        Cautions
      </button>
      <Dialog open={open} onClose={() => setOpen(false)} title="Cautions for lasers">
        <div className="cautions text-note">
          <CautionWords />
        </div>
        <Button kind="main" onClick={() => setOpen(false)}>
          Back to the frames
        </Button>
      </Dialog>
    </div>
  );
}
