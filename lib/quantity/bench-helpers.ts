/**
 * Planning a bench: what a camera will see of it, before anything is set up. Letters: d separation, w width, L distance,
 * λ wavelength in air, s pixel scale, R distance of a source slit, e its width, V visibility.
 */
import { nearFieldRelative, orderPositionMm, spacingPx } from './two-slit';

/** Peaks between these shares of full scale use the camera well and clip nothing (common practice, no source). */
export const GOOD_PEAK = [0.5, 0.85] as const;

/**
 * Exposures that bring the brightest fringe to 50 to 85 % of full scale: t·0.50/p to t·0.85/p, from a frame exposed for t
 * (any unit of time) with its peak at p (share of full scale). Assumes a linear camera at an unchanged gain. Null for a p
 * outside 0 to 1 or of 1 itself: a clipped peak says nothing but "less".
 */
export function exposureFor(exposure: number, peak: number): { from: number; to: number } | null {
  if (!(exposure > 0) || !(peak > 0) || peak >= 1) return null;
  return { from: (exposure * GOOD_PEAK[0]) / peak, to: (exposure * GOOD_PEAK[1]) / peak };
}

export interface Plan {
  wavelengthNm: number;
  separationUm: number;
  widthUm: number;
  distanceMm: number;
  scaleUmPerPx: number;
  /** Pixels of the picture across the fringes. */
  pictureWidthPx: number;
}

/** What a picture centred on the zero order holds. */
export interface View {
  /** Λ = λL/(d·s). */
  pxPerFringe: number;
  /** Bright orders on the picture: those with L·tan(asin(mλ/d)) within half its width. */
  fringes: number;
  /** Bright orders on the picture inside the central lobe of the envelope, |m| < d/w. */
  fringesInLobe: number;
}

/** Null where a value is not above 0, or the slits are wider than they are apart. */
export function viewOf(plan: Plan): View | null {
  const { wavelengthNm, separationUm, widthUm, distanceMm, scaleUmPerPx, pictureWidthPx } = plan;
  if (!Object.values(plan).every((value) => value > 0 && Number.isFinite(value))) return null;
  if (widthUm >= separationUm) return null;
  const halfMm = (pictureWidthPx * scaleUmPerPx) / 2000;
  // The highest order on the picture: X = L tan(asin(m lambda/d)) solved for m, so that nothing is counted one by one.
  const sine = halfMm / Math.hypot(halfMm, distanceMm);
  const edge = (sine * separationUm * 1000) / wavelengthNm;
  const last = Math.floor(edge + 1e-9);
  const lobe = Math.ceil(separationUm / widthUm - 1e-12) - 1;
  return {
    pxPerFringe: spacingPx(wavelengthNm, separationUm, distanceMm, scaleUmPerPx),
    fringes: 2 * last + 1,
    fringesInLobe: 2 * Math.min(last, lobe) + 1,
  };
}

/** Where order m of a plan stands on its picture, px from the zero order. */
export function orderPx(m: number, plan: Plan): number {
  return (
    (1000 * orderPositionMm(m, plan.wavelengthNm, plan.separationUm, plan.distanceMm)) / plan.scaleUmPerPx
  );
}

/**
 * Visibility left by a source slit of width e mm at R mm before the plate: V = |sinc(e·d/(λR))|, sinc(t) = sin πt/πt
 * (van Cittert and Zernike; for a slit evenly lit).
 */
export function visibilityBehindSlit(
  slitMm: number,
  sourceDistanceMm: number,
  separationUm: number,
  wavelengthNm: number,
): number {
  const t = (Math.PI * slitMm * separationUm * 1e3) / (wavelengthNm * sourceDistanceMm);
  return t === 0 ? 1 : Math.abs(Math.sin(t) / t);
}

/**
 * The widest source slit, mm, that leaves a visibility of at least V: the solution of sinc(e·d/(λR)) = V before its first
 * zero, by halving to 1e-12 of it. Null for a V outside 0 to 1 or a length not above 0.
 */
export function widestSourceSlit(
  visibility: number,
  sourceDistanceMm: number,
  separationUm: number,
  wavelengthNm: number,
): number | null {
  const lengths = [sourceDistanceMm, separationUm, wavelengthNm];
  if (!(visibility > 0) || !(visibility < 1) || !lengths.every((v) => v > 0 && Number.isFinite(v)))
    return null;
  // sinc falls from 1 to 0 on the way to its first zero at e = lambda R/d.
  let low = 0;
  let high = (wavelengthNm * sourceDistanceMm) / (separationUm * 1e3);
  for (let i = 0; i < 60; i += 1) {
    const middle = (low + high) / 2;
    if (visibilityBehindSlit(middle, sourceDistanceMm, separationUm, wavelengthNm) >= visibility)
      low = middle;
    else high = middle;
  }
  return low;
}

/** Far-field numbers from here on are worth a look, and too near for a report. */
export const FAR_FIELD_LOOK = 0.02;
export const FAR_FIELD_STOP = 0.05;

/** w²/(λL): how near the plate is for its slits; the far-field formula needs it small. Width in µm, λ in nm, L in mm. */
export function farFieldNumber(widthUm: number, wavelengthNm: number, distanceMm: number): number {
  return (widthUm * widthUm) / (wavelengthNm * distanceMm);
}

/**
 * What the far-field formula adds to the wavelength at a finite distance, nm: 0.18·(w²/λL)²·λ when the region scales with
 * the distance. From the project's own simulation with Fresnel integrals; good to a tenth of itself up to w²/λL = 0.1.
 */
export function farFieldErrorNm(widthUm: number, wavelengthNm: number, distanceMm: number): number {
  return nearFieldRelative(widthUm, wavelengthNm, distanceMm) * wavelengthNm;
}
