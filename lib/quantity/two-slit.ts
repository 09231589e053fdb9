/**
 * The geometry of two slits, exact. Letters: d separation, w width, L distance, λ wavelength, m order.
 * Source: d·sinθ = m·λ, OpenStax University Physics vol. 3, ch. 3; missing orders m = k·d/w, ch. 4.
 */

/** Distance from the axis in mm at which order m stands on a flat plane: X = L·tan(asin(mλ/d)). NaN beyond 90°. */
export function orderPositionMm(
  m: number,
  wavelengthNm: number,
  separationUm: number,
  distanceMm: number,
): number {
  return distanceMm * Math.tan(Math.asin((m * wavelengthNm) / (separationUm * 1000)));
}

/** Spacing at the zero order in px: Λ = dX/dm at m = 0 = λL/(d·s). */
export function spacingPx(
  wavelengthNm: number,
  separationUm: number,
  distanceMm: number,
  scaleUmPerPx: number,
): number {
  return (wavelengthNm * 1e-3 * distanceMm * 1e3) / (separationUm * scaleUmPerPx);
}

/** Wavelength in nm in the air of the bench: λ = d·s·Λ/L, with Λ the spacing at the zero order in px. */
export function wavelengthFromSpacing(v: {
  spacingPx: number;
  scaleUmPerPx: number;
  separationUm: number;
  distanceMm: number;
}): number {
  return (v.separationUm * v.scaleUmPerPx * v.spacingPx) / v.distanceMm;
}

/** Angle of order m in degrees: θ = asin(mλ/d); NaN where the order does not exist. */
export function orderAngleDeg(m: number, wavelengthNm: number, separationUm: number): number {
  return (Math.asin((m * wavelengthNm) / (separationUm * 1000)) * 180) / Math.PI;
}

/** Highest bright order that exists: floor(d/λ). */
export function highestOrder(wavelengthNm: number, separationUm: number): number {
  return Math.floor((separationUm * 1000) / wavelengthNm);
}

/** Bright fringes inside the central lobe of the envelope: 2·ceil(d/w) − 1. */
export function fringesInCentralLobe(separationUm: number, widthUm: number): number {
  return 2 * Math.ceil(separationUm / widthUm - 1e-12) - 1;
}

/** Height of bright order m relative to order 0 for slits of one width: sinc²(m·w/d), sinc(t) = sin πt/πt. */
export function orderHeight(m: number, separationUm: number, widthUm: number): number {
  const t = (Math.PI * m * widthUm) / separationUm;
  return t === 0 ? 1 : (Math.sin(t) / t) ** 2;
}

/** True when order m falls on a zero of the envelope (m = k·d/w, k ≠ 0), within `slack` of an order. */
export function isMissingOrder(m: number, separationUm: number, widthUm: number, slack = 1e-9): boolean {
  const k = (m * widthUm) / separationUm;
  return Math.round(k) !== 0 && Math.abs(k - Math.round(k)) <= slack;
}

/**
 * What the far-field formula adds at a finite distance, as a share of the wavelength: 0.18 (w^2/(lambda L))^2 when the
 * region scales with L (simulation with Fresnel integrals). Width in um, wavelength in nm, distance in mm.
 */
export function nearFieldRelative(widthUm: number, wavelengthNm: number, distanceMm: number): number {
  const number = (widthUm * widthUm) / (wavelengthNm * distanceMm);
  return 0.18 * number * number;
}
