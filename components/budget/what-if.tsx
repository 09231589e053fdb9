'use client';

import { useState } from 'react';
import { SaidVerdict } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { Button } from '@/components/ui/button';
import type { BudgetRow } from '@/lib/domain/reading-result';
import type { Medium, Specification } from '@/lib/domain/specification';
import { combineBudget, withRowUncertainty } from '@/lib/quantity/budget';
import { formatNumber, formatPercent, formatSigned, placesFor } from '@/lib/quantity/format';
import { judge } from '@/lib/quantity/verdict';

interface Props {
  valueNm: number;
  medium: Medium;
  rows: readonly BudgetRow[];
  specification: Specification | null;
}

/** Figures that show a standard uncertainty as it was entered. */
const FIGURES = 3;
/** Degrees of freedom above this change no figure that is shown. */
const MANY = 500;
const written = (u: number) => String(Number(u.toPrecision(FIGURES)));
const parsed = (text: string) => Number(text.trim().replace(',', '.').replace('−', '-'));

/** Every row with its uncertainty open to be tried; nothing of it is kept. */
export function WhatIf({ valueNm, medium, rows, specification }: Props) {
  const [tried, setTried] = useState<Record<string, string>>({});
  const wrong = (key: string) =>
    key in tried &&
    !(tried[key].trim() !== '' && Number.isFinite(parsed(tried[key])) && parsed(tried[key]) >= 0);
  const now = Object.keys(tried)
    .filter((key) => !wrong(key))
    .reduce((budget, key) => withRowUncertainty(budget.rows, key, parsed(tried[key])), combineBudget(rows));
  const before = combineBudget(rows);
  const judged = (budget: typeof now) =>
    specification && judge(valueNm, budget.uNm, budget.dof, budget.expandedNm, specification);
  const changed = Object.keys(tried).length > 0;
  const places = Math.min(6, Math.max(3, placesFor(before.uNm) + 1));
  return (
    <>
      <p className="mb-3 text-small text-ink-2">
        Change a standard uncertainty and see what it is worth. Nothing here is kept.
      </p>
      <div className="what-if-scroll">
        <table className="figures what-if">
          <thead>
            <tr>
              <th scope="col">Part</th>
              <th scope="col" className="num">
                Value
              </th>
              <th scope="col">Standard uncertainty</th>
              <th scope="col" className="num">
                nm for one unit
              </th>
              <th scope="col" className="num">
                nm
              </th>
              <th scope="col" className="num">
                Share
              </th>
            </tr>
          </thead>
          <tbody>
            {now.rows.map((row) => (
              <tr key={row.key}>
                <th scope="row">
                  {row.name} {row.symbol ? <span className="sym">{row.symbol}</span> : null}
                  <small>
                    {row.known}
                    {row.dof === null || row.dof > MANY ? '' : `, ν = ${formatNumber(row.dof, 0)}`}
                  </small>
                </th>
                <td className="num">{row.value === null ? '' : valueText(row)}</td>
                <td>
                  <label className={`try ${wrong(row.key) ? 'wrong' : ''}`}>
                    <span className="only-heard">
                      Standard uncertainty of {row.name}, {row.unit}
                    </span>
                    <input
                      inputMode="decimal"
                      autoComplete="off"
                      aria-invalid={wrong(row.key) || undefined}
                      value={tried[row.key] ?? written(row.u)}
                      onChange={(event) => setTried({ ...tried, [row.key]: event.target.value })}
                    />
                    <span className="unit" aria-hidden="true">
                      {row.unit}
                    </span>
                  </label>
                </td>
                <td className="num">{row.value === null ? '' : formatSigned(row.sensitivity, 3)}</td>
                <td className="num">{formatNumber(row.contributionNm, places)}</td>
                <td className="num">{formatPercent(row.share)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <div className="what-if-sum" aria-live="polite">
        <Standing
          name="As measured"
          value={valueNm}
          medium={medium}
          budget={before}
          judged={judged(before)}
        />
        {changed ? (
          <Standing
            name="With the change"
            value={valueNm}
            medium={medium}
            budget={now}
            judged={judged(now)}
          />
        ) : null}
      </div>
      {Object.keys(tried).some(wrong) ? (
        <p className="mt-2 text-small">A standard uncertainty is a number, 0 or larger.</p>
      ) : null}
      <form method="dialog" className="mt-4 flex justify-end gap-8">
        {changed ? <Button onClick={() => setTried({})}>As measured again</Button> : null}
        <button className="button main">Close</button>
      </form>
    </>
  );
}

function valueText(row: BudgetRow): string {
  return `${formatNumber(row.value ?? 0, Math.min(6, placesFor(row.u)))} ${row.unit}`;
}

interface StandingProps {
  name: string;
  value: number;
  medium: Medium;
  budget: ReturnType<typeof combineBudget>;
  judged: ReturnType<typeof judge> | null;
}

function Standing({ name, value, medium, budget, judged }: StandingProps) {
  return (
    <div>
      <p className="text-small text-ink-2">{name}</p>
      <Quantity value={value} expanded={budget.expandedNm} medium={medium} />
      <p className="text-small text-ink-2">
        k = {formatNumber(budget.k, 2)}
        {budget.dof === null || budget.dof > MANY
          ? ''
          : `, ν = ${formatNumber(budget.dof, budget.dof < 100 ? 1 : 0)}`}
      </p>
      {judged ? <SaidVerdict verdict={judged.verdict} /> : null}
    </div>
  );
}
