/** What a frame says beside the spacing: slit width, line width, and which measurand may be used. */
import type {
  BandwidthResult,
  Finding,
  FindingWord,
  Measurand,
  SetupValues,
  SlitResult,
} from '@/lib/domain/reading-result';
import { fadeRoom } from '@/lib/fit/linear-room';
import type { ProfileFit } from '@/lib/fit/fit-profile';
import type { Profile } from '@/lib/fit/profile';
import type { Spread } from '@/lib/fit/spread';

const RANK: Record<FindingWord, number> = { clear: 0, look: 1, stop: 2 };

/** The gravest word of the checks for each measurand; a check that names no word of its own uses the wavelength's. */
export function wordsOf(findings: Finding[]): Record<Measurand, FindingWord> {
  const gravest = (word: (f: Finding) => FindingWord) =>
    findings.map(word).reduce<FindingWord>((a, b) => (RANK[b] > RANK[a] ? b : a), 'clear');
  return {
    wavelength: gravest((f) => f.word),
    width: gravest((f) => f.width ?? f.word),
    visibility: gravest((f) => f.visibility ?? f.word),
  };
}

/**
 * Slit width w = ratio * d from the fitted envelope, u by the law of propagation with the plate's separation. Null where the
 * envelope's end does not show.
 */
export function slitOf(
  place: { band: { fit: ProfileFit } },
  spread: Pick<Spread, 'covariance' | 'dof'>,
  setup: SetupValues,
): SlitResult | null {
  const { fit } = place.band;
  const n = fit.layout.size;
  const p = fit.result.parameters;
  const ratio = p[2];
  const uRatio = Math.sqrt(Math.max(0, spread.covariance[2 * n + 2]));
  if (!(ratio > LEAST_RATIO) || !(uRatio > 0) || !(uRatio < MOST_RELATIVE_U * ratio)) return null;
  const d = setup.separationUm;
  const { unequal } = fit.layout;
  const shown = unequal >= 0 && spread.covariance[unequal * n + unequal] > 0;
  return {
    ratio,
    uRatio,
    dof: spread.dof,
    widthUm: d ? ratio * d.value : null,
    uWidthUm: d && d.u !== null ? Math.hypot(uRatio * d.value, ratio * d.u) : null,
    difference: shown ? 2 * p[unequal] : null,
    uDifference: shown ? 2 * Math.sqrt(spread.covariance[unequal * n + unequal]) : null,
  };
}

const LEAST_RATIO = 0.02;
const MOST_RELATIVE_U = 0.1;
/** One-sided 95 % of a normal distribution. */
const ONE_SIDED = 1.645;

/** FWHM over wavelength of a Gaussian line whose contrast falls as exp(-(width m)^2/2): width * sqrt(2 ln 2)/pi. */
export const lineShare = (width: number) => (width * Math.sqrt(2 * Math.LN2)) / Math.PI;

/** Line width, or the limit below which this frame cannot tell it. */
export function bandwidthOf(
  { fit, profile }: { fit: ProfileFit; profile: Profile },
  covariance: Float64Array,
  wavelengthNm: number | null,
): BandwidthResult | null {
  if (wavelengthNm === null) return null;
  const { fade, size } = fit.layout;
  if (fade >= 0) {
    const variance = covariance[fade * size + fade];
    return {
      fwhmNm: lineShare(fit.result.parameters[fade]) * wavelengthNm,
      uFwhmNm: variance > 0 ? lineShare(Math.sqrt(variance)) * wavelengthNm : null,
      limitNm: null,
    };
  }
  const room = fadeRoom(profile, fit);
  if (room === null) return null;
  const most = Math.max(0, room.f) + ONE_SIDED * room.u;
  const limitNm = lineShare(Math.sqrt(most)) * wavelengthNm;
  return limitNm < 0.25 * wavelengthNm ? { fwhmNm: null, uFwhmNm: null, limitNm } : null;
}
