import type { Finding } from '@/lib/domain/reading-result';
import type { FindingContext, PatternContext } from './finding-context';
import { frameFindings } from './findings-frame';
import { geometryFindings } from './findings-geometry';
import { patternFindings } from './findings-pattern';

const RANK = { stop: 0, look: 1, clear: 2 } as const;

/** The checks of a frame in four parts each, the gravest first. */
export function findingsOf(context: FindingContext): Finding[] {
  return gravestFirst([...frameFindings(context), ...geometryFindings(context), ...patternFindings(context)]);
}

/** One line for a reading: its gravest finding, or that nothing stands against it. */
export function messageFor(take: PatternContext['take'], findings: readonly Finding[]): string {
  const worst = findings.find((f) => f.word === 'stop') ?? findings.find((f) => f.word === 'look');
  return worst ? worst.message : `The ${take} is fit for use.`;
}

export function gravestFirst(findings: readonly Finding[]): Finding[] {
  return findings
    .map((f, i) => ({ f, i }))
    .sort((a, b) => RANK[a.f.word] - RANK[b.f.word] || a.i - b.i)
    .map(({ f }) => f);
}
