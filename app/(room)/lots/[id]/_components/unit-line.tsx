'use client';

import Link from 'next/link';
import { Mark, SaidVerdict, stateOf } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { ToleranceWhisker } from '@/components/figures/tolerance-whisker';
import type { SetOutcome } from '@/components/reading/actions';
import { OutcomeLine } from '@/components/reading/outcome-line';
import { count } from '@/lib/client/words';
import { readingMayBeFollowed } from '@/lib/domain/life-cycle';
import type { Specification } from '@/lib/domain/specification';
import type { UnitRow } from '@/lib/domain/views';

interface Props {
  unit: UnitRow;
  specification: Specification;
  lotId: number;
  mayOutcome: boolean;
  setOutcome: SetOutcome;
}

/** One unit of a lot: what it stands at, and what became of it. */
export function UnitLine({ unit, specification, lotId, mayOutcome, setOutcome }: Props) {
  const standing = unit.reading;
  const state = standing ? stateOf({ state: 'fitted', reading: standing }) : null;
  // A withdrawn value is on the frame's own page; the unit has none.
  const reading = standing && readingMayBeFollowed(standing.status) ? null : standing;
  return (
    <div className="list-row unit-row" role="listitem">
      <div>
        <Link
          className="name"
          href={`/frames?lot=${lotId}&find=${encodeURIComponent(unit.serial)}&days=all&bench=all`}
        >
          {unit.serial}
        </Link>
        <div className="sub flex items-center gap-2">
          {state ? <Mark kind={state.kind} /> : null}
          {state ? `${state.word}, ` : ''}
          {unit.frames ? count(unit.frames, 'frame') : 'not taken yet'}
        </div>
      </div>
      <div>
        {reading && reading.wavelengthNm !== null ? (
          <Quantity
            value={reading.wavelengthNm}
            expanded={reading.expandedNm}
            medium={reading.medium}
            size="cell"
          />
        ) : (
          <span className="text-small text-ink-3">no value</span>
        )}
      </div>
      <div>
        {reading && reading.wavelengthNm !== null && reading.expandedNm !== null ? (
          <ToleranceWhisker
            specification={specification}
            valueNm={reading.wavelengthNm}
            expandedNm={reading.expandedNm}
            judgement={reading.judgement}
          />
        ) : null}
      </div>
      <div className="pl-2.5">
        {reading?.judgement ? <SaidVerdict verdict={reading.judgement.verdict} /> : null}
      </div>
      <OutcomeLine
        compactFor={unit.serial}
        unitId={unit.id}
        outcome={unit.outcome}
        mayChange={mayOutcome}
        setOutcome={setOutcome}
      />
    </div>
  );
}
