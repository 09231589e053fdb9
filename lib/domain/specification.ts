export type Medium = 'air' | 'vacuum';
/** Guard band rule: none (simple acceptance), U, 1.645 u, or a width of the specification's own. */
export type DecisionRule = 'simple' | 'guard-expanded' | 'guard-one-sided' | 'guard-own';

/** How a wavelength is found: from the bench's constants, or beside a reference source on the same setup. */
export const METHODS = ['absolute', 'comparison'] as const;
export type Method = (typeof METHODS)[number];

/** A value by the method that was not chosen, in the same medium and at the same temperature. */
export interface OtherValue {
  method: Method;
  valueNm: number;
  expandedNm: number | null;
  k: number | null;
}

/** A wavelength holds at a temperature of the unit: how it moves with that temperature. */
export interface ReferenceTemperature {
  temperatureC: number;
  nmPerK: number;
  /** Standard uncertainty of nmPerK. */
  uNmPerK: number;
}

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
  /** Absent or null: the limits hold at whatever temperature the unit has. */
  atTemperature?: ReferenceTemperature | null;
  /** Absent or null: as the bench is used. */
  method?: Method | null;
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
