import { foreseenAfterRebase, rebase, type ProfileFit } from './fit-profile';
import type { Profile } from './profile';

/** Which bright fringe is the zero order, and how sure that is. */
export interface ZeroChoice {
  fit: ProfileFit;
  /** Probability of the chosen order and of the next likely one. */
  probability: number;
  next: number;
  /** Standard deviation of the spacing over the choices, model units of the chosen fit. */
  uSpacing: number;
}

/** How far the envelope's middle may stand from the zero order, in orders (common practice, no source). */
const USUAL_OFFSET = 0.18;
const REACH = 2;
/** So far behind by one linear step a numbering is not fitted. */
const HOPELESS = 100;

/**
 * Weighs the fringes next to the envelope's middle as zero order: by their distance from it, and by chi-square, since with a
 * known distance the exact geometry bends the spacing about the true zero order.
 */
export function chooseZero(profile: Profile, fit: ProfileFit): ZeroChoice {
  const scale = Math.max(1, fit.result.chiSquare / Math.max(1, fit.result.dof));
  const n = fit.layout.size;
  const offset = fit.result.parameters[3];
  const uOffset = fit.result.covariance ? Math.sqrt(fit.result.covariance[3 * n + 3]) : 0;
  const spread = Math.hypot(USUAL_OFFSET, uOffset);
  const steps = Array.from({ length: 2 * REACH + 1 }, (_, i) => i - REACH);
  // Moving the numbering by step leaves the envelope's middle at offset - step.
  const costOf = (step: number, chiSquare: number) => chiSquare / scale + ((offset - step) / spread) ** 2;
  const foreseen = foreseenAfterRebase(profile, fit, steps).map((chi, i) => costOf(steps[i], chi));
  const least = Math.min(...foreseen);
  const choices = steps
    .filter((step, i) => step === 0 || foreseen[i] < least + HOPELESS)
    .map((step) => {
      const moved = rebase(profile, fit, step);
      return { fit: moved, cost: costOf(step, moved.result.chiSquare) };
    });
  choices.sort((a, b) => a.cost - b.cost);
  const best = choices[0];
  const weights = choices.map((c) => likelihood(c.cost - best.cost));
  const total = weights.reduce((s, w) => s + w, 0);
  const unit = best.fit.unitPx;
  const spacings = choices.map((c) => (c.fit.result.parameters[0] * c.fit.unitPx) / unit);
  const variance = choices.reduce(
    (s, _, i) => s + (weights[i] / total) * (spacings[i] - spacings[0]) ** 2,
    0,
  );
  return {
    fit: best.fit,
    probability: 1 / total,
    next: (weights[1] ?? 0) / total,
    uSpacing: Math.sqrt(variance),
  };
}

/** Odds below one in ten thousand are not a doubt. */
function likelihood(costBehind: number): number {
  const odds = Math.exp(-0.5 * costBehind);
  return odds < 1e-4 ? 0 : odds;
}
