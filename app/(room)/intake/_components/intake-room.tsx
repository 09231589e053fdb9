'use client';

import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { benchLines, fitnessMark, type ChooseBench } from '@/components/bar/bench-picker';
import { Mark } from '@/components/figures/marks';
import { spanForMm } from '@/components/figures/strip-scale';
import type { SendToReview } from '@/components/reading/actions';
import { Button } from '@/components/ui/button';
import { Choice } from '@/components/ui/choice';
import { Notice } from '@/components/ui/notice';
import { callAction } from '@/lib/client/call-action';
import type { UploadTarget } from '@/lib/client/upload';
import { useLiveFrames } from '@/lib/client/use-live-frames';
import { useUploads } from '@/lib/client/use-uploads';
import type { ActionAnswer } from '@/lib/domain/errors';
import { LIMITS } from '@/lib/domain/limits';
import type { BenchChoice, FrameRow, LotRow, Me, SourceView } from '@/lib/domain/views';
import { DropZone } from './drop-zone';
import { IntakeFoot } from './intake-foot';
import { IntakeList } from './intake-list';
import { PhoneFrom } from './phone-from';
import { ScanQuestion, useHeldScans } from './scan-question';
import { shareOf, shareWords, useBatch } from './batch';
import { SignInAgain } from './sign-in-again';
import { SubjectChoice, type Chosen } from './subject-choice';

interface Props {
  me: Me;
  benches: BenchChoice[];
  benchInUse: number | null;
  lots: LotRow[];
  sources: SourceView[];
  frames: FrameRow[];
  chooseBench: ChooseBench;
  emptyIntake: () => Promise<ActionAnswer<unknown>>;
  sendToReview: SendToReview;
}

