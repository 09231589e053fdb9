'use client';

import Link from 'next/link';
import { useState, type ReactNode } from 'react';
import { FramePicture } from '@/components/frames/frame-picture';
import { HollowOrders, litFor } from '@/components/figures/hollow-orders';
import { Mark, SaidCheck, stateOf } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { Button } from '@/components/ui/button';
import { Field } from '@/components/ui/field';
import type { UploadItem } from '@/lib/client/use-uploads';
import { detectorText, subjectName } from '@/lib/client/words';
import { frameIsMoving } from '@/lib/domain/life-cycle';
import type { FrameRow } from '@/lib/domain/views';
import { formatBytes, formatNumber } from '@/lib/quantity/format';
import { ChooseFiles } from './choose-files';

interface LineProps {
  kind: Parameters<typeof Mark>[0]['kind'];
  name: ReactNode;
  file: string;
  word: string;
  at: string;
  picture: ReactNode;
  children: ReactNode;
}

function Line({ kind, name, file, word, at, picture, children }: LineProps) {
  return (
    <div className="row intake-row" role="listitem">
      <div className="a">
        <Mark kind={kind} />
        <div>
          <div className="name">{name}</div>
          <div className="sub file">{file}</div>
        </div>
        <div>
          <div className="state">{word}</div>
          <div className="sub">
            <When at={at} />
          </div>
        </div>
      </div>
      <div className="pic">{picture}</div>
      <div className="c">{children}</div>
    </div>
  );
}

interface FrameLineProps {
  frame: FrameRow;
  spanMm: number;
  sameAs: number | null;
  onSend: (frame: FrameRow, note: string) => Promise<void>;
  onReplace: (frame: FrameRow, file: File) => void;
}

const ON_THE_WAY: Record<string, string> = {
  copying: 'The bytes are still coming.',
  waiting: 'The frame is safe; it is fitted next.',
  fitting: 'Finding the order centres.',
};

/** A frame whose bytes and row are safe. */
export function FrameLine({ frame, spanMm, sameAs, onSend, onReplace }: FrameLineProps) {
  const [asking, setAsking] = useState(false);
  const { reading } = frame;
  const drafted = reading?.status === 'draft';
  // Here it is the frame one waits for: a fitted frame whose reading is still a draft is fitted.
  const state = stateOf(drafted ? { state: frame.state, reading: null } : frame);
  const again = sameAs === null ? '' : 'The same file was here already; nothing was stored twice. ';
  return (
    <Line
      kind={state.kind}
      name={<Link href={`/frames/${frame.id}`}>{subjectName(frame)}</Link>}
      file={frame.scan ? `Scan, ${detectorText(frame.scan.detectorMm)} · ${frame.fileName}` : frame.fileName}
      word={state.word}
      at={frame.receivedAt}
      picture={<FramePicture frame={frame} spanMm={spanMm} />}
    >
      {frameIsMoving(frame.state) ? (
        <p className="wide">
          {again}
          {ON_THE_WAY[frame.state]}
        </p>
      ) : reading ? (
        <>
          <span className="s">
            <SaidCheck word={reading.word} />
          </span>
          <p>
            {again}
            {reading.wordText}
          </p>
          {drafted && reading.word === 'look' && !asking ? (
            <span className="do">
              <Button onClick={() => setAsking(true)}>Send as is…</Button>
            </span>
          ) : null}
          {drafted && asking ? (
            <NoteForm onSend={(note) => onSend(frame, note)} onBack={() => setAsking(false)} />
          ) : null}
        </>
      ) : (
        <>
          <span className="s">
            <SaidCheck word="stop" />
          </span>
          <p>
            {again}
            {frame.message}
          </p>
          <span className="do">
            <ChooseFiles
              single
              className="button"
              onFiles={(files) => files[0] && onReplace(frame, files[0])}
            >
              Replace
            </ChooseFiles>
          </span>
        </>
      )}
    </Line>
  );
}

