export type Medium = 'air' | 'vacuum';
/** Guard band rule: none (simple acceptance), U, 1.645 u, or a width of the specification's own. */
export type DecisionRule = 'simple' | 'guard-expanded' | 'guard-one-sided' | 'guard-own';

export interface Specification {
  name: string;
  nominalNm: number;
  medium: Medium;
  /** Limits; either may be absent, not both. */
  lowerNm: number | null;
  upperNm: number | null;
  rule: DecisionRule;
  /** Only for guard-own. */
  ownGuardNm: number | null;
  /** No verdict when U > ratio x half tolerance. */
  ratio: number;
  /** Half tolerance where only one limit exists. */
  halfToleranceNm: number;
}

export const VERDICTS = ['within', 'undecided', 'outside', 'no-verdict'] as const;
export type Verdict = (typeof VERDICTS)[number];
export const VERDICT_WORDS: Record<Verdict | 'none', string> = {
  within: 'Within',
  undecided: 'Undecided',
  outside: 'Outside',
  'no-verdict': 'No verdict',
  none: 'No result',
};

/** A verdict with what led to it. */
export interface Judgement {
  verdict: Verdict;
  guardNm: number;
  /** Probability of conformity (JCGM 106), 0 to 1. */
  conformity: number;
  /** One sentence: how it is reached. */
  because: string;
}