/** Frames in: bench, lot, files, and what became of each. */
export function IntakeRoom({
  me,
  benches,
  benchInUse,
  lots,
  sources,
  frames,
  chooseBench,
  emptyIntake,
  sendToReview,
}: Props) {
  const router = useRouter();
  const live = useLiveFrames(frames);
  const [same, setSame] = useState<Record<number, number>>({});
  const uploads = useUploads((frame, sameAs) => {
    live.put(frame);
    if (sameAs !== null) setSame((before) => ({ ...before, [frame.id]: sameAs }));
  });
  const batch = useBatch(uploads.items);
  const scans = useHeldScans(uploads.add);
  const [chosen, setChosen] = useState<Chosen>(
    lots[0] ? { kind: 'lot', id: lots[0].id } : sources[0] ? { kind: 'source', id: sources[0].id } : null,
  );
  const [said, setSaid] = useState('');
  const [askSignIn, setAskSignIn] = useState(true);
  const [waiting, start] = useTransition();

  const bench = benches.find((b) => b.id === benchInUse) ?? null;
  const closed = !bench
    ? 'Choose the bench first.'
    : bench.setupNumber === null
      ? bench.waitingNumber === null
        ? `${bench.name} has no setup in force. An admin enters one under Benches.`
        : `Setup ${bench.waitingNumber} of ${bench.name} waits for QA, who approves it under Benches.`
      : !chosen
        ? 'There is no open lot and no source. Open a lot first.'
        : null;

  const targetFor = (serial: string): UploadTarget | null =>
    bench && chosen
      ? {
          benchId: bench.id,
          lotId: chosen.kind === 'lot' ? chosen.id : null,
          sourceId: chosen.kind === 'source' ? chosen.id : null,
          serial,
          detectorMm: null,
        }
      : null;
  const add = (files: File[], serial = '') => {
    const target = targetFor(serial);
    if (!target || !files.length) return;
    const room = LIMITS.filesAtOnce - uploads.items.length - scans.held.length;
    setSaid(
      files.length > room
        ? `At most ${LIMITS.filesAtOnce} frames at once: ${files.length - room} were not added. Add them later.`
        : '',
    );
    void scans.add(files.slice(0, Math.max(0, room)), target);
  };
  const replace = (frame: FrameRow, file: File) => {
    const { subject } = frame;
    void scans.add([file], {
      benchId: frame.bench.id,
      lotId: subject.kind === 'unit' ? subject.lotId : null,
      sourceId: subject.kind === 'source' ? subject.sourceId : null,
      serial: subject.kind === 'unit' ? subject.serial : '',
      detectorMm: frame.scan?.detectorMm ?? null,
    });
    live.hide((f) => f.id !== frame.id);
  };
  const send = async (list: FrameRow[], note: string) => {
    const readings = list.flatMap(({ reading }) =>
      reading ? [{ readingId: reading.id, version: reading.version, note }] : [],
    );
    const answer = await callAction(() => sendToReview({ readings }));
    setSaid(
      answer.ok
        ? [`${answer.value.sent} sent to review.`, ...answer.value.problems].join(' ')
        : answer.message,
    );
    await live.look(list.map((frame) => frame.id));
  };
  const clear = live.frames.filter((f) => f.reading?.status === 'draft' && f.reading.word === 'clear');
  const empty = () =>
    start(async () => {
      const answer = await callAction(emptyIntake);
      if (!answer.ok) setSaid(answer.message);
      else {
        setSaid('');
        live.hide((f) => f.state === 'copying' || f.state === 'waiting' || f.state === 'fitting');
        uploads.items.filter((item) => item.state === 'failed').forEach((item) => uploads.remove(item.key));
      }
    });
  const chooseHere = (benchId: number) =>
    start(async () => {
      const answer = await callAction(() => chooseBench({ benchId }));
      if (!answer.ok) setSaid(answer.message);
      router.refresh();
    });

  return (
    <div className="page intake">
      <h1 className="only-heard">Intake</h1>
      <PhoneFrom
        bench={bench}
        benches={benches}
        onBench={chooseHere}
        lots={lots}
        sources={sources}
        chosen={chosen}
        onChoose={setChosen}
      />
      <div className="where not-phone">
        <div>
          <span className="label" id="bench-label">
            Bench in use
          </span>
          <div className="choices" role="group" aria-labelledby="bench-label">
            {benches.map((b) => (
              <Choice
                key={b.id}
                chosen={b.id === benchInUse}
                onChoose={() => chooseHere(b.id)}
                title={b.name}
                lines={benchLines(b)}
                mark={fitnessMark(b)}
              />
            ))}
          </div>
        </div>
        <SubjectChoice lots={lots} sources={sources} chosen={chosen} onChoose={setChosen} />
      </div>
      <div className="not-phone">
        <DropZone
          onFiles={(files) => add(files)}
          closed={closed}
          share={shareOf(batch)}
          shareText={shareWords(batch)}
        />
      </div>
      {uploads.expired && !askSignIn ? (
        <div className="mt-3">
          <Notice
            stop
            live
            mark={<Mark kind="check-stop" />}
            title="Your session has ended"
            act={<Button onClick={() => setAskSignIn(true)}>Sign in again</Button>}
          >
            The list is kept. The frames go on once you have signed in.
          </Notice>
        </div>
      ) : null}
      {scans.held.length ? <ScanQuestion held={scans.held} onGo={scans.go} onDrop={scans.drop} /> : null}
      <IntakeList
        frames={live.frames}
        items={uploads.items}
        sameAs={same}
        spanMm={spanForMm(live.frames.flatMap((f) => (f.reading ? [f.reading] : [])))}
        onSend={(frame, note) => send([frame], note)}
        onReplaceFrame={replace}
        onRetry={(key, serial) => uploads.retry(key, serial === undefined ? undefined : { serial })}
        onRemove={uploads.remove}
        onReplaceItem={(item, file) => {
          void scans.add([file], item.target);
          uploads.remove(item.key);
        }}
      />
      <IntakeFoot
        frames={live.frames}
        items={uploads.items}
        said={
          said || (live.lost ? 'The service could not be reached; the states shown are the last known.' : '')
        }
        clear={clear.length}
        waiting={waiting}
        closed={closed}
        onAdd={(files) => add(files)}
        onEmpty={empty}
        onSend={() => start(() => send(clear, ''))}
      />
      <SignInAgain
        open={uploads.expired && askSignIn}
        email={me.email}
        onClose={() => setAskSignIn(false)}
        onSignedIn={() => {
          uploads.goOn();
          setAskSignIn(true);
        }}
      />
    </div>
  );
}
