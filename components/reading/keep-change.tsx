'use client';

import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import { callAction } from '@/lib/client/call-action';
import { digitsOf } from '@/lib/client/use-preview-fit';
import type { RegionDesk } from '@/lib/client/use-region-change';
import type { ErrorCode } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import { moveFrom, moveNeedsReason } from '@/lib/domain/move';
import type { ReadingView } from '@/lib/domain/views';
import { placesFor } from '@/lib/quantity/format';
import type { KeepFit } from './actions';
import { moveText } from './move-text';

export interface Refusal {
  code: ErrorCode;
  message: string;
}

interface Props {
  frameId: number;
  reading: ReadingView | null;
  desk: RegionDesk;
  keepFit: KeepFit;
  /** Address of the new reading. */
  hrefOf: (readingId: number) => string;
  onRefused: (refusal: Refusal | null) => void;
  /** The reading can still be changed by this person. */
  mayKeep: boolean;
  /** Solid where keeping is what the screen is for. */
  main?: boolean;
}

/** The column of a tablet is narrow: smaller words there, on two lines where they must be. */
const SMALL_ON_TABLET = 'px-2! max-[1240px]:px-0.5! max-[1240px]:text-small! max-[1240px]:whitespace-normal!';

/** Keeps the change as a new reading, or drops it. What is typed stays if the service refuses. */
export function KeepChange({
  frameId,
  reading,
  desk,
  keepFit,
  hrefOf,
  onRefused,
  mayKeep,
  main = false,
}: Props) {
  const router = useRouter();
  const [waiting, start] = useTransition();
  const [kept, setKept] = useState<{ differs: string | null; readingId: number } | null>(null);
  const { preview } = desk;
  const [reason, setReason] = useState(reading?.moveReason?.words ?? '');
  const move = moveFrom(reading?.first ?? null, preview.fit?.wavelengthNm ?? null);
  const asks = moveNeedsReason(move);
  const show = (readingId: number) => router.replace(hrefOf(readingId), { scroll: false });
  const keep = () =>
    start(async () => {
      if (!desk.change) return;
      const trials = desk.trials.take();
      const answer = await callAction(() =>
        keepFit({
          ...desk.change!,
          stackSha256: preview.stackSha256,
          seen: preview.fit && digitsOf(preview.fit),
          frameId,
          fromReadingId: reading?.id ?? null,
          fromVersion: reading?.version ?? 0,
          trials,
          moveReason: asks ? reason : '',
        }),
      );
      if (!answer.ok) {
        desk.trials.putBack(trials);
        onRefused({ code: answer.code, message: answer.message });
        return;
      }
      onRefused(null);
      setKept(answer.value);
      // What differs from the numbers on this page is to be read before they are gone.
      if (answer.value.differs === null) show(answer.value.readingId);
    });
  const ready = mayKeep && preview.fit !== null && !preview.working;
  if (kept && kept.differs !== null) {
    return (
      <div className="ask mb-3" role="alert">
        <p className="mb-2 text-small">
          <b>Kept, with other digits than shown.</b> <span className="text-ink-2">{kept.differs}</span>
        </p>
        <Button onClick={() => show(kept.readingId)}>Show the kept reading</Button>
      </div>
    );
  }
  return (
    <div className="mb-3 grid grid-cols-2 gap-2">
      {asks && move ? (
        <div className="col-span-2">
          <Field
            label={`Why the value moves ${moveText(move, placesFor(preview.fit?.expandedNm ?? 0.5))}`}
            help="From the first fit. It can be kept without, not accepted."
            maxLength={LIMITS.wordsLength}
            value={reason}
            onChange={(event) => setReason(event.target.value)}
          />
        </div>
      ) : null}
      <Button
        kind={main ? 'main' : 'plain'}
        busy={waiting || kept !== null}
        disabled={!ready}
        onClick={keep}
        className={SMALL_ON_TABLET}
      >
        Keep this region
      </Button>
      <Button onClick={desk.drop} disabled={waiting} className={SMALL_ON_TABLET}>
        Drop the change
      </Button>
    </div>
  );
}
