'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { SaidCheck } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Disclosure } from '@/components/ui/disclosure';
import { TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import type { FindingWord } from '@/lib/domain/reading-result';
import type { BenchStanding, ReferencesView } from '@/lib/domain/references';
import type { ReleaseBench, SetBenchRule } from './actions';
import { CheckList } from './check-list';
import { RuleForm, ruleText } from './rule-form';

interface Props {
  benchId: number;
  view: ReferencesView;
  mayRelease: boolean;
  releaseBench: ReleaseBench;
  setBenchRule: SetBenchRule;
}

const STANDING: Record<BenchStanding, { word: FindingWord; short: string; text: string }> = {
  unchecked: {
    word: 'look',
    short: 'Not checked yet',
    text: 'Nothing shows yet that this bench agrees with a published wavelength.',
  },
  agrees: { word: 'clear', short: 'Agrees', text: 'The newest check lies inside its limit.' },
  repeat: {
    word: 'look',
    short: 'Repeat the check',
    text: 'The newest check lies outside. Take the reference once more; a second one outside stops the bench.',
  },
  stopped: {
    word: 'stop',
    short: 'Stopped for accepting',
    text: 'Two checks in a row lie outside. Frames can be taken and fitted; no reading is accepted until QA releases the bench.',
  },
};

/** How a bench stands by its reference checks, what they were, and what QA can do about it. */
export function ReferenceChecks({ benchId, view, mayRelease, releaseBench, setBenchRule }: Props) {
  const { word, short, text } = STANDING[view.standing];
  return (
    <section className="references" aria-labelledby="references">
      <div className="cap">
        <h2 id="references">Reference checks</h2>
        <span>newest first</span>
      </div>
      <div className={word === 'stop' ? 'ask standing-stop' : 'standing-line'}>
        <SaidCheck word={word}>{short}</SaidCheck>
        <p className="text-ink-2">
          {text} {view.stop ? <When at={view.stop.at} /> : null}
        </p>
        {view.stop && mayRelease ? <Release stopId={view.stop.id} releaseBench={releaseBench} /> : null}
      </div>
      <CheckList view={view} />
      {view.lastRelease ? (
        <p className="mt-2 text-small text-ink-2">
          Last released by {view.lastRelease.by.name}, <When at={view.lastRelease.at} />:{' '}
          {view.lastRelease.reason}
        </p>
      ) : null}
      <p className="mt-2 mb-3 text-small text-ink-2">{ruleText(view.rule)}</p>
      {mayRelease ? (
        <Disclosure word="Change how it is checked…" title="Check and method of this bench">
          {(close) => (
            <RuleForm benchId={benchId} rule={view.rule} setBenchRule={setBenchRule} onClose={close} />
          )}
        </Disclosure>
      ) : null}
    </section>
  );
}

function Release({ stopId, releaseBench }: { stopId: number; releaseBench: ReleaseBench }) {
  const router = useRouter();
  const [reason, setReason] = useState('');
  const submit = useSubmit<unknown>();
  return (
    <Disclosure word="Release the bench…" title="Release the bench">
      {(close) => (
        <form
          onSubmit={(event) => {
            event.preventDefault();
            submit.run(
              () => releaseBench({ stopId, reason }),
              () => {
                close();
                router.refresh();
              },
            );
          }}
        >
          <TextArea
            label="What was found and put right"
            help="It stays with the stop and in the log. The count of checks outside starts anew."
            value={reason}
            error={submit.fields.reason}
            onChange={(event) => setReason(event.target.value)}
          />
          <FormFoot word="Release it" waiting={submit.waiting} message={submit.message} onBack={close} />
        </form>
      )}
    </Disclosure>
  );
}
