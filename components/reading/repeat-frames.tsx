'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useState, type FormEvent } from 'react';
import { When } from '@/components/figures/when';
import { MEDIUM_SHORT } from '@/components/figures/quantity';
import { Button } from '@/components/ui/button';
import { TextArea } from '@/components/ui/field';
import { FormFoot } from '@/components/ui/form-foot';
import { useSubmit } from '@/lib/client/use-submit';
import { READING_STEPS, READING_WORDS } from '@/lib/domain/life-cycle';
import { LIMITS } from '@/lib/domain/limits';
import type { RepeatRow, RepeatsView } from '@/lib/domain/repeats';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';
import type { ChooseReading } from './actions';

/** What a page gives for the repeat frames of its unit. */
export interface RepeatsGiven {
  repeats: RepeatsView | null;
  mayChoose: boolean;
  chooseReading: ChooseReading;
}

interface Props extends RepeatsGiven {
  shownId: number;
}

/** Several frames of one unit: their values, how they agree, and which of them is reported. */
export function RepeatFrames({ repeats, mayChoose, chooseReading, shownId }: Props) {
  if (!repeats) return null;
  const { rows, meanNm, scatterNm, chosen, medium } = repeats;
  const shown = rows.find(({ readingId }) => readingId === shownId);
  const isAccepted = shown?.status === READING_STEPS.accept.to;
  const counted = rows.filter(({ counts }) => counts).length;
  return (
    <section className="sec" aria-labelledby="repeats-head">
      <div className="cap" style={{ marginBottom: 5 }}>
        <h2 id="repeats-head">Frames of this unit</h2>
        <span>nm ({MEDIUM_SHORT[medium]})</span>
      </div>
      <div className="was">
        {rows.map((row, i) => (
          <Link
            key={row.frameId}
            href={`/frames/${row.frameId}?reading=${row.readingId}`}
            aria-current={row.readingId === shownId ? 'true' : undefined}
            prefetch={false}
          >
            <b>{i + 1}</b>
            <span className="truncate">{rowText(row, chosen?.readingId === row.readingId)}</span>
            <b className="value">{valueOf(row)}</b>
          </Link>
        ))}
      </div>
      {meanNm === null ? null : (
        <p className="mt-2 text-small text-ink-2">
          Mean of {counted}{' '}
          <b className="text-ink">
            {formatNumber(meanNm, 3)} nm ({MEDIUM_SHORT[medium]})
          </b>
          {scatterNm === null ? '' : `, scatter s = ${formatNumber(scatterNm, 3)} nm, without the setup`}
          {rows.some(({ isOutlier }) => isOutlier) ? '. One value does not belong to the others.' : '.'}
        </p>
      )}
      {chosen ? (
        <p className="mt-1 text-small text-ink-2">
          Reported: {chosen.by.name}, <When at={chosen.at} />. {chosen.reason}
        </p>
      ) : null}
      {mayChoose && isAccepted && chosen?.readingId !== shownId ? (
        <ChooseForm readingId={shownId} chooseReading={chooseReading} />
      ) : null}
    </section>
  );
}

function rowText(row: RepeatRow, isChosen: boolean): string {
  return [READING_WORDS[row.status].toLowerCase(), row.isOutlier ? 'outlier' : '', isChosen ? 'reported' : '']
    .filter(Boolean)
    .join(', ');
}

function valueOf({ valueNm, expandedNm }: RepeatRow): string {
  if (valueNm === null) return 'none';
  if (!expandedNm) return formatNumber(valueNm, 2);
  const text = formatQuantity(valueNm, expandedNm);
  return `${text.value} ± ${text.uncertainty}`;
}

function ChooseForm({ readingId, chooseReading }: { readingId: number; chooseReading: ChooseReading }) {
  const router = useRouter();
  const [open, setOpen] = useState(false);
  const [reason, setReason] = useState('');
  const submit = useSubmit<unknown>();
  if (!open) {
    return (
      <Button kind="quiet" onClick={() => setOpen(true)}>
        Report this one…
      </Button>
    );
  }
  const choose = (event: FormEvent) => {
    event.preventDefault();
    submit.run(
      () => chooseReading({ readingId, reason }),
      () => {
        setOpen(false);
        router.refresh();
      },
    );
  };
  return (
    <form className="mt-2" onSubmit={choose}>
      <TextArea
        label="Why this one is reported"
        value={reason}
        maxLength={LIMITS.wordsLength}
        error={submit.fields.reason}
        onChange={(event) => setReason(event.target.value)}
      />
      <FormFoot
        word="Report it"
        waiting={submit.waiting}
        message={submit.message}
        disabled={!reason.trim()}
        onBack={() => setOpen(false)}
      />
    </form>
  );
}
