'use client';

import { useState } from 'react';
import { BudgetBars } from '@/components/figures/budget-bars';
import { MEDIUM_SHORT, Quantity } from '@/components/figures/quantity';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import type { BudgetRow } from '@/lib/domain/reading-result';
import { METHOD_WORDS } from '@/lib/client/words';
import type { Medium, Method, OtherValue, Specification } from '@/lib/domain/specification';
import { formatConcise, formatNumber, formatQuantity, placesFor } from '@/lib/quantity/format';
import type { MonteCarlo } from '@/lib/quantity/monte-carlo';
import { WhatIf } from './what-if';

export interface BudgetProps {
  wavelengthNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  medium: Medium;
  budget: readonly BudgetRow[];
  corrections: readonly string[];
  method: Method;
  /** The value by the other method, where there is one. */
  other: OtherValue | null;
  specification: Specification | null;
  /** Only of a kept reading: it is drawn when it is kept. */
  monteCarlo: MonteCarlo | null;
}

/** What the ± is made of, what drawing it gives, and a sheet to try other uncertainties; or why there is no ±. */
export function Budget(props: BudgetProps) {
  const {
    wavelengthNm,
    uNm,
    expandedNm,
    medium,
    budget,
    corrections,
    method,
    other,
    specification,
    monteCarlo,
  } = props;
  const [open, setOpen] = useState(false);
  const whole = budget.length && wavelengthNm !== null && uNm !== null && expandedNm !== null;
  return (
    <div className="sec" style={{ marginTop: 6 }}>
      <div className="cap">
        <h2>What the ± is made of</h2>
        <span>nm, k = 1</span>
      </div>
      {whole ? (
        <>
          <BudgetBars rows={budget} uNm={uNm} expandedNm={expandedNm} />
          <p className="budget-note">
            {formatConcise(wavelengthNm, uNm)} nm ({MEDIUM_SHORT[medium]}), k = 1.{' '}
            {monteCarlo ? drawnText(monteCarlo, expandedNm) : null} {corrections.join(' ')}
          </p>
          {other ? (
            <Methods value={wavelengthNm} expanded={expandedNm} {...{ medium, method, other }} />
          ) : null}
          <Button kind="quiet" className="text-small!" onClick={() => setOpen(true)}>
            All rows, and what if…
          </Button>
          <Dialog open={open} onClose={() => setOpen(false)} title="What the ± is made of" wide>
            <WhatIf valueNm={wavelengthNm} medium={medium} rows={budget} specification={specification} />
          </Dialog>
        </>
      ) : (
        <p className="text-small text-ink-2">The setup states no uncertainty, so this reading has none.</p>
      )}
    </div>
  );
}

interface MethodsProps {
  value: number;
  expanded: number;
  medium: Medium;
  method: Method;
  other: OtherValue;
}

/** Both methods beside each other, the one that counts first. */
function Methods({ value, expanded, medium, method, other }: MethodsProps) {
  return (
    <table className="compare methods">
      <thead className="only-heard">
        <tr>
          <th scope="col">Method</th>
          <th scope="col">Value</th>
        </tr>
      </thead>
      <tbody>
        <tr>
          <th scope="row">{METHOD_WORDS[method]}</th>
          <td>
            <Quantity value={value} expanded={expanded} medium={medium} size="cell" />
          </td>
        </tr>
        <tr>
          <th scope="row">{METHOD_WORDS[other.method]}</th>
          <td>
            <Quantity value={other.valueNm} expanded={other.expandedNm} medium={medium} size="cell" />
          </td>
        </tr>
      </tbody>
    </table>
  );
}

/** "Monte Carlo agrees: U 0.74, 0.73 by 200 000 draws." */
export function drawnText({ agrees, draws, expandedNm: drawn }: MonteCarlo, expandedNm: number): string {
  const places = placesFor(expandedNm);
  const both = `U\u00a0${formatQuantity(0, expandedNm).uncertainty}, ${formatNumber(drawn, places)} by ${formatNumber(draws, 0)} draws`;
  if (agrees) return `Monte Carlo agrees: ${both}.`;
  const why =
    drawn < expandedNm
      ? 'One part with a sharp edge decides here, so U is on the safe side.'
      : 'Few degrees of freedom or a strong bend: give the larger of the two.';
  return `Monte Carlo does not agree: ${both}. ${why}`;
}
