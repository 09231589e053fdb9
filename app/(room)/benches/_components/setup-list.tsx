'use client';

import { useState } from 'react';
import { Mark } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { DECISION_WORDS } from '@/components/setups/stated-words';
import { Button } from '@/components/ui/button';
import { count } from '@/lib/client/words';
import type { SetupProposal, SetupView } from '@/lib/domain/views';

interface Props {
  setups: SetupView[];
  ended: SetupProposal[];
  inForceId: number | null;
}

const AT_FIRST = 3;

function changeText(setup: SetupView): string {
  if (!setup.change) return 'The first setup.';
  const sentence = setup.change[0].toUpperCase() + setup.change.slice(1);
  return setup.changeIsLook ? `${sentence}: more than both ± together.` : `${sentence}.`;
}

/** QA's word behind a colon; a sentence keeps its own full stop. */
function remarkText(remark: string): string {
  if (!remark) return '.';
  return `: ${remark}${/[.!?]$/.test(remark) ? '' : '.'}`;
}

/** The setups of a bench, newest first; none of them is ever changed. What never came into force stands below. */
export function SetupList({ setups, ended, inForceId }: Props) {
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
          <InLine key={setup.id} setup={setup} inForceId={inForceId} />
        ))}
        {all ? ended.map((setup) => <Ended key={setup.id} setup={setup} />) : null}
      </ol>
      {!all && (older > 0 || ended.length > 0) ? (
        <Button kind="quiet" onClick={() => setAll(true)}>
          {[
            older > 0 ? count(older, 'older setup') : '',
            ended.length ? `${ended.length} not put in force` : '',
          ]
            .filter(Boolean)
            .join(', ')}
        </Button>
      ) : null}
    </section>
  );
}

function InLine({ setup, inForceId }: { setup: SetupView; inForceId: number | null }) {
  const isNow = setup.id === inForceId;
  return (
    <li className={isNow ? 'now' : undefined} aria-current={isNow || undefined}>
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
          {setup.corrects ? 'A correction of the time before it was entered. ' : ''}
          {changeText(setup)} {setup.why} {count(setup.readings, 'reading')}.
        </p>
        <p>
          {setup.to === null ? null : setup.to === setup.from ? (
            'Corrected from its first moment on. '
          ) : (
            <>
              In force until <When at={setup.to} />.{' '}
            </>
          )}
          Entered by {setup.enteredBy.name},{' '}
          {setup.approved ? (
            <>
              approved by {setup.approved.by.name}
              {remarkText(setup.approved.remark)}
            </>
          ) : (
            'before approval was asked for.'
          )}
        </p>
      </div>
    </li>
  );
}

function Ended({ setup }: { setup: SetupProposal }) {
  if (!setup.ended) return null;
  const { decision, by, at, reason } = setup.ended;
  return (
    <li className="never">
      <span className="pin" aria-hidden="true" />
      <div>
        <b>
          Setup {setup.number}, {DECISION_WORDS[decision]} <When at={at} />
        </b>
        <p>
          Entered by {setup.enteredBy.name}: {setup.why}{' '}
          {decision === 'declined' ? `${by.name}: ${reason}` : ''}
        </p>
      </div>
    </li>
  );
}
