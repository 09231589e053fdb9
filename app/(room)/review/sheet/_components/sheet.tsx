'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useEffect, useRef, useState, type FormEvent } from 'react';
import { FringeStrip } from '@/components/figures/fringe-strip';
import { Mark, SaidVerdict } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { spanForMm } from '@/components/figures/strip-scale';
import { ToleranceWhisker } from '@/components/figures/tolerance-whisker';
import type { AcceptSheet } from '@/components/reading/actions';
import { useRecentPassword } from '@/lib/client/use-recent-password';
import { Button } from '@/components/ui/button';
import { Field, Tick } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { useSubmit } from '@/lib/client/use-submit';
import { count, specificationOf, subjectLine } from '@/lib/client/words';
import type { QueueRow } from '@/lib/domain/review-queue';

interface Props {
  rows: QueueRow[];
  passwordUntil: string | null;
  acceptSheet: AcceptSheet;
}

/** Clean readings to be looked through; what was seen and is still chosen can be signed together. */
export function Sheet({ rows, passwordUntil, acceptSheet }: Props) {
  const router = useRouter();
  const [out, setOut] = useState<ReadonlySet<number>>(new Set());
  const [seen, see] = useSeen();
  const [password, setPassword] = useState('');
  const [done, setDone] = useState<Awaited<ReturnType<AcceptSheet>> | null>(null);
  const submit = useSubmit<SheetAnswer>();
  const recent = useRecentPassword(passwordUntil);
  const chosen = rows.filter(({ readingId }) => !out.has(readingId));
  const unseen = chosen.filter(({ readingId }) => !seen.has(readingId)).length;
  const spanMm = spanForMm(rows.map(({ reading }) => reading));
  const sign = (event: FormEvent) => {
    event.preventDefault();
    const readings = chosen.map(({ readingId, version }) => ({ readingId, version }));
    submit.run(
      () => acceptSheet({ readings, password }),
      (value) => {
        setPassword('');
        setDone({ ok: true, value });
        router.refresh();
      },
    );
  };
  const toggle = (id: number) =>
    setOut((before) => {
      const next = new Set(before);
      if (!next.delete(id)) next.add(id);
      return next;
    });
  return (
    <form onSubmit={sign}>
      {done?.ok ? <Told {...done.value} /> : null}
      <ul className="sheet" aria-label="Clean readings">
        {rows.map((row) => (
          <Tile
            key={row.readingId}
            row={row}
            spanMm={spanMm}
            chosen={!out.has(row.readingId)}
            onChoose={() => toggle(row.readingId)}
            onSeen={see}
          />
        ))}
      </ul>
      <div className="sheet-foot">
        <p className="text-small text-ink-2" role="status">
          {unseen
            ? `${count(unseen, 'reading')} not looked at yet: go on to the end of the sheet.`
            : chosen.length
              ? 'Each gets a signature of its own, with your name, role and the time.'
              : 'Choose at least one reading.'}
        </p>
        {recent && !submit.fields.password ? null : (
          <div className="w-[240px]">
            <Field
              label="Your password signs them"
              type="password"
              autoComplete="current-password"
              value={password}
              error={submit.fields.password}
              onChange={(event) => setPassword(event.target.value)}
            />
          </div>
        )}
        <Button
          kind="main"
          type="submit"
          busy={submit.waiting}
          disabled={unseen > 0 || !chosen.length || (!recent && !password)}
        >
          Sign and accept {chosen.length}
        </Button>
        {submit.message ? (
          <p className="help wrong" role="alert">
            {submit.message}
          </p>
        ) : null}
      </div>
    </form>
  );
}

type SheetAnswer = Extract<Awaited<ReturnType<AcceptSheet>>, { ok: true }>['value'];

/** What was signed, and what could not be, by name. */
function Told({ accepted, refused }: SheetAnswer) {
  return (
    <div className="mb-3">
      <Notice
        live
        stop={refused.length > 0}
        mark={<Mark kind={refused.length ? 'check-look' : 'reading-accepted'} />}
        title={`${count(accepted, 'reading')} accepted${refused.length ? `, ${refused.length} not` : ''}`}
      >
        {refused.map(({ name, message }) => `${name}: ${message}`).join(' ')}
      </Notice>
    </div>
  );
}

/** The readings that have been in sight, or under the keyboard, for a moment. */
function useSeen(): [ReadonlySet<number>, (id: number) => void] {
  const [seen, setSeen] = useState<ReadonlySet<number>>(new Set());
  return [seen, (id) => setSeen((before) => (before.has(id) ? before : new Set(before).add(id)))];
}

interface TileProps {
  row: QueueRow;
  spanMm: number;
  chosen: boolean;
  onChoose: () => void;
  onSeen: (id: number) => void;
}

/** Long enough to be looked at; what only rushes by is not seen. */
const LOOK_MS = 400;

function Tile({ row, spanMm, chosen, onChoose, onSeen }: TileProps) {
  const place = useRef<HTMLLIElement>(null);
  const told = useRef(onSeen);
  useEffect(() => {
    told.current = onSeen;
  });
  const { readingId, reading } = row;
  useEffect(() => {
    const element = place.current;
    if (!element) return undefined;
    let timer: ReturnType<typeof setTimeout> | undefined;
    const watch = new IntersectionObserver(
      ([entry]) => {
        clearTimeout(timer);
        if (entry.isIntersecting) timer = setTimeout(() => told.current(readingId), LOOK_MS);
      },
      { threshold: 0.9 },
    );
    watch.observe(element);
    return () => {
      clearTimeout(timer);
      watch.disconnect();
    };
  }, [readingId]);
  const specification = specificationOf(row.subject);
  return (
    <li ref={place} className={chosen ? 'tile' : 'tile out'}>
      <FringeStrip
        strip={reading.strip}
        spanMm={spanMm}
        nm={reading.wavelengthNm}
        label={`Fringe strip of ${row.name}`}
      />
      <div className="flex items-baseline justify-between gap-2">
        <Link className="link font-semibold" href={`/review/${readingId}`} prefetch={false}>
          {row.name}
        </Link>
        {reading.judgement ? <SaidVerdict verdict={reading.judgement.verdict} /> : null}
      </div>
      <p className="sub">{subjectLine(row.subject)}</p>
      {reading.wavelengthNm !== null ? (
        <Quantity value={reading.wavelengthNm} expanded={reading.expandedNm} medium={reading.medium} />
      ) : null}
      {specification && reading.wavelengthNm !== null && reading.expandedNm !== null ? (
        <ToleranceWhisker
          specification={specification}
          valueNm={reading.wavelengthNm}
          expandedNm={reading.expandedNm}
          judgement={reading.judgement}
        />
      ) : null}
      <Tick
        label={`Accept ${row.name}`}
        checked={chosen}
        onChange={onChoose}
        onFocus={() => onSeen(readingId)}
      />
    </li>
  );
}
