/**
 * Risks of deciding by measurement: global consumer's and producer's risk.
 * Source: JCGM 106:2012, 9.5, equations (17) to (20): the product's own spread is the prior, the measuring system's the
 * conditional distribution.
 */
import { normalCdf } from './student';

/** How the measurand itself is spread over the items. */
export interface Prior {
  density: (y: number) => number;
  from: number;
  to: number;
}

export interface Limits {
  /** Either may be absent. */
  lower: number | null;
  upper: number | null;
}

export interface Risks {
  /** Share of all items that do not conform. */
  nonconforming: number;
  /** Share of all items that are accepted and do not conform. */
  consumer: number;
  /** Share of all items that are rejected and do conform. */
  producer: number;
}

const REACH = 9;

export function normalPrior(mean: number, sd: number): Prior {
  return {
    density: (y) => Math.exp(-0.5 * ((y - mean) / sd) ** 2) / (sd * Math.sqrt(2 * Math.PI)),
    from: mean - REACH * sd,
    to: mean + REACH * sd,
  };
}

/**
 * @param u standard uncertainty of one measurement, normal and without bias
 * @param tolerance limits of the items @param acceptance limits of the measured value
 * Throws RangeError for u that is not positive.
 */
export function globalRisks(prior: Prior, u: number, tolerance: Limits, acceptance: Limits): Risks {
  if (!(u > 0)) throw new RangeError('The uncertainty of a measurement is larger than 0.');
  const accepted = (y: number) =>
    (acceptance.upper === null ? 1 : normalCdf((acceptance.upper - y) / u)) -
    (acceptance.lower === null ? 0 : normalCdf((acceptance.lower - y) / u));
  const low = Math.max(prior.from, tolerance.lower ?? prior.from);
  const high = Math.min(prior.to, tolerance.upper ?? prior.to);
  const { density } = prior;
  // The integrand bends within u of an acceptance limit, so the pieces end at the limits and are cut finer than u.
  const outside = (f: (y: number) => number) =>
    integral(f, prior.from, low, u) + integral(f, high, prior.to, u);
  return {
    nonconforming: outside(density),
    consumer: outside((y) => density(y) * accepted(y)),
    producer: integral((y) => density(y) * (1 - accepted(y)), low, high, u),
  };
}

const LEAST_STEPS = 400;
const MOST_STEPS = 40_000;

/** Simpson's rule; 0 where the piece is empty. */
function integral(f: (y: number) => number, from: number, to: number, scale: number): number {
  if (!(to > from)) return 0;
  const n = 2 * Math.ceil(Math.min(MOST_STEPS, Math.max(LEAST_STEPS, (8 * (to - from)) / scale)) / 2);
  const h = (to - from) / n;
  let sum = f(from) + f(to);
  for (let i = 1; i < n; i += 1) sum += (i % 2 === 1 ? 4 : 2) * f(from + i * h);
  return (sum * h) / 3;
}
