'use client';

import { ShortChoice } from '@/components/ui/choice';
import { Field } from '@/components/ui/field';
import type { Finding } from '@/lib/domain/reading-result';
import { ClearFindings, FindingText, findingsText, sortedFindings } from './findings';

export interface Answer {
  answer: 'accept-as-is' | 'set-aside' | null;
  reason: string;
}
export type Answers = Record<string, Answer>;

export const NO_ANSWER: Answer = { answer: null, reason: '' };

export function isAnswered(answer: Answer | undefined): boolean {
  return answer !== undefined && answer.answer !== null && answer.reason.trim() !== '';
}

/** Why Accept is closed on account of the checks; null when they leave it open. */
export function whyChecksClose(findings: readonly Finding[], answers: Answers): string | null {
  if (findings.some((f) => f.word === 'stop')) return 'A stop cannot be accepted. Return it with a reason.';
  const looks = findings.filter((f) => f.word === 'look');
  const open = looks.filter((f) => !isAnswered(answers[f.check]));
  if (open.some((f) => answers[f.check]?.answer)) return 'Accept opens once there is a reason.';
  if (open.length)
    return looks.length === 1
      ? 'Accept opens once the look is answered.'
      : `Accept opens once ${open.length === looks.length ? 'the' : `${open.length} more`} looks are answered.`;
  return null;
}

interface Props {
  findings: readonly Finding[];
  answers: Answers;
  onAnswer: (check: string, answer: Answer) => void;
}

/** Each look with its two answers and a reason; the clear checks in one line. */
export function LookAnswers({ findings, answers, onAnswer }: Props) {
  const sorted = sortedFindings(findings);
  const answered = sorted.filter((f) => f.word === 'look' && isAnswered(answers[f.check])).length;
  return (
    <div className="sec">
      <div className="cap">
        <h2>Checks</h2>
        <span aria-live="polite">{findingsText(findings, answered)}</span>
      </div>
      {sorted.map((finding) =>
        finding.word === 'clear' ? null : (
          <Ask
            key={finding.check}
            finding={finding}
            answer={answers[finding.check] ?? NO_ANSWER}
            onAnswer={onAnswer}
          />
        ),
      )}
      <ClearFindings findings={findings} />
    </div>
  );
}

interface AskProps {
  finding: Finding;
  answer: Answer;
  onAnswer: (check: string, answer: Answer) => void;
}

function Ask({ finding, answer, onAnswer }: AskProps) {
  if (finding.word === 'stop') {
    return (
      <div className="ask stop">
        <FindingText finding={finding} />
      </div>
    );
  }
  const choose = (word: Answer['answer']) => onAnswer(finding.check, { ...answer, answer: word });
  return (
    <div className="ask">
      <FindingText finding={finding} />
      <div className="two-words" role="group" aria-label={`Answer: ${finding.seen}`}>
        <ShortChoice chosen={answer.answer === 'accept-as-is'} onChoose={() => choose('accept-as-is')}>
          Accept as is
        </ShortChoice>
        <ShortChoice chosen={answer.answer === 'set-aside'} onChoose={() => choose('set-aside')}>
          Set it aside
        </ShortChoice>
      </div>
      <Field
        label={`Reason for the answer: ${finding.seen}`}
        labelHidden
        placeholder="Reason, in a few words"
        maxLength={1000}
        value={answer.reason}
        onChange={(event) => onAnswer(finding.check, { ...answer, reason: event.target.value })}
      />
    </div>
  );
}
