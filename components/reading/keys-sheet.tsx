'use client';

import { Dialog } from '@/components/ui/dialog';
import { Tick } from '@/components/ui/field';

interface Props {
  open: boolean;
  onClose: () => void;
  on: boolean;
  setOn: (on: boolean) => void;
  /** Jaws of a scan in place of a calliper. */
  scan: boolean;
}

type Keys = readonly [string[], string][];

const CALLIPER: Keys = [
  [['←', '→', '↑', '↓'], 'on a part of the calliper: 1 px; on the orders: the next order'],
  [['Shift', '←'], 'on a part of the calliper: 10 px'],
  [['Alt', '←'], 'on a part of the calliper: 0.1 px'],
  [['↑', '↓'], 'in a field of the region: 1 px, 0.02°; Shift and Alt as above'],
  [['[', ']'], 'tilt 0.02° less or more; with Shift 0.2°, with Alt 0.002°'],
];
const JAWS: Keys = [
  [['←', '→'], 'on a jaw: one step; on the orders: the next order'],
  [['Shift', '←'], 'on a jaw: ten steps'],
  [['Alt', '←'], 'on a jaw: a tenth of a step'],
];
const EVERYWHERE: Keys = [
  [['x'], 'leave the picked order out, or take it back'],
  [['Ctrl', 'Z'], 'undo the last change of the region'],
  [['Ctrl', 'Shift', 'Z'], 'do it again'],
  [['n'], 'next in the queue'],
  [['p'], 'previous in the queue'],
  [['?'], 'this sheet'],
];

/** The keys of a reading; the single ones can be switched off. */
export function KeysSheet({ open, onClose, on, setOn, scan }: Props) {
  return (
    <Dialog open={open} onClose={onClose} title="Keys">
      <dl className="grid grid-cols-[auto_1fr] items-baseline gap-x-5 gap-y-2">
        {[...(scan ? JAWS : CALLIPER), ...EVERYWHERE].map(([keys, what]) => (
          <div key={what} className="contents">
            <dt className="flex gap-1">
              {keys.map((key) => (
                <kbd key={key}>{key}</kbd>
              ))}
            </dt>
            <dd className="text-ink-2">{what}</dd>
          </div>
        ))}
      </dl>
      <p className="mt-4 text-small text-ink-2">Each of these also has a button or a field.</p>
      <Tick
        label="Single-letter keys are on"
        checked={on}
        onChange={(event) => setOn(event.target.checked)}
      />
      <form method="dialog" className="mt-2">
        <button className="button main">Close</button>
      </form>
    </Dialog>
  );
}
