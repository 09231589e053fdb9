/**
 * The two-slit pattern with everything that may be laid over it, and its derivatives.
 *
 *   order(x)  m = X / sqrt(1 + (curve X)^2) / spacing,  X = (x - zero) / (1 + chirp (x - zero))
 *   fringes   F = 1/2 * [A (s1^2 + s2^2)/2 + B fade(m) s1 s2 cos(2 pi m)],  fade = exp(-(width m)^2 / 2)
 *             s1,2 = (1 +- unequal) sinc((1 +- unequal) ratio (m - middle)): slits of the widths (1 +- unequal) w;
 *             without that term both are sinc(ratio (m - middle))
 *   light     I = (background(x) + F)^tone,  background = sum of Legendre polynomials over the region
 *
 * With d, L, lambda and the scale s the order is d sin(theta)/lambda with X/L = tan(theta) exactly; spacing = lambda L/(d s)
 * and curve = s/L. The envelope has its own middle (in orders): the beam need not meet the plate squarely.
 * sinc(t) = sin(pi t)/(pi t). Lengths are in units chosen by the caller, near one spacing; light near one.
 * Source of the pattern: OpenStax University Physics vol. 3, ch. 4 (double-slit diffraction).
 */

export interface ModelTerms {
  /** Number of background polynomials, 1 and up. */
  background: number;
  /** Wide-angle curvature s/L as a parameter (with a prior, or free). */
  curve: boolean;
  chirp: boolean;
  tone: boolean;
  fade: boolean;
  unequal: boolean;
}

/** Index of every parameter in the vector; -1 for one that is not there. */
export interface ModelLayout {
  terms: ModelTerms;
  size: number;
  spacing: 0;
  zero: 1;
  ratio: 2;
  middle: 3;
  a: 4;
  b: 5;
  background: 6;
  curve: number;
  chirp: number;
  tone: number;
  fade: number;
  unequal: number;
}

export function layoutOf(terms: ModelTerms): ModelLayout {
  let next = 6 + terms.background;
  const take = (on: boolean) => (on ? next++ : -1);
  const curve = take(terms.curve);
  const chirp = take(terms.chirp);
  const tone = take(terms.tone);
  const fade = take(terms.fade);
  const unequal = take(terms.unequal);
  return {
    terms,
    size: next,
    spacing: 0,
    zero: 1,
    ratio: 2,
    middle: 3,
    a: 4,
    b: 5,
    background: 6,
    curve,
    chirp,
    tone,
    fade,
    unequal,
  };
}

/** Values that hold where their term is not fitted. */
export interface ModelFixed {
  curve: number;
  /** Middle and half length of the region, for the background's polynomials. */
  centre: number;
  half: number;
  /** A detector that moves through the pattern: places about its middle and their weights, which add up to one. */
  detector?: { offset: Float64Array; weight: Float64Array };
}

/** Below this argument of the sine its series is exact to the last digit. */
const SMALL = 1e-3;

/** sinc(t) = sin(pi t)/(pi t). */
function sinc(t: number): number {
  const pt = Math.PI * t;
  return Math.abs(pt) < SMALL ? 1 - (pt * pt) / 6 : Math.sin(pt) / pt;
}

/** The derivative of sinc by t, with its value. */
function sincSlope(t: number, value: number): number {
  const pt = Math.PI * t;
  return Math.abs(pt) < SMALL ? (-Math.PI * pt) / 3 : (Math.PI * (Math.cos(pt) - value)) / pt;
}

/** Value and derivatives at one place; reused between calls. */
export class ModelPoint {
  /** Light, fringe part alone (before tone), envelope with background (before tone), derivative along x. */
  light = 0;
  fringes = 0;
  envelope = 0;
  slope = 0;
  order = 0;
  readonly gradient: Float64Array;
  private readonly legendre: Float64Array;
  private even = 0;
  private cross = 0;
  private evenSlope = 0;
  private crossSlope = 0;
  private evenUnequal = 0;
  private crossUnequal = 0;

  constructor(
    readonly layout: ModelLayout,
    readonly fixed: ModelFixed,
  ) {
    this.gradient = new Float64Array(layout.size);
    this.legendre = new Float64Array(Math.max(2, layout.terms.background));
  }

