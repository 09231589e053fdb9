/**
 * The solver against certified values: NIST Statistical Reference Datasets, nonlinear regression.
 * From both published starts: parameters and standard deviations to six digits, or a reported failure.
 */
import { leastSquares, type LeastSquaresProblem } from '@/lib/fit/least-squares';
import certified from '@/fixtures/certified/nist-nonlinear.json';

/** A value with its derivatives with respect to every parameter (forward differentiation, exact). */
class Dual {
  constructor(
    readonly v: number,
    readonly d: number[],
  ) {}
  static of(v: number, n: number): Dual {
    return new Dual(v, new Array<number>(n).fill(0));
  }
  private with(v: number, own: number, o?: Dual, other = 0): Dual {
    return new Dual(
      v,
      this.d.map((x, i) => own * x + (o ? other * o.d[i] : 0)),
    );
  }
  add(o: Dual | number): Dual {
    return typeof o === 'number' ? this.with(this.v + o, 1) : this.with(this.v + o.v, 1, o, 1);
  }
  mul(o: Dual | number): Dual {
    return typeof o === 'number' ? this.with(this.v * o, o) : this.with(this.v * o.v, o.v, o, this.v);
  }
  div(o: Dual): Dual {
    return this.with(this.v / o.v, 1 / o.v, o, -this.v / (o.v * o.v));
  }
  exp(): Dual {
    return this.with(Math.exp(this.v), Math.exp(this.v));
  }
  cos(): Dual {
    return this.with(Math.cos(this.v), -Math.sin(this.v));
  }
  sin(): Dual {
    return this.with(Math.sin(this.v), Math.cos(this.v));
  }
  pow(o: Dual): Dual {
    const value = Math.pow(this.v, o.v);
    return this.with(value, o.v * Math.pow(this.v, o.v - 1), o, value * Math.log(this.v));
  }
}

type Model = (b: Dual[], x: number) => Dual;
const bell = (amplitude: Dual, centre: Dual, width: Dual, x: number): Dual => {
  const t = centre.mul(-1).add(x).div(width);
  return amplitude.mul(t.mul(t).mul(-1).exp());
};
const gauss: Model = (b, x) =>
  b[0]
    .mul(b[1].mul(-x).exp())
    .add(bell(b[2], b[3], b[4], x))
    .add(bell(b[5], b[6], b[7], x));
const rational: Model = (b, x) => {
  const top = b[0]
    .add(b[1].mul(x))
    .add(b[2].mul(x * x))
    .add(b[3].mul(x ** 3));
  return top.div(
    b[4]
      .mul(x)
      .add(1)
      .add(b[5].mul(x * x))
      .add(b[6].mul(x ** 3)),
  );
};
const saturating: Model = (b, x) => b[0].mul(b[1].mul(-x).exp().mul(-1).add(1));
const MODELS: Record<string, Model> = {
  Misra1a: saturating,
  BoxBOD: saturating,
  Gauss1: gauss,
  Gauss2: gauss,
  Gauss3: gauss,
  Thurber: rational,
  Hahn1: rational,
  ENSO: (b, x) => {
    const year = (2 * Math.PI * x) / 12;
    const turn = (period: Dual) => Dual.of(2 * Math.PI * x, period.d.length).div(period);
    return b[0]
      .add(b[1].mul(Math.cos(year)))
      .add(b[2].mul(Math.sin(year)))
      .add(b[4].mul(turn(b[3]).cos()))
      .add(b[5].mul(turn(b[3]).sin()))
      .add(b[7].mul(turn(b[6]).cos()))
      .add(b[8].mul(turn(b[6]).sin()));
  },
  Lanczos3: (b, x) =>
    b[0]
      .mul(b[1].mul(-x).exp())
      .add(b[2].mul(b[3].mul(-x).exp()))
      .add(b[4].mul(b[5].mul(-x).exp())),
  MGH09: (b, x) =>
    b[0].mul(b[1].mul(x).add(x * x)).div(
      b[2]
        .mul(x)
        .add(x * x)
        .add(b[3]),
    ),
  Eckerle4: (b, x) => {
    const t = b[2].mul(-1).add(x).div(b[1]);
    return b[0].div(b[1]).mul(t.mul(t).mul(-0.5).exp());
  },
  Rat43: (b, x) => {
    const one = Dual.of(1, b.length);
    return b[0].div(b[2].mul(-x).add(b[1]).exp().add(1).pow(one.div(b[3])));
  },
};

interface CertifiedSet {
  name: string;
  degreesOfFreedom: number;
  residualSumOfSquares: number;
  parameters: { start1: number; start2: number; certified: number; u: number }[];
  x: number[];
  y: number[];
}

function problemOf(set: CertifiedSet): LeastSquaresProblem {
  const model = MODELS[set.name];
  const n = set.parameters.length;
  return {
    residuals: set.y.length,
    evaluate(p, r, jacobian) {
      const b = Array.from(
        p,
        (v, k) =>
          new Dual(
            v,
            Array.from({ length: n }, (_, i) => (i === k ? 1 : 0)),
          ),
      );
      for (let i = 0; i < set.y.length; i++) {
        const f = model(b, set.x[i]);
        if (!Number.isFinite(f.v) || !f.d.every(Number.isFinite)) return false;
        r[i] = set.y[i] - f.v;
        if (jacobian) for (let k = 0; k < n; k++) jacobian[k * set.y.length + i] = f.d[k];
      }
      return true;
    },
  };
}

/** Agreeing digits asked for: six, five for Lanczos3, whose residuals are at the rounding of its data. */
const digitsFor = (name: string) => (name === 'Lanczos3' ? 5 : 6);
/** Start 1 of BoxBOD lies on a plain where the second parameter has no effect: reported, not answered. */
const MAY_FAIL = new Set(['BoxBOD from start 1']);

describe('NIST nonlinear regression sets', () => {
  const sets = certified.sets as CertifiedSet[];
  for (const set of sets) {
    for (const start of ['start1', 'start2'] as const) {
      it(`${set.name} from ${start}`, () => {
        const fit = leastSquares(
          problemOf(set),
          set.parameters.map((q) => q[start]),
          { maxEvaluations: 5000 },
        );
        if (fit.status !== 'converged') {
          expect(MAY_FAIL.has(`${set.name} from ${start === 'start1' ? 'start 1' : 'start 2'}`)).toBe(true);
          return;
        }
        const tolerance = 10 ** -digitsFor(set.name);
        expect(fit.dof).toBe(set.degreesOfFreedom);
        expect(Math.abs(fit.chiSquare / set.residualSumOfSquares - 1)).toBeLessThan(
          set.name === 'Lanczos3' ? 1e-5 : 1e-8,
        );
        const covariance = fit.covariance;
        if (covariance === null) throw new Error('A converged fit has a covariance.');
        set.parameters.forEach((q, k) => {
          const u = Math.sqrt((covariance[k * set.parameters.length + k] * fit.chiSquare) / fit.dof);
          expect(Math.abs(fit.parameters[k] / q.certified - 1)).toBeLessThan(tolerance);
          expect(Math.abs(u / q.u - 1)).toBeLessThan(tolerance);
        });
      });
    }
  }
});
