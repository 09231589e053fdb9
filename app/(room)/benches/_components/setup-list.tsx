'use client';

import { useState } from 'react';
import { Mark } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import { count } from '@/lib/client/words';
import type { SetupView } from '@/lib/domain/views';

const AT_FIRST = 3;

function changeText(setup: SetupView): string {
  if (!setup.change) return 'The first setup.';
  const sentence = setup.change[0].toUpperCase() + setup.change.slice(1);
  return setup.changeIsLook ? `${sentence}: more than both ± together.` : `${sentence}.`;
}

/** The setups of a bench, newest first; none of them is ever changed. */
export function SetupList({ setups }: { setups: SetupView[] }) {
  const [all, setAll] = useState(false);
  const shown = all ? setups : setups.slice(0, AT_FIRST);
  const older = setups.length - shown.length;
  return (
    <section aria-labelledby="setups">
      <div className="cap">
        <h2 id="setups">Setups</h2>
        <span>newest first</span>
      </div>
      <ol className="setups">
        {shown.map((setup) => (
          <li key={setup.id} className={setup.to === null ? 'now' : undefined}>
            <span className="pin" aria-hidden="true" />
            <div>
              <b>
                Setup {setup.number}, from <When at={setup.from} />
              </b>
              {setup.changeIsLook ? (
                <>
                  <Mark kind="check-look" />
                  <span className="only-heard">Look: </span>
                </>
              ) : null}
              <p>
                {changeText(setup)} {setup.why} {count(setup.readings, 'reading')}. {setup.enteredBy.name}.
              </p>
            </div>
          </li>
        ))}
      </ol>
      {older > 0 ? (
        <Button kind="quiet" onClick={() => setAll(true)}>
          {count(older, 'older setup')}
        </Button>
      ) : null}
    </section>
  );
}
