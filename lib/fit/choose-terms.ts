import type { BandFit } from './band-fit';
import { refineBands } from './fit-bands';
import { refit } from './fit-profile';
import { promiseOf } from './promise';
import type { ModelTerms } from './two-slit-model';

const MOST_BACKGROUND = 6;
const MOST_ADDED = 4;
/** A term must beat the information criterion by this much, so that noise does not buy terms. */
export const MARGIN = 4;
/** A chirp moves every outer order; too weak to show it hardly moves the spacing. */
const CHIRP_MARGIN = 10;
/** One linear step must promise this share of the margin at least; a fit asks for the margin and the logarithm on top. */
const WORTH_A_TRIAL = 0.75;

/**
 * Adds optional terms one at a time, each time the one that helps most, while the Bayesian information criterion
 * (Schwarz 1978: chi-square + parameters * ln points) falls by more than a margin. Chi-square is scaled by what the best
 * model leaves, so that structure no term describes does not buy terms either.
 */
export function chooseTerms(band: BandFit, allow: { tone: boolean; chirp: boolean }): BandFit {
  let now = band;
  for (let added = 0; ; added++) {
    if (added >= MOST_ADDED) return now;
    let best: { terms: ModelTerms; gain: number } | null = null;
    const promise = promiseOf(now.profile, now.fit);
    const left = Math.max(1, now.fit.result.chiSquare / Math.max(1, now.fit.result.dof));
    for (const terms of offers(now.fit.layout.terms, allow)) {
      if (!(promise(terms) > WORTH_A_TRIAL * left * MARGIN)) continue;
      const trial = refit(now.profile, now.fit, terms, true);
      if (trial.result.covariance === null) continue;
      const scale = Math.max(1, trial.result.chiSquare / Math.max(1, trial.result.dof));
      const extra = trial.layout.size - now.fit.layout.size;
      const chirp = terms.chirp && !now.fit.layout.terms.chirp;
      const gain =
        (now.fit.result.chiSquare - trial.result.chiSquare) / scale -
        extra * Math.log(trial.points) -
        (chirp ? CHIRP_MARGIN : MARGIN);
      if (gain > 0 && (best === null || gain > best.gain)) best = { terms, gain };
    }
    // Noise and masks once more with the bands' share of what was added.
    if (best === null) return added === 0 ? now : (refineBands(now, now.fit.layout.terms) ?? now);
    const next = refineBands(now, best.terms);
    if (next === null) return now;
    now = next;
  }
}

export function offers(terms: ModelTerms, allow: { tone: boolean; chirp: boolean }): ModelTerms[] {
  const list: ModelTerms[] = [];
  if (terms.background < MOST_BACKGROUND) list.push({ ...terms, background: terms.background + 1 });
  if (terms.background < MOST_BACKGROUND - 1) list.push({ ...terms, background: terms.background + 2 });
  if (!terms.chirp && allow.chirp) list.push({ ...terms, chirp: true });
  if (!terms.tone && allow.tone) list.push({ ...terms, tone: true });
  if (!terms.fade) list.push({ ...terms, fade: true });
  if (!terms.unequal) list.push({ ...terms, unequal: true });
  return list;
}
