'use client';

import { useState } from 'react';
import { Budget } from '@/components/budget/budget';
import { FrameConditions, type EnterFrameConditions } from '@/components/conditions/frame-conditions';
import { SlitPlate } from '@/components/slit/slit-plate';
import { Button } from '@/components/ui/button';
import { FRAME_WORDS, readingMayBeFollowed } from '@/lib/domain/life-cycle';
import type { FrameView, May, PersonRef } from '@/lib/domain/views';
import { publishedOf, specificationOf } from '@/lib/client/words';
import { useRegionChange } from '@/lib/client/use-region-change';
import { useShortcuts } from '@/lib/client/use-shortcuts';
import { regionKeys } from '@/lib/client/region-keys';
import type { KeepFit, SendToReview, WithdrawalActions } from './actions';
import { Comments, type CommentsGiven } from './comments';
import { BeforeAfter } from './before-after';
import { ConflictNotice } from './conflict';
import { boundsOf, PhotoPart, StageNote, StagePart, useBounds, usePicked } from './desk-parts';
import { Findings } from './findings';
import { KeepChange, type Refusal } from './keep-change';
import { KeysSheet } from './keys-sheet';
import { RepeatFrames, type RepeatsGiven } from './repeat-frames';
import { ReadingsOfFrame } from './readings-of-frame';
import { Further } from './further';
import { Result } from './result';
import { SaidResult } from './said-result';
import { SendBox } from './send-box';
import { MoveBox } from './move-box';
import { FrameStory } from './frame-story';
import { WithdrawBox } from './withdraw-box';
import { NewFitStage, scaleOfFit, uScaleOfFit } from './new-fit-stage';

interface Props {
  frame: FrameView;
  may: May;
  keepFit: KeepFit;
  sendToReview: SendToReview;
  enterConditions: EnterFrameConditions;
  withdrawal: WithdrawalActions;
  commenting: CommentsGiven;
  repeating: RepeatsGiven;
  me: PersonRef;
}

/** One frame as the technician sees it: photo, stage, result, and what can be done with it. */
export function FrameDesk({
  frame,
  may,
  keepFit,
  sendToReview,
  enterConditions,
  withdrawal,
  commenting,
  repeating,
  me,
}: Props) {
  const reading = frame.shown;
  const desk = useRegionChange({
    frameId: frame.id,
    bounds: useBounds(frame),
    detectorMm: frame.scan?.detectorMm ?? null,
    reading,
    facts: frame.facts,
    mayFit: may.fit,
  });
  const [picked, pick] = usePicked();
  const [refusal, setRefusal] = useState<Refusal | null>(null);
  const [sheet, setSheet] = useState(false);
  const keys = useShortcuts({
    ...regionKeys(desk, may.fit, picked),
    '?': () => setSheet(true),
  });
  const fit = desk.preview.fit;
  const shown = fit ?? reading;
  return (
    <div className="desk">
      <section
        className="left"
        aria-label={frame.scan ? 'Scan, region and checks' : 'Photo, region and checks'}
      >
        <PhotoPart frame={frame} desk={desk} mayFit={may.fit} onKeys={() => setSheet(true)} />
        {shown ? <Findings findings={fit ? fit.result.findings : (reading?.findings ?? [])} /> : null}
        {reading ? <Comments {...commenting} readingId={reading.id} /> : null}
      </section>
      {reading ? (
        <StagePart reading={reading} desk={desk} mayFit={may.fit} picked={picked} onPick={pick} />
      ) : fit ? (
        <NewFitStage fit={fit} desk={desk} picked={picked} onPick={pick} />
      ) : (
        <StageNote>
          <p className="mb-2 text-lead font-medium text-ink">{FRAME_WORDS[frame.state]}</p>
          <p>{frame.message ?? 'The frame is not fitted yet.'}</p>
          {may.fit && boundsOf(frame) ? (
            <>
              <p className="mt-3">
                {frame.scan
                  ? 'Where the fringes can be seen, set the jaws beside them: that part of the scan is then fitted.'
                  : 'Where the fringes can be seen, set the calliper on them: the region is then fitted as you set it.'}
              </p>
              <Button className="mt-4" busy={desk.preview.working} onClick={desk.fitAsItStands}>
                Fit the region as it stands
              </Button>
            </>
          ) : null}
        </StageNote>
      )}
      <section className="right" aria-label="Result">
        {refusal ? (
          <div className="mb-3">
            <ConflictNotice
              refusal={refusal}
              kept="Your change of the region was not saved; it is kept here."
              onClose={() => setRefusal(null)}
            />
          </div>
        ) : null}
        <FrameStory frame={frame} />
        {reading ? (
          <WithdrawBox reading={reading} me={me} mayWithdraw={may.withdraw} {...withdrawal} />
        ) : null}
        {reading && may.fit && readingMayBeFollowed(reading.status) && !desk.change ? (
          <Button className="mb-3 w-full" busy={desk.preview.working} onClick={desk.fitAsItStands}>
            Make a new reading in its place
          </Button>
        ) : null}
        <SaidResult before={reading} changed={desk.change !== null} preview={desk.preview} />
        {desk.change ? (
          <>
            <BeforeAfter before={reading} preview={desk.preview} />
            <KeepChange
              mayKeep={may.fit}
              main
              frameId={frame.id}
              reading={reading}
              desk={desk}
              keepFit={keepFit}
              hrefOf={(id) => `/frames/${frame.id}?reading=${id}`}
              onRefused={setRefusal}
            />
          </>
        ) : reading ? (
          <MoveBox reading={reading} reason="" />
        ) : null}
        {shown ? (
          <>
            <Result
              result={shown.result}
              wavelengthNm={shown.wavelengthNm}
              expandedNm={shown.expandedNm}
              k={shown.k}
              medium={shown.medium}
              judgement={shown.judgement}
              specification={specificationOf(frame.subject)}
              scaleUmPerPx={reading?.setup.scaleUmPerPx.value ?? (fit ? scaleOfFit(fit) : 0)}
              uScaleUmPerPx={reading?.setup.scaleUmPerPx.u ?? (fit ? uScaleOfFit(fit) : 0)}
              publishedVacuumNm={publishedOf(frame.subject)}
            />
            <Budget
              key={shown === fit ? 'preview' : reading?.id}
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
            {reading ? (
              <FrameConditions
                frameId={frame.id}
                reading={reading}
                enter={may.send && desk.change === null ? enterConditions : null}
              />
            ) : null}
            {frame.subject.kind === 'source' && frame.subject.isReference ? (
              <SlitPlate result={shown.result} setup={frame.facts.setup} source={frame.subject} />
            ) : null}
            <Further result={shown.result} />
          </>
        ) : null}
        {frame.readings.length ? (
          <ReadingsOfFrame
            frameId={frame.id}
            readings={frame.readings}
            shownId={reading?.id ?? null}
            hrefOf={(r) => `/frames/${frame.id}?reading=${r.id}`}
          />
        ) : null}
        {reading ? <RepeatFrames {...repeating} shownId={reading.id} /> : null}
        {reading && may.send ? (
          <SendBox reading={reading} changed={desk.change !== null} sendToReview={sendToReview} />
        ) : null}
      </section>
      <KeysSheet
        open={sheet}
        onClose={() => setSheet(false)}
        on={keys.on}
        setOn={keys.setOn}
        scan={frame.scan !== null}
      />
    </div>
  );
}
