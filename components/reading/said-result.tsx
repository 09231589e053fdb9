'use client';

import { useEffect, useState } from 'react';
import { moveFrom } from '@/lib/domain/move';
import type { PreviewState } from '@/lib/client/use-preview-fit';
import { VERDICT_WORDS, type Judgement, type Medium } from '@/lib/domain/specification';
import type { ReadingView } from '@/lib/domain/views';
import { formatNumber, formatQuantity, placesFor } from '@/lib/quantity/format';

/** A drag makes many results; only the one a person rests on is said. */
const REST_MS = 700;

interface Said {
  wavelengthNm: number | null;
  expandedNm: number | null;
  medium: Medium;
  judgement: Judgement | null;
}

function resultWords({ wavelengthNm, expandedNm, medium, judgement }: Said): string {
  if (wavelengthNm === null) return 'No wavelength';
  const text = expandedNm
    ? formatQuantity(wavelengthNm, expandedNm)
    : { value: formatNumber(wavelengthNm, 2), uncertainty: '' };
  const within = text.uncertainty ? ` plus or minus ${text.uncertainty}` : '';
  const verdict = judgement ? `, ${VERDICT_WORDS[judgement.verdict].toLowerCase()}` : '';
  return `${text.value}${within} nanometres in ${medium}${verdict}`;
}

/** What is read aloud of a change: the result, how far it is from the reading before, the verdict. */
export function changeWords(before: ReadingView | null, preview: PreviewState): string {
  const { fit, problem } = preview;
  if (!fit) return problem ? `No fit with this region. ${problem}` : '';
  const move =
    before?.wavelengthNm != null
      ? moveFrom({ valueNm: before.wavelengthNm, uNm: before.uNm }, fit.wavelengthNm)
      : null;
  if (!move) return `${resultWords(fit)}.`;
  const way = move.nm > 0 ? 'up' : 'down';
  const nm = formatNumber(Math.abs(move.nm), placesFor(fit.expandedNm ?? 0.5) + 1);
  const far = move.inU === null ? '' : `, ${formatNumber(Math.abs(move.inU), 2)} u`;
  return `${resultWords(fit)}. ${way} by ${nm} nanometres${far}.`;
}

interface Props {
  before: ReadingView | null;
  /** A change is on the desk. */
  changed: boolean;
  preview: PreviewState;
}

/** Heard, not seen: each result a person rests on. */
export function SaidResult({ before, changed, preview }: Props) {
  const words = changed && !preview.working ? changeWords(before, preview) : '';
  const [said, setSaid] = useState('');
  useEffect(() => {
    const timer = setTimeout(() => setSaid(words), REST_MS);
    return () => clearTimeout(timer);
  }, [words]);
  return (
    <p className="only-heard" role="status" data-said="result">
      {said}
    </p>
  );
}
