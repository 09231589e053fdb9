'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Mark } from '@/components/figures/marks';
import { Button, buttonClass } from '@/components/ui/button';
import { Field, Select, TextArea } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { useSubmit } from '@/lib/client/use-submit';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { SetupView } from '@/lib/domain/views';
import { SETUP_VALUES } from '../../../_components/setup-values';
import { changesOf, inputOf, scaleText, startText, type SetupInput } from './setup-text';
import { ScalePhoto } from './scale-photo';
import { ValueBlock } from './value-block';

interface Props {
  benchId: number;
  before: SetupView | null;
  addSetup: (input: SetupInput) => Promise<ActionAnswer<unknown>>;
}

/** A new setup: each value with its uncertainty, certificate and due date, and what changes. */
export function SetupForm({ benchId, before, addSetup }: Props) {
  const router = useRouter();
  const [text, setText] = useState(() => startText(before));
  const submit = useSubmit<unknown>();
  const number = (before?.number ?? 0) + 1;
  const changes = changesOf(text, before);
  const faster = submit.message !== '';
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addSetup(inputOf(benchId, before, text)),
          () => {
            router.push(`/benches/${benchId}`);
            router.refresh();
          },
        );
      }}
    >
      <div className="max-w-[320px] pb-4">
        <Field
          label="Slit plate"
          value={text.plate}
          error={submit.fields.plate}
          onChange={(event) => setText({ ...text, plate: event.target.value })}
        />
      </div>
      {SETUP_VALUES.map((spec) => (
        <ValueBlock
          key={spec.key}
          valueKey={spec.key}
          name={spec.name}
          symbol={spec.symbol}
          unit={spec.unit}
          text={text.values[spec.key]}
          before={before?.[spec.key] ?? null}
          errors={submit.fields}
          onChange={(value) => setText({ ...text, values: { ...text.values, [spec.key]: value } })}
        />
      ))}
      <div className="py-4">
        <ScalePhoto
          onUse={(reading) =>
            setText({
              ...text,
              values: { ...text.values, scaleUmPerPx: scaleText(reading, text.values.scaleUmPerPx) },
            })
          }
        />
      </div>
      <div className="value-block">
        <Field
          label="Re-mount, standard uncertainty, nm"
          inputMode="decimal"
          value={text.remountU}
          error={submit.fields['remountNm.u']}
          help="From pairs of re-mounted units; empty when none is stated."
          onChange={(event) => setText({ ...text, remountU: event.target.value })}
        />
        <Field
          label="Degrees of freedom"
          inputMode="decimal"
          value={text.remountDof}
          error={submit.fields['remountNm.dof']}
          onChange={(event) => setText({ ...text, remountDof: event.target.value })}
        />
        <span />
        <Select
          label="Tone of the camera"
          value={text.tone}
          help="Linear when the camera writes raw linear values; sRGB for photographs; otherwise found from each frame."
          onChange={(event) =>
            setText({
              ...text,
              tone:
                event.target.value === 'linear' ? 'linear' : event.target.value === 'srgb' ? 'srgb' : 'auto',
            })
          }
        >
          <option value="auto">found from the frame</option>
          <option value="linear">linear</option>
          <option value="srgb">sRGB</option>
        </Select>
      </div>
      <div className="grid grid-cols-2 gap-x-11 gap-y-4 border-t border-line pt-4 max-[860px]:grid-cols-1">
        <TextArea
          label="Why a new setup"
          rows={4}
          value={text.why}
          error={submit.fields.why}
          help="What was done on the bench. It stands in the list of setups and in the log."
          onChange={(event) => setText({ ...text, why: event.target.value })}
        />
        <section aria-labelledby="changes">
          <h2 id="changes" className="label">
            What changes
          </h2>
          {before ? (
            <ul className="grid gap-1.5 text-small text-ink-2" aria-live="polite">
              {changes.length ? (
                changes.map((line) => <li key={line}>{line}</li>)
              ) : (
                <li>Nothing yet: all values are as in setup {before.number}.</li>
              )}
            </ul>
          ) : (
            <p className="text-small text-ink-2">This is the first setup of the bench.</p>
          )}
        </section>
      </div>
      {faster ? (
        <div className="mt-4">
          <Notice
            stop
            live
            mark={<Mark kind="check-look" />}
            title={submit.message}
            act={<Button onClick={() => router.refresh()}>See theirs</Button>}
          >
            What you typed is kept here.
          </Notice>
        </div>
      ) : null}
      <div className="form-foot">
        <button type="submit" className={buttonClass('plain', true)} disabled={submit.waiting}>
          Put setup {number} in force
        </button>
        {Object.keys(submit.fields).length ? (
          <p className="help wrong" role="alert">
            {Object.keys(submit.fields).length === 1
              ? 'One field needs another look.'
              : `${Object.keys(submit.fields).length} fields need another look.`}
          </p>
        ) : null}
      </div>
    </form>
  );
}
