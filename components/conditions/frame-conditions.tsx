'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import type { z } from 'zod';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import type { frameConditionsSchema } from '@/lib/domain/conditions';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { ReadingView } from '@/lib/domain/views';
import { ConditionsForm } from './conditions-form';
import { STANDARD_AIR_TEXT, airText, temperatureText } from './conditions-text';

export type EnterFrameConditions = (
  input: z.input<typeof frameConditionsSchema>,
) => Promise<ActionAnswer<{ readingId: number }>>;

interface Props {
  frameId: number;
  reading: ReadingView;
  /** Null where this person, or this state, may not. */
  enter: EnterFrameConditions | null;
}

/** What the reading was made under, and a sheet to say something else of this frame. */
export function FrameConditions({ frameId, reading, enter }: Props) {
  const router = useRouter();
  const [open, setOpen] = useState(false);
  const { air, sourceTemperature } = reading.conditions;
  const nm = reading.result.wavelengthNm;
  return (
    <div className="sec">
      <div className="cap" style={{ marginBottom: 4 }}>
        <h2>Air and temperature</h2>
      </div>
      <p className="text-small text-ink-2">
        Air {air && nm !== null ? airText(air, nm) : STANDARD_AIR_TEXT}.
        {sourceTemperature ? ` Unit at ${temperatureText(sourceTemperature)}.` : ''}
      </p>
      {enter ? (
        <>
          <Button kind="quiet" className="text-small!" onClick={() => setOpen(true)}>
            Enter it for this frame…
          </Button>
          <Dialog open={open} onClose={() => setOpen(false)} title="Air and temperature of this frame" wide>
            <p className="mb-3 text-small text-ink-2">
              The frame is fitted again with them, in the region it has. The reading of before stays in the
              list.
            </p>
            <ConditionsForm
              start={null}
              word="Enter it and fit again"
              enter={async (entered) => {
                const answer = await enter({
                  frameId,
                  readingId: reading.id,
                  version: reading.version,
                  ...entered,
                });
                if (answer.ok)
                  router.replace(`/frames/${frameId}?reading=${answer.value.readingId}`, { scroll: false });
                return answer;
              }}
              onDone={() => {
                setOpen(false);
                router.refresh();
              }}
              onBack={() => setOpen(false)}
            />
          </Dialog>
        </>
      ) : null}
    </div>
  );
}
