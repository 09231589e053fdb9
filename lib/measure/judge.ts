import { AveragedModel, fitOneSlit, ratioU, type ProfileFit } from '@/lib/fit/fit-profile';
import type { Profile } from '@/lib/fit/profile';
import { ModelPoint, orderAt } from '@/lib/fit/two-slit-model';
import { solveSymmetric } from '@/lib/fit/small-matrix';
import { toModel } from '@/lib/fit/orders';
import type { Spread } from '@/lib/fit/spread';
import { Refused } from '@/lib/imaging/refused';
import type { PlaceFit } from './place';

const FINEST_PX = 2.5;
const FEWEST_FRINGES = 3;
const LEAST_SWING_SIGMAS = 6;
const MOST_RELATIVE_U = 0.02;
const MOST_MISFIT = 0.3;
/** One or two bumps are fringes only where they follow the pattern well. */
const FEW_MISFIT = 0.1;
/** Slits wider than this share of their separation are one slit with a bar in it. */
const MOST_RATIO = 0.8;
const MOST_HARMONIC = 0.2;
/** What a grating of up to five slits leaves of the profile's variance stays below this; walls and pages leave more (simulation). */
const MOST_UNEXPLAINED = 0.05;
const MOST_LOCK = 0.3;
const CLEAN_MISFIT = 0.02;
const LEAST_GAIN = 60;
const LEAST_VISIBILITY = 0.03;
const MOST_VISIBILITY = 1.08;
/** An envelope flatter than this has no end that counts. */
const BOUNDED_RATIO = 0.03;
const MOST_BOW = 0.22;
const MOST_BARREL = 0.03;

export interface Evidence {
  /** Bright orders that can be seen in the region. */
  fringes: number;
  /** Swing of the fringes over its uncertainty. */
  swingSigmas: number;
  /** Root mean square misfit beyond the noise, relative to the fringes' own swing. */
  misfit: number;
  /** Second harmonic over first: 0 for two slits, 0.5 for three. */
  harmonic: number;
  /** Share of the profile's variance that no pattern of this period describes. */
  unexplained: number;
  visibility: number;
  /** Swing at half the fitted frequency over the swing at it: far above 0 where the fit locked on half the spacing. */
  lock: number;
}

/** A fit with its profile, of a place in a frame or of a scan. `half` is half the profile's length. */
export interface FittedPattern {
  band: { fit: ProfileFit; profile: Profile; grid: { half: number } };
}

/** What speaks for two slits in a fitted place. */
export function weigh(place: FittedPattern): Evidence {
  const { fit, profile } = place.band;
  const p = fit.result.parameters;
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  let swing = 0;
  let rest = 0;
  let n = 0;
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    if (
      !model.evaluate(
        p,
        toModel(fit, profile.u[k]),
        profile.node[k] / fit.unitPx,
        profile.nodeWeight[k],
        false,
      )
    )
      continue;
    const w = (fit.unitLight / profile.sigma[k]) ** 2;
    const r = profile.light[k] / fit.unitLight - model.light;
    const e = 0.5 * p[5] * envelopeAt(place, profile.u[k]);
    swing += 0.5 * w * e * e;
    rest += w * r * r;
    n++;
  }
  const harmonics = harmonicsOf(place);
  const c = fit.result.covariance;
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  const uSwing = c === null ? Infinity : Math.sqrt(c[5 * fit.layout.size + 5] * scale);
  return {
    fringes: countFringes(place),
    swingSigmas: p[5] / uSwing,
    misfit: n > 0 && swing > 0 ? Math.sqrt(Math.max(0, rest - n) / swing) : Infinity,
    harmonic: harmonics.second,
    unexplained: harmonics.left,
    visibility: visibilityOf(fit),
    lock: lockOn(place),
  };
}

/** Contrast of the light at the envelope's middle: B/A, less what slits of unequal width lose: (1 - e^2)/(1 + e^2). */
function visibilityOf({ layout, result }: ProfileFit): number {
  const p = result.parameters;
  if (!(p[4] > 0)) return 0;
  const e = layout.unequal < 0 ? 0 : p[layout.unequal];
  return (p[5] / p[4]) * ((1 - e * e) / (1 + e * e));
}

/** Weighted regression of the misfit on E cos(pi m), E sin(pi m): fringes twice as wide as the fitted ones. */
function lockOn(place: FittedPattern): number {
  const { fit, profile } = place.band;
  const p = fit.result.parameters;
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const s = { cc: 0, cs: 0, ss: 0, rc: 0, rs: 0 };
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const x = toModel(fit, profile.u[k]);
    if (!model.evaluate(p, x, profile.node[k] / fit.unitPx, profile.nodeWeight[k], false)) continue;
    const e = envelopeAt(place, profile.u[k]);
    const phase = Math.PI * orderAt(fit.layout, fit.fixed, p, x);
    const c = e * Math.cos(phase);
    const q = e * Math.sin(phase);
    const r = profile.light[k] / fit.unitLight - model.light;
    s.cc += c * c;
    s.cs += c * q;
    s.ss += q * q;
    s.rc += c * r;
    s.rs += q * r;
  }
  const det = s.cc * s.ss - s.cs * s.cs;
  if (!(det > 0) || !(p[5] > 0)) return 0;
  return (2 * Math.hypot(s.ss * s.rc - s.cs * s.rs, s.cc * s.rs - s.cs * s.rc)) / det / p[5];
}