  /** Fills the fields at `x`; false where the model has no value. */
  evaluate(p: Float64Array, x: number, wantGradient: boolean): boolean {
    const { layout: at, fixed } = this;
    const spacing = p[0];
    const curve = at.curve < 0 ? fixed.curve : p[at.curve];
    const d = x - p[1];
    const bend = at.chirp < 0 ? 1 : 1 + p[at.chirp] * d;
    if (!(bend > 0.05) || !(spacing > 0)) return false;
    const X = d / bend;
    const flat = 1 / Math.sqrt(1 + curve * curve * X * X);
    const m = (X * flat) / spacing;
    const dmdX = (flat * flat * flat) / spacing;
    const dmdx = dmdX / (bend * bend);
    const tau = m - p[3];
    const unequal = at.unequal >= 0;
    let even: number;
    let cross: number;
    let evenSlope: number;
    let crossSlope: number;
    if (unequal) {
      this.slits(p, tau);
      ({ even, cross, evenSlope, crossSlope } = this);
    } else {
      const t = p[2] * tau;
      const value = sinc(t);
      even = value * value;
      cross = even;
      evenSlope = 2 * value * sincSlope(t, value);
      crossSlope = evenSlope;
    }
    const phase = 2 * Math.PI * m;
    const cos = Math.cos(phase);
    const sin = Math.sin(phase);
    const width = at.fade < 0 ? 0 : p[at.fade];
    const fade = width === 0 ? 1 : Math.exp(-0.5 * width * width * m * m);
    const swing = p[5] * fade * cos;
    const fringes = 0.5 * (p[4] * even + swing * cross);
    const z = (x - fixed.centre) / fixed.half;
    const background = this.backgroundAt(p, z);
    const plain = background + fringes;
    // d(fringes)/dm through phase and fade, and through the envelope's argument
    const dm = 0.5 * cross * p[5] * fade * (-2 * Math.PI * sin - width * width * m * cos);
    const dt = 0.5 * (p[4] * evenSlope + swing * crossSlope);
    const dfdm = dm + p[2] * dt;
    let gain = 1;
    let light = plain;
    if (at.tone >= 0) {
      if (!(plain > 1e-9)) return false;
      light = plain ** p[at.tone];
      gain = (p[at.tone] * light) / plain;
    }
    this.light = light;
    this.fringes = fringes;
    this.envelope = background + 0.5 * (p[4] * even + Math.abs(p[5]) * fade * cross);
    this.order = m;
    this.slope = gain * (dfdm * dmdx + this.backgroundSlope(p));
    if (!wantGradient) return true;
    const g = this.gradient;
    g[0] = (-gain * dfdm * m) / spacing;
    g[1] = -gain * dfdm * dmdx;
    g[2] = gain * dt * tau;
    g[3] = -gain * dt * p[2];
    g[4] = gain * 0.5 * even;
    g[5] = gain * 0.5 * cross * fade * cos;
    for (let k = 0; k < at.terms.background; k++) g[6 + k] = gain * this.legendre[k];
    if (at.curve >= 0) g[at.curve] = (-gain * dfdm * curve * X * X * X * flat * flat * flat) / spacing;
    if (at.chirp >= 0) g[at.chirp] = -gain * dfdm * dmdX * X * X;
    if (at.tone >= 0) g[at.tone] = light * Math.log(plain);
    if (at.fade >= 0) g[at.fade] = -gain * 0.5 * cross * p[5] * fade * cos * width * m * m;
    if (unequal) g[at.unequal] = gain * 0.5 * (p[4] * this.evenUnequal + swing * this.crossUnequal);
    return true;
  }

  /** Fills the parts of slits of two widths: (s1^2 + s2^2)/2 and s1 s2, their derivatives by ratio * tau and by unequal. */
  private slits(p: Float64Array, tau: number): void {
    const { unequal: index } = this.layout;
    const a = 1 + p[index];
    const b = 1 - p[index];
    const t = p[2] * tau;
    const value1 = sinc(a * t);
    const slope1 = sincSlope(a * t, value1);
    const s1 = a * value1;
    const d1 = a * a * slope1;
    const e1 = value1 + a * t * slope1;
    const value2 = sinc(b * t);
    const slope2 = sincSlope(b * t, value2);
    const s2 = b * value2;
    const d2 = b * b * slope2;
    const e2 = -value2 - b * t * slope2;
    this.even = 0.5 * (s1 * s1 + s2 * s2);
    this.cross = s1 * s2;
    this.evenSlope = s1 * d1 + s2 * d2;
    this.crossSlope = d1 * s2 + s1 * d2;
    this.evenUnequal = s1 * e1 + s2 * e2;
    this.crossUnequal = e1 * s2 + s1 * e2;
  }

  private backgroundAt(p: Float64Array, z: number): number {
    const n = this.layout.terms.background;
    const l = this.legendre;
    l[0] = 1;
    l[1] = z;
    let sum = p[6];
    if (n > 1) sum += p[7] * z;
    for (let k = 2; k < n; k++) {
      l[k] = ((2 * k - 1) * z * l[k - 1] - (k - 1) * l[k - 2]) / k;
      sum += p[6 + k] * l[k];
    }
    return sum;
  }

  /** d(background)/dx, from the polynomials the value just filled: P'_k = P'_{k-2} + (2k - 1) P_{k-1}. */
  private backgroundSlope(p: Float64Array): number {
    const n = this.layout.terms.background;
    if (n < 2) return 0;
    let before = 0;
    let here = 1;
    let sum = p[7];
    for (let k = 2; k < n; k++) {
      const next = before + (2 * k - 1) * this.legendre[k - 1];
      before = here;
      here = next;
      sum += p[6 + k] * next;
    }
    return sum / this.fixed.half;
  }
}

/** Order at x for given parameters (no light): the phase of the model in turns. */
export function orderAt(layout: ModelLayout, fixed: ModelFixed, p: Float64Array, x: number): number {
  const curve = layout.curve < 0 ? fixed.curve : p[layout.curve];
  const d = x - p[1];
  const X = layout.chirp < 0 ? d : d / (1 + p[layout.chirp] * d);
  return X / Math.sqrt(1 + curve * curve * X * X) / p[0];
}

/** Place of order m: X = L tan(asin(m lambda/d)), then the perspective undone; NaN where the order does not exist. */
export function placeOfOrder(layout: ModelLayout, fixed: ModelFixed, p: Float64Array, m: number): number {
  const curve = layout.curve < 0 ? fixed.curve : p[layout.curve];
  const sine = m * p[0];
  const inside = 1 - curve * curve * sine * sine;
  if (!(inside > 0)) return NaN;
  const X = sine / Math.sqrt(inside);
  if (layout.chirp < 0) return p[1] + X;
  const rest = 1 - p[layout.chirp] * X;
  return rest > 0 ? p[1] + X / rest : NaN;
}
