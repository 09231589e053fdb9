'use client';

import { useRouter } from 'next/navigation';
import { useState, useTransition } from 'react';
import { Mark } from '@/components/figures/marks';
import { Choice } from '@/components/ui/choice';
import { Chevron } from '@/components/ui/icons';
import { Menu } from '@/components/ui/menu';
import type { ActionAnswer } from '@/lib/domain/errors';
import type { BenchChoice } from '@/lib/domain/views';

export type ChooseBench = (input: { benchId: number | null }) => Promise<ActionAnswer<unknown>>;

/** Setup and fitness of a bench in short lines. */
export function benchLines(bench: BenchChoice): string[] {
  return [
    bench.setupNumber === null ? '' : `setup ${bench.setupNumber}`,
    bench.fitness.text,
    bench.waitingNumber === null ? '' : `setup ${bench.waitingNumber} waits for QA`,
  ].filter(Boolean);
}

export function fitnessMark(bench: BenchChoice) {
  return bench.fitness.word === 'clear' ? null : <Mark kind={`check-${bench.fitness.word}`} />;
}

interface Props {
  benches: BenchChoice[];
  inUse: number | null;
  chooseBench: ChooseBench;
}

/** Bench in use: the default of Intake, Frames and Over time. */
export function BenchPicker({ benches, inUse, chooseBench }: Props) {
  const router = useRouter();
  const [waiting, start] = useTransition();
  const [problem, setProblem] = useState('');
  const name = benches.find((bench) => bench.id === inUse)?.name ?? 'All benches';

  const choose = (benchId: number | null, close: () => void) =>
    start(async () => {
      const answer = await chooseBench({ benchId });
      if (!answer.ok) {
        setProblem(answer.message);
        return;
      }
      setProblem('');
      close();
      router.refresh();
    });

  return (
    <Menu
      label={`Bench in use: ${name}. Change it, or show all benches`}
      anchored={false}
      sheetClass="bench-sheet"
      face={
        <>
          <span>
            <small>Bench in use</small>
            <b>{name}</b>
          </span>
          <Chevron />
        </>
      }
    >
      {(close) => (
        <div role="group" aria-label="Bench in use" aria-busy={waiting}>
          {problem ? (
            <p className="help wrong mb-2" role="alert">
              {problem}
            </p>
          ) : null}
          <div className="choices">
            {benches.map((bench) => (
              <Choice
                key={bench.id}
                chosen={bench.id === inUse}
                onChoose={() => choose(bench.id, close)}
                title={bench.name}
                lines={benchLines(bench)}
                mark={fitnessMark(bench)}
              />
            ))}
            <Choice
              chosen={inUse === null}
              onChoose={() => choose(null, close)}
              title="All benches"
              lines={['Frames and Over time']}
            />
          </div>
        </div>
      )}
    </Menu>
  );
}
