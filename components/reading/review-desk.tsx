'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Budget } from '@/components/budget/budget';
import { FrameConditions } from '@/components/conditions/frame-conditions';
import { SlitPlate } from '@/components/slit/slit-plate';
import { readingMay } from '@/lib/domain/life-cycle';
import type { PersonRef, ReadingView, ReviewView } from '@/lib/domain/views';
import { publishedOf, specificationOf, subjectName } from '@/lib/client/words';
import { regionKeys } from '@/lib/client/region-keys';
import { useRegionChange } from '@/lib/client/use-region-change';
import { useShortcuts } from '@/lib/client/use-shortcuts';
import type { AcceptReading, KeepFit, ReturnReading, SetOutcome, WithdrawalActions } from './actions';
import { AfterDecision } from './after-decision';
import { Comments, type CommentsGiven } from './comments';
import { BeforeAfter } from './before-after';
import { ConflictNotice } from './conflict';
import { Decision } from './decision';
import { PhotoPart, StagePart, useBounds, usePicked } from './desk-parts';
import { Findings } from './findings';
import { FrameStory } from './frame-story';
import { KeepChange, type Refusal } from './keep-change';
import { KeysSheet } from './keys-sheet';
import { LookAnswers, whyChecksClose, type Answers } from './look-answers';
import { lacksMoveReason, MoveBox } from './move-box';
import { OthersLooking } from './others-looking';
import { OutcomeLine } from './outcome-line';
import { RepeatFrames, type RepeatsGiven } from './repeat-frames';
import { ReadingsOfFrame } from './readings-of-frame';
import { Further } from './further';
import { Result } from './result';
import { ReturnForm } from './return-form';
import { WithdrawBox } from './withdraw-box';
import { SaidResult } from './said-result';

interface Props {
  view: ReviewView;
  /** The neighbours in the part of the queue that is worked through. */
  nextHref: string | null;
  previousHref: string | null;
  reading: ReadingView;
  keepFit: KeepFit;
  acceptReading: AcceptReading;
  returnReading: ReturnReading;
  setOutcome: SetOutcome;
  withdrawal: WithdrawalActions;
  commenting: CommentsGiven;
  repeating: RepeatsGiven;
  me: PersonRef;
}

