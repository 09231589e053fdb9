import type { Profile } from './profile';
import { solveSymmetric } from './small-matrix';

/** A start for the fit, in px and light of the profile. */
export interface StartValues {
  spacing: number;
  zero: number;
  ratio: number;
  /** Place of the envelope's middle, px. */
  middle: number;
  a: number;
  b: number;
  background: number;
  slope: number;
  /** Weighted sum of squares that is left. */
  rest: number;
}

const RATIOS = [
  0.004, 0.03, 0.05, 0.075, 0.1, 0.13, 0.165, 0.2, 0.235, 0.27, 0.31, 0.36, 0.42, 0.5, 0.6, 0.72,
];
const MOST_POINTS = 420;

interface Thin {
  u: Float64Array;
  y: Float64Array;
  w: Float64Array;
  /** cos and sin of the fringes' phase at the spacing the scan believes in. */
  cos: Float64Array;
  sin: Float64Array;
  spacing: number;
  from: number;
  to: number;
  n: number;
}

/**
 * Scans slit ratio, envelope middle and spacing; for each the linear unknowns (background, slope, A, B cos, B sin) follow
 * exactly from normal equations. Answers the best few that differ, best first.
 */
export function scanStartValues(profile: Profile, spacing: number, keep: number): StartValues[] {
  const thin = thinned(profile, spacing);
  const best: StartValues[] = [];
  const span = thin.to - thin.from;
  const offer = (s: StartValues | null) => {
    if (s === null) return;
    const twin = best.findIndex(
      (o) => Math.abs(Math.log(o.ratio / s.ratio)) < 0.25 && Math.abs(o.middle - s.middle) < 0.5 * spacing,
    );
    if (twin >= 0) {
      if (best[twin].rest <= s.rest) return;
      best.splice(twin, 1);
    }
    best.push(s);
    best.sort((p, q) => p.rest - q.rest);
    best.length = Math.min(best.length, keep);
  };
  for (const ratio of RATIOS) {
    const lobe = spacing / ratio;
    const step = Math.max(span / 48, Math.min(lobe / 3, span / 6));
    for (let middle = thin.from; middle <= thin.to + 1e-9; middle += step)
      offer(solveAt(thin, spacing, ratio, middle));
  }
  const fringes = span / spacing;
  const spacings = [-0.5, -0.25, 0.25, 0.5].map((d) => spacing * (1 + d / Math.max(2, fringes)));
  for (const s of [...best]) for (const sp of spacings) offer(solveAt(thin, sp, s.ratio, s.middle));
  for (const s of [...best]) {
    for (let r = 0.5; r > 0.1; r /= 2) {
      const here = best[0] ?? s;
      for (const [dr, dm] of [
        [1, 0],
        [-1, 0],
        [0, 1],
        [0, -1],
      ]) {
        offer(
          solveAt(
            thin,
            here.spacing,
            Math.min(0.95, here.ratio * 1.25 ** (dr * 2 * r)),
            here.middle + dm * r * 0.3 * (spacing / Math.max(0.05, here.ratio)),
          ),
        );
      }
    }
  }
  return best;
}

function thinned(profile: Profile, spacing: number): Thin {
  const used: number[] = [];
  for (let i = 0; i < profile.size; i++) if (Number.isFinite(profile.sigma[i])) used.push(i);
  const from = profile.u[used[0]];
  const to = profile.u[used[used.length - 1]];
  const wanted = Math.min(MOST_POINTS, Math.max(60, Math.ceil(((to - from) / spacing) * 6)));
  const group = Math.max(1, Math.floor(used.length / wanted));
  const n = Math.ceil(used.length / group);
  const line = () => new Float64Array(n);
  const thin: Thin = { u: line(), y: line(), w: line(), cos: line(), sin: line(), spacing: 0, from, to, n };
  for (let g = 0; g < n; g++) {
    let w = 0;
    for (let k = g * group; k < Math.min(used.length, (g + 1) * group); k++) {
      const i = used[k];
      const wi = 1 / (profile.sigma[i] * profile.sigma[i]);
      w += wi;
      thin.u[g] += wi * profile.u[i];
      thin.y[g] += wi * profile.light[i];
    }
    thin.u[g] /= w;
    thin.y[g] /= w;
    thin.w[g] = w;
  }
  turnTo(thin, spacing);
  return thin;
}

function turnTo(thin: Thin, spacing: number): void {
  thin.spacing = spacing;
  for (let i = 0; i < thin.n; i++) {
    const phase = (2 * Math.PI * thin.u[i]) / spacing;
    thin.cos[i] = Math.cos(phase);
    thin.sin[i] = Math.sin(phase);
  }
}

const NORMAL = new Float64Array(25);
const RIGHT = new Float64Array(5);
const TERMS = new Float64Array(5);

function solveAt(thin: Thin, spacing: number, ratio: number, middle: number): StartValues | null {
  if (spacing !== thin.spacing) turnTo(thin, spacing);
  const a = NORMAL.fill(0);
  const b = RIGHT.fill(0);
  const t = TERMS;
  const centre = (thin.from + thin.to) / 2;
  const half = (thin.to - thin.from) / 2;
  let yy = 0;
  for (let i = 0; i < thin.n; i++) {
    const d = thin.u[i] - middle;
    const x = (Math.PI * ratio * d) / spacing;
    const s = Math.abs(x) < 1e-6 ? 1 : Math.sin(x) / x;
    const e = s * s;
    t[0] = 1;
    t[1] = (thin.u[i] - centre) / half;
    t[2] = e;
    t[3] = e * thin.cos[i];
    t[4] = e * thin.sin[i];
    const w = thin.w[i];
    const y = thin.y[i];
    yy += w * y * y;
    for (let j = 0; j < 5; j++) {
      const wt = w * t[j];
      b[j] += wt * y;
      for (let k = j; k < 5; k++) a[j * 5 + k] += wt * t[k];
    }
  }
  for (let j = 0; j < 5; j++) {
    a[j * 5 + j] *= 1 + 1e-9;
    for (let k = 0; k < j; k++) a[j * 5 + k] = a[k * 5 + j];
  }
  const x = solveSymmetric(a, b, 5);
  if (x === null || !(x[2] > 0)) return null;
  const swing = Math.hypot(x[3], x[4]);
  // A swing above its own mean, or a background below darkness, is no light: those starts are worth less.
  let rest = yy;
  for (let j = 0; j < 5; j++) rest -= x[j] * b[j];
  const over = Math.max(0, swing / x[2] - 1.15);
  const turn = Math.atan2(x[4], x[3]) / (2 * Math.PI);
  return {
    spacing,
    // The fringe nearest the envelope's middle.
    zero: middle + (turn - middle / spacing - Math.round(turn - middle / spacing)) * spacing,
    ratio,
    middle,
    a: 2 * x[2],
    b: 2 * swing,
    background: x[0],
    slope: x[1],
    rest: Math.max(0, rest) * (1 + over),
  };
}
