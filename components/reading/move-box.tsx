'use client';

import { Mark } from '@/components/figures/marks';
import { Field } from '@/components/ui/field';
import { LIMITS } from '@/lib/domain/limits';
import { moveFrom, moveNeedsReason } from '@/lib/domain/move';
import type { ReadingView } from '@/lib/domain/views';
import { placesFor } from '@/lib/quantity/format';
import { moveText } from './move-text';

/** Must a reason for the moved value still be given? */
export function lacksMoveReason(reading: ReadingView, given: string): boolean {
  const move = moveFrom(reading.first, reading.wavelengthNm);
  return moveNeedsReason(move) && !reading.moveReason && !given.trim();
}

interface Props {
  reading: ReadingView;
  reason: string;
  /** Absent where nobody may give one now. */
  onReason?: (reason: string) => void;
}

/** How far the value was moved from the frame's first fit, and why. Nothing where it was hardly moved. */
export function MoveBox({ reading, reason, onReason }: Props) {
  const move = moveFrom(reading.first, reading.wavelengthNm);
  if (!move || !moveNeedsReason(move)) return null;
  const { moveReason } = reading;
  return (
    <div className="ask mb-3">
      <div className="finding">
        <Mark kind="check-look" />
        <p>
          <b>The value was moved {moveText(move, placesFor(reading.expandedNm ?? 0.5))}</b> from the first fit
          of this frame.{' '}
          {moveReason
            ? `${moveReason.by.name}: ${moveReason.words}`
            : 'More than 0.3 u: it is accepted with a reason only.'}
        </p>
      </div>
      {!moveReason && onReason ? (
        <Field
          label="Why the value was moved"
          labelHidden
          placeholder="Reason, in a few words"
          maxLength={LIMITS.wordsLength}
          value={reason}
          onChange={(event) => onReason(event.target.value)}
        />
      ) : null}
    </div>
  );
}
