import type { Finding } from '@/lib/domain/reading-result';
import type { FindingContext } from './finding-context';
import { frameFindings } from './findings-frame';
import { geometryFindings } from './findings-geometry';
import { patternFindings } from './findings-pattern';

const RANK = { stop: 0, look: 1, clear: 2 } as const;

/** The checks of a frame in four parts each, the gravest first. */
export function findingsOf(context: FindingContext): Finding[] {
  const all = [...frameFindings(context), ...geometryFindings(context), ...patternFindings(context)];
  return all
    .map((f, i) => ({ f, i }))
    .sort((a, b) => RANK[a.f.word] - RANK[b.f.word] || a.i - b.i)
    .map(({ f }) => f);
}