function envelopeAt(place: FittedPattern, u: number): number {
  const { fit } = place.band;
  const p = fit.result.parameters;
  const t = Math.PI * p[2] * (orderAt(fit.layout, fit.fixed, p, toModel(fit, u)) - p[3]);
  return Math.abs(t) < 1e-6 ? 1 : (Math.sin(t) / t) ** 2;
}

/** Bright orders inside the used part of the profile whose envelope is at least 4 % of the highest there. */
function countFringes(place: FittedPattern): number {
  const { fit, profile } = place.band;
  const p = fit.result.parameters;
  const used = new Set<number>();
  const height = new Map<number, number>();
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const m = orderAt(fit.layout, fit.fixed, p, toModel(fit, profile.u[k]));
    used.add(Math.floor(4 * (m - Math.round(m)) + 2) + 8 * Math.round(m));
    height.set(Math.round(m), Math.max(height.get(Math.round(m)) ?? 0, envelopeAt(place, profile.u[k])));
  }
  const top = Math.max(...height.values(), 0);
  let count = 0;
  let first = Infinity;
  let last = -Infinity;
  for (const [m, h] of height) {
    // A fringe counts when light is seen on both sides of its centre.
    const seen = [0, 1, 2, 3].filter((q) => used.has(q + 8 * m)).length;
    if (h > 0.04 * top && seen >= 2) {
      count++;
      first = Math.min(first, m);
      last = Math.max(last, m);
    }
  }
  // Two half fringes at the edges are one fringe, not two.
  const reach = spanInOrders(place, first - 0.5, last + 0.5);
  return Math.min(count, Math.floor(reach + 0.35));
}

/** Length of the used profile between two orders, in orders. */
function spanInOrders(place: FittedPattern, first: number, last: number): number {
  const { fit, profile } = place.band;
  let low = Infinity;
  let high = -Infinity;
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const m = orderAt(fit.layout, fit.fixed, fit.result.parameters, toModel(fit, profile.u[k]));
    low = Math.min(low, Math.max(first, m));
    high = Math.max(high, Math.min(last, m));
  }
  return Math.max(0, high - low);
}

/** Harmonics of the fringes that many slits have; five slits have four. */
const HARMONICS = 4;

/**
 * Regression of the profile on 1, z, E and E cos(pi k m), twice the fringes' harmonics, for a fit of many slits may lock on
 * half their spacing: second harmonic over the first, and what is left of the profile's variance beside all of them.
 */
function harmonicsOf(place: FittedPattern): { second: number; left: number } {
  const { fit, profile, grid } = place.band;
  const p = fit.result.parameters;
  const n = 3 + 2 * HARMONICS;
  const a = new Float64Array(n * n);
  const b = new Float64Array(n);
  const t = new Float64Array(n);
  const total = { n: 0, y: 0, yy: 0 };
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const e = envelopeAt(place, profile.u[k]);
    const phase = Math.PI * orderAt(fit.layout, fit.fixed, p, toModel(fit, profile.u[k]));
    t[0] = 1;
    t[1] = profile.u[k] / grid.half;
    t[2] = e;
    for (let h = 1; h <= 2 * HARMONICS; h++) t[2 + h] = e * Math.cos(h * phase);
    const y = profile.light[k];
    total.n++;
    total.y += y;
    total.yy += y * y;
    for (let i = 0; i < n; i++) {
      b[i] += t[i] * y;
      for (let j = 0; j < n; j++) a[i * n + j] += t[i] * t[j];
    }
  }
  const x = solveSymmetric(a, b, n);
  const first = x === null ? 0 : x[4];
  if (x === null || !(first > 0)) return { second: 0, left: 1 };
  let rest = total.yy;
  for (let i = 0; i < n; i++) rest -= x[i] * b[i];
  return { second: x[6] / first, left: rest / (total.yy - (total.y * total.y) / total.n) };
}

/** A single slit is named only where its side maxima can be seen; otherwise the light is just a spot or an outline. */
function showsLobes(place: FittedPattern, evidence: Evidence): boolean {
  const { fit, grid } = place.band;
  const p = fit.result.parameters;
  const lobe = (p[0] * fit.unitPx) / p[2];
  const enough = evidence.misfit < CLEAN_MISFIT ? 2.1 : 2.6;
  return (
    evidence.misfit < MOST_MISFIT && evidence.swingSigmas > 15 && 2 * grid.half > enough * lobe && p[2] < 1.19
  );
}

/** Does one slit describe the data as well? The second must improve chi-square well beyond its own noise. */
function oneSlitSuffices(oneSlit: number, fit: ProfileFit, evidence: Evidence): boolean {
  const two = fit.result.chiSquare;
  const scale = Math.max(1, two / Math.max(1, fit.result.dof));
  return (
    oneSlit < 1.15 * two + 10 &&
    ((oneSlit - two) / scale < LEAST_GAIN || evidence.visibility < LEAST_VISIBILITY)
  );
}

