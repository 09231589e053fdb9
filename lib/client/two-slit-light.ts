/** Light of two slits on a far screen, for the picture at the door; a measurement never uses it. */
interface Bench {
  wavelengthNm: number;
  separationUm: number;
  widthUm: number;
  distanceMm: number;
  visibility: number;
}

/** Stray light that keeps the dark orders of a picture from going black. */
const STRAY = 0.004;

function sinc2(t: number): number {
  return Math.abs(t) < 1e-9 ? 1 : (Math.sin(t) / t) ** 2;
}

/**
 * Linear light at `samples` places across `spanMm`, 0 to 1: sinc²(πw sinθ/λ)·(1 + V cos(2πd sinθ/λ))/2 with the
 * exact sine of the angle.
 */
export function twoSlitLight(bench: Bench, spanMm: number, samples: number): number[] {
  const { wavelengthNm, separationUm, widthUm, distanceMm, visibility } = bench;
  return Array.from({ length: samples }, (_, i) => {
    const mm = ((i + 0.5) / samples - 0.5) * spanMm;
    const k = (Math.PI * mm) / Math.hypot(mm, distanceMm) / (wavelengthNm * 1e-3);
    return (sinc2(widthUm * k) * (1 + visibility * Math.cos(2 * separationUm * k))) / 2 + STRAY;
  });
}
