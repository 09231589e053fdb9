/** The order in which readings come to review, and why. */
import type { FindingWord } from './reading-result';
import type { Verdict } from './specification';
import type { Instant, ReadingBrief, Subject } from './views';

/** Gravest first: a queue is worked from its beginning. */
export const RISKS = ['stop', 'limit', 'moved', 'look', 'new-supplier', 'rest'] as const;
export type Risk = (typeof RISKS)[number];

export const RISK_WORDS: Record<Risk, string> = {
  stop: 'Stop',
  limit: 'Near a limit',
  moved: 'Value moved',
  look: 'Looks',
  'new-supplier': 'New supplier',
  rest: 'The rest',
};

export interface RiskFacts {
  verdict: Verdict | null;
  word: FindingWord;
  wordText: string;
  /** No lot of this supplier but this one has an accepted reading. */
  newSupplier: boolean;
  /** A person moved the value so far that it needs a reason. */
  moved: boolean;
}

const LIMIT_TEXT: Record<Exclude<Verdict, 'within'>, string> = {
  undecided: 'The interval reaches into the guard band.',
  outside: 'The interval lies outside a limit.',
  'no-verdict': 'The bench cannot decide this tolerance.',
};

/** The gravest reason to look at a reading closely, as a group and a sentence. */
export function riskOf({ verdict, word, wordText, newSupplier, moved }: RiskFacts): {
  risk: Risk;
  because: string;
} {
  if (word === 'stop') return { risk: 'stop', because: wordText };
  if (verdict !== null && verdict !== 'within') return { risk: 'limit', because: LIMIT_TEXT[verdict] };
  if (moved) return { risk: 'moved', because: 'A region moved the value by more than 0.3 u.' };
  if (word === 'look') return { risk: 'look', because: wordText };
  if (newSupplier)
    return { risk: 'new-supplier', because: 'No other lot of this supplier has been accepted yet.' };
  return { risk: 'rest', because: 'Nothing stands against it.' };
}

/** Which part of the queue a person works through; it stays in the address. */
export interface QueueFilter {
  risk: Risk | null;
  benchId: number | null;
  /** Serial, lot or file name contains. */
  find: string;
}

export const WHOLE_QUEUE: QueueFilter = { risk: null, benchId: null, find: '' };

export interface QueueRow {
  readingId: number;
  frameId: number;
  version: number;
  name: string;
  subject: Subject;
  bench: string;
  reading: ReadingBrief;
  risk: Risk;
  because: string;
  sentBy: string;
  sentAt: Instant;
}

export interface QueueView {
  rows: QueueRow[];
  total: number;
  page: number;
  pages: number;
  /** How many stand in each group under the other filters. */
  counts: Record<Risk, number>;
  /** When the one that waits longest was sent. */
  oldestAt: Instant | null;
  benches: { id: number; name: string }[];
}
