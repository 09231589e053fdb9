import Link from 'next/link';
import { SaidCheck } from '@/components/figures/marks';
import { When } from '@/components/figures/when';
import { count } from '@/lib/client/words';
import type { CheckView, ReferencesView } from '@/lib/domain/references';
import { explanationText } from '@/lib/quantity/explanation-text';
import { formatNumber, formatQuantity, formatSigned, placesFor } from '@/lib/quantity/format';
import { DeviationBar } from './deviation-bar';

/** The newest checks, each with its deviation against the limit, and what would explain one outside. */
export function CheckList({ view }: { view: ReferencesView }) {
  if (!view.checks.length) {
    return (
      <p className="text-small text-ink-2">
        No check yet. Take a frame of a reference source on this bench; once its reading is accepted, the
        deviation stands here.
      </p>
    );
  }
  const reachNm = 1.15 * Math.max(...view.checks.map((c) => Math.abs(c.deviationNm) + c.expandedNm), 0.001);
  return (
    <>
      <ol className="checks" aria-label="Reference checks, newest first">
        {view.checks.map((check) => (
          <li key={check.id}>
            <span className="when">
              <Link href={`/frames/${check.frameId}?reading=${check.readingId}`}>
                <When at={check.at} />
              </Link>
              <small>
                {check.source}, setup {check.setupNumber}
              </small>
            </span>
            <span className="figure">
              <DeviationBar {...check} reachNm={reachNm} />
            </span>
            <span className="amount">
              {deviationText(check)} nm
              <small>{limitText(check)}</small>
            </span>
            <SaidCheck word={check.inside ? 'clear' : 'stop'}>
              {check.inside ? 'Inside' : 'Outside'}
            </SaidCheck>
            {check.explanations.length ? (
              <p className="why">{check.explanations.map(explanationText).join(' Or: ')}</p>
            ) : null}
          </li>
        ))}
      </ol>
      <p className="text-small text-ink-3">
        {view.many > view.checks.length
          ? `The newest ${view.checks.length} of ${count(view.many, 'check')}. `
          : ''}
        {view.remount
          ? `Their scatter within one setup: ${formatNumber(view.remount.uNm, placesFor(view.remount.uNm))} nm, ν = ${view.remount.dof}.`
          : ''}
      </p>
    </>
  );
}

function deviationText({ deviationNm, expandedNm }: CheckView): string {
  const { uncertainty } = formatQuantity(0, expandedNm);
  return `${formatSigned(deviationNm, placesFor(expandedNm))} ± ${uncertainty}`;
}

function limitText({ limitNm, ownLimit }: CheckView): string {
  return `limit ± ${formatQuantity(0, limitNm).uncertainty}, ${ownLimit ? 'the bench’s own' : 'U of both'}`;
}
