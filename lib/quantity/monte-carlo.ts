import type { BudgetRow, Shape } from '@/lib/domain/reading-result';
import { drawStudent, randomFrom, type Random } from './random';
import { COVERAGE } from './student';

/** One input of a model as it is drawn. */
export interface Drawn {
  value: number;
  /**
   * Standard uncertainty. With finite degrees of freedom it is the scale of a t distribution (JCGM 101, 6.4.9),
   * whose standard deviation is larger.
   */
  u: number;
  /** Absent: normal, or Student's t where `dof` is finite. */
  shape?: Shape;
  dof?: number | null;
}

export interface Propagated {
  draws: number;
  mean: number;
  /** Standard deviation of the draws. */
  u: number;
  /** Ends of the interval, of equal probability to each side. */
  low: number;
  high: number;
  /** Ends of the shortest interval of the same coverage. */
  shortestLow: number;
  shortestHigh: number;
}

/** Half width of a rectangle, a triangle and an arcsine over their standard deviation (JCGM 100:2008, 4.3.7, 4.3.9, H.1.3.4). */
const HALF_WIDTHS: Record<Shape, number> = {
  rectangular: Math.sqrt(3),
  triangular: Math.sqrt(6),
  'u-shaped': Math.SQRT2,
};

/** Standard uncertainty of what lies within ± `half` by its shape: a/√3, a/√6, a/√2. */
export function uOfHalfWidth(half: number, shape: Shape): number {
  return half / HALF_WIDTHS[shape];
}

/** One value of an input. */
export function draw(random: Random, { value, u, shape, dof }: Drawn): number {
  if (shape === undefined) {
    const t = dof === null || dof === undefined ? random.normal() : drawStudent(random, dof);
    return value + u * t;
  }
  const half = u * HALF_WIDTHS[shape];
  if (shape === 'rectangular') return value + half * (2 * random.uniform() - 1);
  if (shape === 'triangular') return value + half * (random.uniform() - random.uniform());
  return value + half * Math.cos(Math.PI * random.uniform());
}

/**
 * Propagation of distributions by drawing: the model is evaluated at `draws` sets of inputs.
 * Source: JCGM 101:2008, clauses 6.4 and 7. Throws RangeError for fewer than 1000 draws (nothing to take ends from).
 *
 * @param inputs what is drawn, in the order the model takes it
 * @param model result of one set of inputs
 * @param coverage probability of both intervals, 95.45 % where nothing else is said
 */
export function propagateByDrawing(
  inputs: readonly Drawn[],
  model: (x: Float64Array) => number,
  draws: number,
  random: Random,
  coverage = COVERAGE,
): Propagated {
  if (!(draws >= 1000)) throw new RangeError('At least 1000 draws are needed.');
  const y = new Float64Array(draws);
  const x = new Float64Array(inputs.length);
  let mean = 0;
  for (let n = 0; n < draws; n += 1) {
    for (let i = 0; i < inputs.length; i += 1) x[i] = draw(random, inputs[i]);
    y[n] = model(x);
    mean += (y[n] - mean) / (n + 1);
  }
  let square = 0;
  for (const value of y) square += (value - mean) ** 2;
  y.sort();
  const inside = Math.min(draws - 1, Math.round(coverage * draws));
  const first = Math.floor((draws - inside) / 2);
  let best = 0;
  for (let i = 1; i + inside < draws; i += 1) {
    if (y[i + inside] - y[i] < y[best + inside] - y[best]) best = i;
  }
  return {
    draws,
    mean,
    u: Math.sqrt(square / (draws - 1)),
    low: y[first],
    high: y[Math.min(draws - 1, first + inside)],
    shortestLow: y[best],
    shortestHigh: y[best + inside],
  };
}

/** What a drawn check of a budget says, beside the budget's own U. */
export interface MonteCarlo {
  draws: number;
  uNm: number;
  /** Half the width of the 95.45 % interval. */
  expandedNm: number;
  lowNm: number;
  highNm: number;
  /** Both ends agree with y ± U to within TOLERANCE of U. */
  agrees: boolean;
}

export const BUDGET_DRAWS = 200_000;

/** U is given to two figures: half a unit of the second is at most 5 % of it. 200 000 draws fix the ends to about 0.6 %. */
const TOLERANCE = 0.05;
/** An input is a factor or a divisor of the result when its elasticity c·x/y is 1 or −1 to this. */
const FACTOR = 1e-6;

/** Rows of a frame's own effects, and readings of before shapes were kept, say it in words. */
function shapeOf({ shape, known }: BudgetRow): Shape | undefined {
  return shape ?? (known.startsWith('rectangular') ? 'rectangular' : undefined);
}

/**
 * Draws a budget. Inputs whose elasticity is ±1 are factors and divisors of a product, evaluated as such; what else there is
 * adds to it by its sensitivity. The seed is any text of 32 or more hexadecimal digits.
 * The comparison of the two intervals is that of JCGM 101:2008, clause 8, with a tolerance of its own.
 */
export function drawBudget(
  rows: readonly BudgetRow[],
  valueNm: number,
  expandedNm: number,
  seed: string,
  draws = BUDGET_DRAWS,
): MonteCarlo {
  const powers = rows.map((row) => {
    const elasticity = row.value ? (row.sensitivity * row.value) / valueNm : 0;
    return Math.abs(Math.abs(elasticity) - 1) < FACTOR ? Math.sign(elasticity) : 0;
  });
  const inputs = rows.map((row, i): Drawn => {
    const { dof } = row;
    const shape = shapeOf(row);
    // A factor is drawn relative to its value, everything else as its effect.
    return powers[i] === 0
      ? { value: 0, u: Math.abs(row.sensitivity * row.u), shape, dof }
      : { value: 1, u: row.u / Math.abs(row.value ?? 1), shape, dof };
  });
  const drawn = propagateByDrawing(
    inputs,
    (x) => {
      let product = valueNm;
      let sum = 0;
      for (let i = 0; i < x.length; i += 1) {
        if (powers[i] === 0) sum += x[i];
        else if (powers[i] > 0) product *= x[i];
        else product /= x[i];
      }
      return product + sum;
    },
    draws,
    randomFrom(seed),
  );
  const off = Math.max(
    Math.abs(valueNm - expandedNm - drawn.low),
    Math.abs(valueNm + expandedNm - drawn.high),
  );
  return {
    draws,
    uNm: drawn.u,
    expandedNm: (drawn.high - drawn.low) / 2,
    lowNm: drawn.low,
    highNm: drawn.high,
    agrees: off <= TOLERANCE * expandedNm,
  };
}
