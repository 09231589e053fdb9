'use client';

import { useState } from 'react';
import { Choice } from '@/components/ui/choice';
import { Dialog } from '@/components/ui/dialog';
import { Field } from '@/components/ui/field';
import { nominalText } from '@/lib/client/words';
import { dueOf } from '@/lib/domain/due';
import { SOURCE_KIND_WORDS } from '@/lib/domain/source';
import type { LotRow, SourceView } from '@/lib/domain/views';
import { formatNumber } from '@/lib/quantity/format';

/** What the frames to come show: units of a lot, or a reference source. */
export type Chosen = { kind: 'lot'; id: number } | { kind: 'source'; id: number } | null;

interface Props {
  lots: LotRow[];
  sources: SourceView[];
  chosen: Chosen;
  onChoose: (chosen: Chosen) => void;
}

export function lotLines(lot: LotRow): string[] {
  return [nominalText(lot.specification), `${lot.unitsTaken} of ${lot.units} units taken`];
}

export function sourceLines(source: SourceView): string[] {
  const due = dueOf(source.due, new Date());
  return [
    source.isReference ? 'reference source' : SOURCE_KIND_WORDS[source.kind],
    `${formatNumber(source.vacuumNm, 2)} nm (vac)`,
    due.word === 'clear' ? '' : due.word === 'stop' ? `${due.text}: take, not accept` : due.text,
  ].filter(Boolean);
}

/** Two lots at hand, the rest behind one choice. */
export function SubjectChoice({ lots, sources, chosen, onChoose }: Props) {
  const [open, setOpen] = useState(false);
  const chosenLot = chosen?.kind === 'lot' ? lots.find((lot) => lot.id === chosen.id) : undefined;
  const chosenSource =
    chosen?.kind === 'source' ? sources.find((source) => source.id === chosen.id) : undefined;
  const firstTwo = lots.slice(0, 2);
  const near = chosenLot && !firstTwo.includes(chosenLot) ? [chosenLot, ...firstTwo.slice(0, 1)] : firstTwo;
  return (
    <div>
      <span className="label" id="lot-label">
        Lot
      </span>
      <div className="choices" role="group" aria-labelledby="lot-label">
        {chosenSource ? (
          <Choice
            chosen
            title={chosenSource.name}
            lines={sourceLines(chosenSource)}
            onChoose={() => setOpen(true)}
          />
        ) : null}
        {near.slice(0, chosenSource ? 1 : 2).map((lot) => (
          <Choice
            key={lot.id}
            chosen={chosen?.kind === 'lot' && chosen.id === lot.id}
            title={`Lot ${lot.number}`}
            lines={lotLines(lot)}
            onChoose={() => onChoose({ kind: 'lot', id: lot.id })}
          />
        ))}
        <Choice
          chosen={false}
          title="Another"
          lines={['find a lot by number', 'or a reference source']}
          onChoose={() => setOpen(true)}
        />
      </div>
      <Dialog open={open} onClose={() => setOpen(false)} title="Lot or reference source">
        <FindSubject
          lots={lots}
          sources={sources}
          chosen={chosen}
          onChoose={(next) => {
            onChoose(next);
            setOpen(false);
          }}
        />
      </Dialog>
    </div>
  );
}

export function FindSubject({ lots, sources, chosen, onChoose }: Props) {
  const [find, setFind] = useState('');
  const has = (text: string) => text.toLowerCase().includes(find.trim().toLowerCase());
  const lotsFound = lots.filter((lot) => has(`${lot.number} ${lot.supplier} ${lot.specification.name}`));
  const sourcesFound = sources.filter((source) => has(source.name));
  return (
    <div className="grid gap-4">
      <Field
        label="Number or name"
        type="search"
        value={find}
        onChange={(event) => setFind(event.target.value)}
      />
      <div className="choices grid-cols-2" role="group" aria-label="Lots and sources">
        {lotsFound.slice(0, 12).map((lot) => (
          <Choice
            key={`lot-${lot.id}`}
            chosen={chosen?.kind === 'lot' && chosen.id === lot.id}
            title={`Lot ${lot.number}`}
            lines={lotLines(lot)}
            onChoose={() => onChoose({ kind: 'lot', id: lot.id })}
          />
        ))}
        {sourcesFound.map((source) => (
          <Choice
            key={`source-${source.id}`}
            chosen={chosen?.kind === 'source' && chosen.id === source.id}
            title={source.name}
            lines={sourceLines(source)}
            onChoose={() => onChoose({ kind: 'source', id: source.id })}
          />
        ))}
      </div>
      {lotsFound.length + sourcesFound.length === 0 ? (
        <p className="text-ink-2">No open lot and no source matches “{find}”.</p>
      ) : null}
      {lotsFound.length > 12 ? (
        <p className="text-small text-ink-2">{lotsFound.length - 12} more. Type more of the number.</p>
      ) : null}
    </div>
  );
}