export function oneSlit(): Refused {
  return new Refused(
    'ONE_SLIT',
    'This is the pattern of a single slit: its middle maximum is twice as wide as the others. Let the beam meet both slits.',
  );
}

/** Throws where the light is that of one slit, or of more than two. */
export function refuseOtherSlits(place: FittedPattern, evidence: Evidence): void {
  const { fit, profile } = place.band;
  if (evidence.harmonic > MOST_HARMONIC) {
    // A wall, a blind or a page is periodic and sharp as well, but no grating's light; nor has its light an end.
    const ratio = fit.result.parameters[2];
    if (!(ratio > BOUNDED_RATIO && ratio < MOST_RATIO && evidence.unexplained < MOST_UNEXPLAINED))
      throw noFringes();
    throw new Refused(
      'MANY_SLITS',
      'The maxima are too sharp for two slits: more than two slits are lit. Use a plate with two slits, or cover the others.',
    );
  }
  if (fit.result.parameters[2] > MOST_RATIO) throw showsLobes(place, evidence) ? oneSlit() : noFringes();
  const doubtful = fit.result.parameters[2] > 0.42 || evidence.misfit > 0.06 || evidence.visibility < 0.1;
  const one = doubtful ? fitOneSlit(profile, fit) : null;
  if (one !== null && oneSlitSuffices(one.chiSquare, fit, evidence))
    throw showsLobes(place, evidence) ? oneSlit() : noFringes();
}

/** Throws the refusal that fits, or returns the evidence of a pattern that can be answered. */
export function judgePlace(place: PlaceFit, spread: Spread | null): Evidence {
  const { fit } = place.band;
  const spacing = fit.result.parameters[0] * fit.unitPx;
  const evidence = weigh(place);
  if (!(evidence.swingSigmas > LEAST_SWING_SIGMAS) || spread === null) throw noFringes();
  if (spacing < FINEST_PX) {
    throw new Refused(
      'TOO_FINE',
      `The fringes are ${spacing.toFixed(1)} px apart; below ${FINEST_PX} px the camera cannot hold them. Move the camera back or use a finer pixel scale.`,
    );
  }
  refuseOtherSlits(place, evidence);
  // Fringes as strong at half the frequency: every second one was taken for two.
  if (evidence.lock > MOST_LOCK) throw noFringes();
  if (tooDeep(fit, evidence)) throw showsLobes(place, evidence) ? oneSlit() : noFringes();
  const bow = Math.abs(place.tilt.bowPx) * 1.5;
  const barrel = Math.abs(place.tilt.barrel);
  if (
    (bow > MOST_BOW * spacing && bow > 6 * place.tilt.uBowPx) ||
    (barrel > MOST_BARREL && barrel > 4 * place.tilt.uBarrel)
  ) {
    throw ringsRefusal();
  }
  if (!(evidence.misfit < MOST_MISFIT)) throw noFringes();
  if (evidence.fringes < FEWEST_FRINGES)
    throw evidence.misfit < FEW_MISFIT ? tooFew(evidence.fringes) : noFringes();
  const u = Math.sqrt(spread.covariance[0]) / fit.result.parameters[0];
  if (!(u < MOST_RELATIVE_U)) {
    throw new Refused(
      'PATTERN_CUT',
      'The part of the pattern in this frame does not fix the spacing. Take a frame with more of the pattern in it.',
    );
  }
  if (fit.result.status !== 'converged' && fit.result.status !== 'stalled') {
    throw new Refused(
      'NOT_CONVERGED',
      'The fit did not settle on one pattern. Choose the region by hand or take the frame again.',
    );
  }
  return evidence;
}

/** Fringes deeper than their own light cannot be: the swing belongs to something else. */
function tooDeep(fit: ProfileFit, evidence: Evidence): boolean {
  const c = fit.result.covariance;
  if (c === null || fit.layout.tone >= 0) return false;
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  const u = ratioU(fit.result.parameters, c, fit.layout.size) * Math.sqrt(scale);
  return evidence.visibility > MOST_VISIBILITY && evidence.visibility - 1 > 5 * u;
}

export function tooFew(fringes: number): Refused {
  return new Refused(
    'TOO_FEW_FRINGES',
    `Only ${fringes} bright ${fringes === 1 ? 'fringe is' : 'fringes are'} in the frame; at least ${FEWEST_FRINGES} are needed. Move the camera nearer or choose a wider region.`,
  );
}

export function noFringes(): Refused {
  return new Refused(
    'NO_FRINGES',
    'No two-slit fringes were found in this frame. Check that the beam meets both slits and that the camera sees the pattern, in focus and still.',
  );
}

export function ringsRefusal(): Refused {
  return new Refused(
    'RINGS',
    'The fringes are bent like rings, so this is not the pattern of two slits. Look for a second reflection, a window or dust in the beam.',
  );
}