function NoteForm({ onSend, onBack }: { onSend: (note: string) => Promise<void>; onBack: () => void }) {
  const [note, setNote] = useState('');
  const [waiting, setWaiting] = useState(false);
  return (
    <form
      className="note-form"
      onSubmit={(event) => {
        event.preventDefault();
        setWaiting(true);
        void onSend(note).finally(() => setWaiting(false));
      }}
    >
      <Field
        label="Note for the reviewer"
        value={note}
        maxLength={1000}
        autoFocus
        onChange={(event) => setNote(event.target.value)}
      />
      <Button type="submit" busy={waiting} disabled={!note.trim()}>
        Send as is
      </Button>
      <Button kind="quiet" onClick={onBack}>
        Back
      </Button>
    </form>
  );
}

interface ItemLineProps {
  item: UploadItem;
  onRetry: (serial?: string) => void;
  onRemove: () => void;
  onReplace: (file: File) => void;
}

/** How much has left, and how long the rest takes at the pace so far. */
function wayText(item: UploadItem, nowMs: number): string {
  const total = formatBytes(item.file.size);
  if (item.state === 'ready') return `${total}, waits for its turn`;
  const sent = formatBytes(item.sentBytes);
  const seconds = (nowMs - item.startedMs) / 1000;
  if (item.sentBytes === 0 || seconds < 1) return `${sent} of ${total}`;
  const left = ((item.file.size - item.sentBytes) / item.sentBytes) * seconds;
  if (item.sentBytes >= item.file.size) return `${total} sent, being stored`;
  return `${sent} of ${total}, about ${formatNumber(Math.max(1, Math.ceil(left)), 0)} ${left <= 1 ? 'second' : 'seconds'} left`;
}

/** A file still on its way from this browser, or one that did not make it. */
export function ItemLine({ item, nowMs, onRetry, onRemove, onReplace }: ItemLineProps & { nowMs: number }) {
  const failed = item.state === 'failed';
  const name = item.target.serial || item.file.name;
  return (
    <Line
      kind={failed ? 'frame-unreadable' : 'frame-copying'}
      name={name}
      file={item.file.name}
      word={failed ? 'Not copied' : item.state === 'ready' ? 'Waiting its turn' : 'Copying'}
      at={item.addedAt}
      picture={
        failed ? (
          <HollowOrders broken />
        ) : (
          <HollowOrders lit={litFor(item.sentBytes / Math.max(1, item.file.size))} />
        )
      }
    >
      {failed && item.problem ? (
        <>
          <span className="s">
            <SaidCheck word="stop" />
          </span>
          <p>{item.problem.message}</p>
          <FailedActs item={item} onRetry={onRetry} onRemove={onRemove} onReplace={onReplace} />
        </>
      ) : (
        <>
          <p className="wide">{wayText(item, nowMs)}</p>
          <span className="do">
            <Button kind="quiet" onClick={onRemove} aria-label={`Stop copying ${item.file.name}`}>
              Stop
            </Button>
          </span>
        </>
      )}
    </Line>
  );
}

function FailedActs({ item, onRetry, onRemove, onReplace }: ItemLineProps) {
  const [serial, setSerial] = useState(item.target.serial);
  const code = item.problem?.code;
  if (code === 'BAD_INPUT' || code === 'NOT_FOUND') {
    return (
      <form
        className="note-form"
        onSubmit={(event) => {
          event.preventDefault();
          onRetry(serial.trim());
        }}
      >
        <Field
          label="Serial of the unit"
          value={serial}
          maxLength={60}
          onChange={(event) => setSerial(event.target.value)}
        />
        <Button type="submit" disabled={!serial.trim()}>
          Send again
        </Button>
        <Button kind="quiet" onClick={onRemove}>
          Take off the list
        </Button>
      </form>
    );
  }
  const fileAtFault = code === 'TOO_LARGE' || code === 'NOT_A_PICTURE';
  return (
    <span className="do below">
      {fileAtFault ? (
        <ChooseFiles single className="button" onFiles={(files) => files[0] && onReplace(files[0])}>
          Replace
        </ChooseFiles>
      ) : (
        <Button onClick={() => onRetry()}>Send again</Button>
      )}
      <Button kind="quiet" onClick={onRemove} aria-label={`Take ${item.file.name} off the list`}>
        Take off
      </Button>
    </span>
  );
}
