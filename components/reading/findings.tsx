'use client';

import { useState } from 'react';
import { CHECK_WORDS, Mark } from '@/components/figures/marks';
import type { Finding } from '@/lib/domain/reading-result';
import { count } from '@/lib/client/words';

const RANK = { stop: 0, look: 1, clear: 2 } as const;

export function sortedFindings(findings: readonly Finding[]): Finding[] {
  return [...findings].sort((a, b) => RANK[a.word] - RANK[b.word]);
}

/** "1 look, 5 clear" */
export function findingsText(findings: readonly Finding[], answered = 0): string {
  const of = (word: Finding['word']) => findings.filter((f) => f.word === word).length;
  const looks = of('look') - answered;
  return [
    of('stop') ? count(of('stop'), 'stop') : '',
    looks > 0 ? count(looks, 'look') : '',
    answered > 0 ? `${answered} answered` : '',
    of('clear') ? `${of('clear')} clear` : '',
  ]
    .filter(Boolean)
    .join(', ');
}

/** One finding in its four parts: seen, how much, what was done, what one can do. */
export function FindingText({ finding }: { finding: Finding }) {
  return (
    <div className="finding">
      <Mark kind={`check-${finding.word}`} />
      <p>
        <span className="only-heard">{CHECK_WORDS[finding.word]}: </span>
        <b>{finding.seen}</b> {finding.size} {finding.done} {finding.remedy}
        <ElseWhere finding={finding} />
      </p>
    </div>
  );
}

function ElseWhere({ finding }: { finding: Finding }) {
  const other = (['width', 'visibility'] as const).filter((m) => finding[m] && finding[m] !== finding.word);
  if (!other.length) return null;
  const name = { width: 'slit width', visibility: 'visibility' };
  return (
    <>
      {' '}
      {other.map((m) => `For the ${name[m]}: ${CHECK_WORDS[finding[m] ?? 'clear'].toLowerCase()}.`).join(' ')}
    </>
  );
}

/** The clear checks in one line, opened on demand. */
export function ClearFindings({ findings }: { findings: readonly Finding[] }) {
  const [open, setOpen] = useState(false);
  const clear = findings.filter((f) => f.word === 'clear');
  if (!findings.length) return <p className="text-small text-ink-2">This reading carries no checks.</p>;
  if (!clear.length) return null;
  return (
    <div className="rest">
      {open ? (
        <ul className="grid gap-2">
          {clear.map((finding) => (
            <li key={finding.check}>
              <FindingText finding={finding} />
            </li>
          ))}
        </ul>
      ) : (
        <div className="finding">
          <Mark kind="check-clear" />
          <p>{count(clear.length, 'check is clear', 'checks are clear')}.</p>
        </div>
      )}
      <button
        type="button"
        className="link ml-[26px] min-h-[44px] px-1 text-small text-ink-2"
        aria-expanded={open}
        onClick={() => setOpen(!open)}
      >
        {open ? 'Close' : 'Open'}
      </button>
    </div>
  );
}

/** All checks as they are, without answers: the technician's view, and the view of what is decided. */
export function Findings({ findings }: { findings: readonly Finding[] }) {
  const grave = sortedFindings(findings).filter((f) => f.word !== 'clear');
  return (
    <div className="sec">
      <div className="cap">
        <h2>Checks</h2>
        <span>{findingsText(findings)}</span>
      </div>
      {grave.map((finding) => (
        <div key={finding.check} className={finding.word === 'stop' ? 'ask stop' : 'ask'}>
          <FindingText finding={finding} />
        </div>
      ))}
      <ClearFindings findings={findings} />
    </div>
  );
}
