'use client';

import { benchLines, fitnessMark } from '@/components/bar/bench-picker';
import { Choice } from '@/components/ui/choice';
import { Chevron } from '@/components/ui/icons';
import { Menu } from '@/components/ui/menu';
import type { BenchChoice, LotRow, SourceView } from '@/lib/domain/views';
import { FindSubject, lotLines, sourceLines, type Chosen } from './subject-choice';

interface Props {
  bench: BenchChoice | null;
  benches: BenchChoice[];
  onBench: (benchId: number) => void;
  lots: LotRow[];
  sources: SourceView[];
  chosen: Chosen;
  onChoose: (chosen: Chosen) => void;
}

/** Bench and lot on a phone: two halves of one bar. */
export function PhoneFrom({ bench, benches, onBench, lots, sources, chosen, onChoose }: Props) {
  const lot = chosen?.kind === 'lot' ? lots.find((l) => l.id === chosen.id) : undefined;
  const source = chosen?.kind === 'source' ? sources.find((s) => s.id === chosen.id) : undefined;
  const name = lot ? `Lot ${lot.number}` : (source?.name ?? 'No lot');
  const line = lot ? lotLines(lot)[0] : source ? sourceLines(source)[1] : 'choose one';
  return (
    <div className="phone-from">
      <Menu
        label={`Bench in use: ${bench?.name ?? 'none'}`}
        anchored={false}
        buttonClass="half"
        sheetClass="bench-sheet"
        face={<Half name={bench?.name ?? 'No bench'} line={bench?.fitness.text ?? 'choose one'} />}
      >
        {(close) => (
          <div className="choices" role="group" aria-label="Bench in use">
            {benches.map((b) => (
              <Choice
                key={b.id}
                chosen={b.id === bench?.id}
                title={b.name}
                lines={benchLines(b)}
                mark={fitnessMark(b)}
                onChoose={() => {
                  onBench(b.id);
                  close();
                }}
              />
            ))}
          </div>
        )}
      </Menu>
      <Menu
        label={`Lot or source: ${name}`}
        anchored={false}
        buttonClass="half"
        sheetClass="bench-sheet"
        face={<Half name={name} line={line} />}
      >
        {(close) => (
          <FindSubject
            lots={lots}
            sources={sources}
            chosen={chosen}
            onChoose={(next) => {
              onChoose(next);
              close();
            }}
          />
        )}
      </Menu>
    </div>
  );
}

function Half({ name, line }: { name: string; line: string }) {
  return (
    <>
      <span className="min-w-0">
        <b>{name}</b>
        <small>{line}</small>
      </span>
      <Chevron />
    </>
  );
}
