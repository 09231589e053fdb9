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
import { SETUP_VALUES } from '@/lib/domain/setup';
import { InForceFrom } from './in-force-from';
import { changesOf, hintOf, inputOf, scaleText, startText, type SetupInput } from './setup-text';
import { ScalePhoto } from './scale-photo';
import { ValueBlock } from './value-block';

interface Props {
  benchId: number;
  /** The setup in force. */
  before: SetupView | null;
  lastNumber: number;
  addSetup: (input: SetupInput) => Promise<ActionAnswer<unknown>>;
}

/** A new setup: each value with its uncertainty, certificate and due date, and what changes. */
export function SetupForm({ benchId, before, lastNumber, addSetup }: Props) {
  const router = useRouter();
  const [text, setText] = useState(() => startText(before));
  const submit = useSubmit<unknown>();
  const number = lastNumber + 1;
  const changes = changesOf(text, before);
  const faster = submit.message !== '';
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit.run(
          () => addSetup(inputOf(benchId, lastNumber, text)),
          () => {
            router.push(`/benches/${benchId}`);
            router.refresh();
          },
        );
      }}
    >
      <InForceFrom
        from={text.from}
        error={submit.fields.inForceFrom}
        onChange={(from) => setText({ ...text, from })}
      />
      <div className="max-w-[320px] pb-4">
        <Field
          label="Slit plate"
          value={text.plate}
          error={submit.fields.plate}
          onChange={(event) => setText({ ...text, plate: event.target.value })}
        />
      </div>
      {SETUP_VALUES.map(({ key }) => (
        <ValueBlock
          key={key}
          valueKey={key}
          text={text.values[key]}
          hint={hintOf(key, text, before)}
          errors={submit.fields}
          onChange={(value) => setText({ ...text, values: { ...text.values, [key]: value } })}
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
      <div className="plain-block">
        <Field
          label="Re-mount, standard uncertainty, nm"
          inputMode="decimal"
          value={text.remountU}
          error={submit.fields['remountNm.u']}
          help="From pairs of re-mounted units; empty when none is stated."
          onChange={(event) => setText({ ...text, remountU: event.target.value })}
        />
        <Field
          label="Degrees of freedom of the re-mount"
          inputMode="decimal"
          value={text.remountDof}
          error={submit.fields['remountNm.dof']}
          onChange={(event) => setText({ ...text, remountDof: event.target.value })}
        />
      </div>
      <div className="plain-block">
        <Field
          label="Camera, model"
          value={text.cameraModel}
          error={submit.fields['camera.model']}
          onChange={(event) => setText({ ...text, cameraModel: event.target.value })}
        />
        <Field
          label="Serial of the camera"
          value={text.cameraSerial}
          error={submit.fields['camera.serial']}
          onChange={(event) => setText({ ...text, cameraSerial: event.target.value })}
        />
        <Field
          label="Bit depth"
          inputMode="numeric"
          value={text.cameraBits}
          error={submit.fields['camera.bits']}
          help="Bits of one value: 8 to 16; empty when it is not known."
          onChange={(event) => setText({ ...text, cameraBits: event.target.value })}
        />
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
                <li>Nothing yet: all values are as in setup {before.number}, which is in force.</li>
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
          Hand setup {number} to QA
        </button>
        <p className="text-small text-ink-2">
          Somebody of QA looks at it and approves it; until then nothing changes on the bench.
        </p>
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
