import { AveragedModel, type ProfileFit, type RippleStart } from './fit-profile';
import type { Profile } from './profile';
import { ModelPoint } from './two-slit-model';

/** Frequencies tried, relative to the fringes' own; those nearer to it than one turn over the region cannot be told apart. */
const FROM = 0.3;
const TO = 3;
const STEPS_PER_TURN = 3;
/** Chi-square that the best wave must take away, in units of what is left. */
const LEAST_GAIN = 30;

/**
 * A weak wave that multiplies the light, looked for in the misfit: for each frequency q the least-squares amplitudes of
 * light * cos(2 pi q x) and light * sin(2 pi q x). Null where none takes enough of chi-square away.
 */
export function findRipple(profile: Profile, fit: ProfileFit): RippleStart | null {
  const model = new AveragedModel(new ModelPoint(fit.layout, fit.fixed));
  const x: number[] = [];
  const light: number[] = [];
  const rest: number[] = [];
  for (let k = 0; k < profile.size; k++) {
    if (!Number.isFinite(profile.sigma[k])) continue;
    const at = (profile.u[k] - fit.originPx) / fit.unitPx;
    const node = profile.node[k] / fit.unitPx;
    if (!model.evaluate(fit.result.parameters, at, node, profile.nodeWeight[k], false)) continue;
    const w = fit.unitLight / profile.sigma[k];
    x.push(at);
    light.push(model.light * w);
    rest.push((profile.light[k] / fit.unitLight - model.light) * w);
  }
  const turns = x[x.length - 1] - x[0];
  const own = 1 / fit.result.parameters[0];
  const step = 1 / (STEPS_PER_TURN * turns);
  let best: (RippleStart & { gain: number }) | null = null;
  for (let q = FROM * own; q < TO * own; q += step) {
    if (Math.abs(q - own) < 1.2 / turns) continue;
    const wave = amplitudes(q, x, light, rest);
    if (best === null || wave.gain > best.gain) best = wave;
  }
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  return best !== null && best.gain > LEAST_GAIN * Math.min(scale, 4)
    ? { q: best.q, c: best.c, s: best.s }
    : null;
}

function amplitudes(q: number, x: number[], light: number[], rest: number[]): RippleStart & { gain: number } {
  let cc = 0;
  let cs = 0;
  let ss = 0;
  let rc = 0;
  let rs = 0;
  for (let i = 0; i < x.length; i++) {
    const turn = 2 * Math.PI * q * x[i];
    const c = light[i] * Math.cos(turn);
    const s = light[i] * Math.sin(turn);
    cc += c * c;
    cs += c * s;
    ss += s * s;
    rc += c * rest[i];
    rs += s * rest[i];
  }
  const det = cc * ss - cs * cs;
  if (!(det > 0)) return { q, c: 0, s: 0, gain: 0 };
  const c = (ss * rc - cs * rs) / det;
  const s = (cc * rs - cs * rc) / det;
  return { q, c, s, gain: c * rc + s * rs };
}