/** One reading under a second pair of eyes. */
export function ReviewDesk(props: Props) {
  const {
    view,
    nextHref,
    previousHref,
    reading,
    keepFit,
    acceptReading,
    returnReading,
    setOutcome,
    withdrawal,
    commenting,
    repeating,
    me,
  } = props;
  const { frame, may, queue } = view;
  const router = useRouter();
  const bounds = useBounds(frame);
  const [picked, pick] = usePicked();
  const [answers, setAnswers] = useState<Answers>({});
  const [moveReason, setMoveReason] = useState('');
  const [mode, setMode] = useState<'checks' | 'return'>('checks');
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [done, setDone] = useState<'accepted' | 'returned' | null>(null);
  const [sheet, setSheet] = useState(false);

  const open = readingMay('accept', reading.status) && done === null;
  const mayFit = may.fit && open;
  const desk = useRegionChange({
    frameId: frame.id,
    bounds,
    detectorMm: frame.scan?.detectorMm ?? null,
    reading,
    facts: frame.facts,
    mayFit,
  });
  const go = (href: string | null) => href !== null && router.push(href);
  const keys = useShortcuts({
    ...regionKeys(desk, mayFit, picked),
    n: () => go(nextHref),
    p: () => go(previousHref),
    '?': () => setSheet(true),
  });
  const settle = (how: 'accepted' | 'returned') => {
    setDone(how);
    setMode('checks');
    setRefusal(null);
    router.refresh();
  };

  const fit = desk.preview.fit;
  const shown = fit ?? reading;
  const closed = desk.change
    ? 'Keep or drop your change of the region first.'
    : (may.acceptBarred ??
      whyChecksClose(reading.findings, answers) ??
      (lacksMoveReason(reading, moveReason) ? 'Accept opens once the moved value has a reason.' : null));
  const unit = frame.subject.kind === 'unit' ? frame.subject : null;

  return (
    <>
      {refusal || done ? (
        <div className="px-[var(--gutter)] py-3">
          {refusal ? (
            <ConflictNotice
              refusal={refusal}
              kept={keptWords(desk.change !== null)}
              onClose={() => setRefusal(null)}
            />
          ) : done ? (
            <AfterDecision
              frame={frame}
              done={done}
              left={Math.max(0, queue.of - (open ? 1 : 0))}
              nextHref={nextHref}
            />
          ) : null}
        </div>
      ) : null}
      <div className="desk">
        <section
          className="left"
          aria-label={frame.scan ? 'Scan, region and checks' : 'Photo, region and checks'}
        >
          <PhotoPart frame={frame} desk={desk} mayFit={mayFit} onKeys={() => setSheet(true)} />
          {reading.note ? (
            <p className="sec text-small text-ink-2">
              {reading.sentBy ? `${reading.sentBy.name} wrote: ` : ''}
              <span className="text-ink">{reading.note}</span>
            </p>
          ) : null}
          {mode === 'return' ? (
            <ReturnForm
              reading={reading}
              name={subjectName(frame)}
              returnReading={returnReading}
              onDone={() => settle('returned')}
              onBack={() => setMode('checks')}
              onRefused={setRefusal}
            />
          ) : fit || !open ? (
            <Findings findings={fit ? fit.result.findings : reading.findings} />
          ) : (
            <LookAnswers
              findings={reading.findings}
              answers={answers}
              onAnswer={(check, answer) => setAnswers({ ...answers, [check]: answer })}
            />
          )}
          <Comments {...commenting} readingId={reading.id} />
        </section>
        <StagePart reading={reading} desk={desk} mayFit={mayFit} picked={picked} onPick={pick} />
        <section className="right" aria-label="Result and decision">
          {open && queue.because ? <p className="mb-2 text-small text-ink-2">{queue.because}</p> : null}
          {open ? <OthersLooking readingId={reading.id} /> : null}
          {open ? null : <FrameStory frame={frame} />}
          {done === null ? (
            <WithdrawBox reading={reading} me={me} mayWithdraw={may.withdraw} {...withdrawal} />
          ) : null}
          <SaidResult before={reading} changed={desk.change !== null} preview={desk.preview} />
          {desk.change ? (
            <>
              <BeforeAfter before={reading} preview={desk.preview} />
              <KeepChange
                mayKeep={mayFit}
                frameId={frame.id}
                reading={reading}
                desk={desk}
                keepFit={keepFit}
                hrefOf={(id) => `/review/${id}`}
                onRefused={setRefusal}
              />
            </>
          ) : (
            <MoveBox reading={reading} reason={moveReason} onReason={open ? setMoveReason : undefined} />
          )}
          <Result
            result={shown.result}
            wavelengthNm={shown.wavelengthNm}
            expandedNm={shown.expandedNm}
            k={shown.k}
            medium={shown.medium}
            judgement={shown.judgement}
            specification={specificationOf(frame.subject)}
            scaleUmPerPx={reading.setup.scaleUmPerPx.value}
            uScaleUmPerPx={reading.setup.scaleUmPerPx.u}
            publishedVacuumNm={publishedOf(frame.subject)}
          />
          <Budget
            key={shown === fit ? 'preview' : reading.id}
            wavelengthNm={shown.wavelengthNm}
            uNm={shown.uNm}
            expandedNm={shown.expandedNm}
            medium={shown.medium}
            budget={shown.budget}
            corrections={shown.corrections}
            method={shown.method}
            other={shown.other}
            specification={specificationOf(frame.subject)}
            monteCarlo={shown === reading ? reading.monteCarlo : null}
          />
          <FrameConditions frameId={frame.id} reading={reading} enter={null} />
          {frame.subject.kind === 'source' && frame.subject.isReference ? (
            <SlitPlate result={shown.result} setup={frame.facts.setup} source={frame.subject} />
          ) : null}
          <Further result={shown.result} />
          <ReadingsOfFrame
            frameId={frame.id}
            readings={frame.readings}
            shownId={reading.id}
            hrefOf={(r) =>
              readingMay('accept', r.status) ? `/review/${r.id}` : `/frames/${frame.id}?reading=${r.id}`
            }
          />
          <RepeatFrames {...repeating} shownId={reading.id} />
          <div className="closing">
            {unit ? (
              <OutcomeLine
                unitId={unit.unitId}
                outcome={frame.outcome}
                mayChange={may.outcome}
                setOutcome={setOutcome}
              />
            ) : null}
            {open ? (
              <Decision
                reading={reading}
                answers={answers}
                closed={closed}
                moveReason={moveReason}
                passwordUntil={view.passwordUntil}
                mayReturn={may.return}
                acceptReading={acceptReading}
                onReturn={() => setMode('return')}
                onAccepted={() => settle('accepted')}
                onRefused={setRefusal}
              />
            ) : null}
          </div>
        </section>
      </div>
      <KeysSheet
        open={sheet}
        onClose={() => setSheet(false)}
        on={keys.on}
        setOn={keys.setOn}
        scan={frame.scan !== null}
      />
    </>
  );
}

function keptWords(changed: boolean): string {
  return changed
    ? 'Your change of the region was not saved; it is kept here until you leave.'
    : 'Your answers are kept here until you leave.';
}
