'use client';

import { useRouter } from 'next/navigation';
import type { z } from 'zod';
import { When } from '@/components/figures/when';
import { Disclosure } from '@/components/ui/disclosure';
import type { ConditionsView, benchConditionsSchema } from '@/lib/domain/conditions';
import type { ActionAnswer } from '@/lib/domain/errors';
import { ConditionsForm } from './conditions-form';
import { HOLDS, STANDARD_AIR_TEXT, enteredText } from './conditions-text';

interface Props {
  benchId: number;
  /** What holds now; null when nothing was entered within a day. */
  now: ConditionsView | null;
  /** Wavelength the index is shown for, nm. */
  atNm: number;
  mayEnter: boolean;
  enter: (input: z.input<typeof benchConditionsSchema>) => Promise<ActionAnswer<unknown>>;
}

/** Air and temperature at a bench: what holds now, and a form for what was read off. */
export function BenchConditions({ benchId, now, atNm, mayEnter, enter }: Props) {
  const router = useRouter();
  return (
    <section className="conditions" aria-labelledby="conditions">
      <div className="cap">
        <h2 id="conditions">Air and temperature</h2>
        {now ? (
          <span>
            {now.by.name}, <When at={now.at} />
          </span>
        ) : null}
      </div>
      <p className="text-ink-2">{now ? enteredText(now, atNm) : `Air ${STANDARD_AIR_TEXT}.`}</p>
      {mayEnter ? (
        <>
          <p className="mb-3 text-small text-ink-3">{HOLDS}</p>
          <Disclosure word="Enter what you read…" title="Air and temperature now">
            {(close) => (
              <ConditionsForm
                start={now}
                word="Enter it"
                enter={(entered) => enter({ benchId, ...entered })}
                onDone={() => {
                  close();
                  router.refresh();
                }}
                onBack={close}
              />
            )}
          </Disclosure>
        </>
      ) : null}
    </section>
  );
}
