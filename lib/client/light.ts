/**
 * The colour of monochromatic light, for drawings only (never for a measurement).
 * Source: C. Wyman, P.-P. Sloan, P. Shirley, "Simple analytic approximations to the CIE XYZ color matching
 * functions", Journal of Computer Graphics Techniques 2(2), 2013, multi-lobe fit of the CIE 1931 functions.
 */
export type Rgb = readonly [number, number, number];
export type Theme = 'dark' | 'paper';

/** Light with no colour of its own: outside 390 to 750 nm, before a fit, and with Goggles on. */
export const BONE: Rgb = [0.87, 0.82, 0.73];

const SEEN_FROM_NM = 390;
const SEEN_TO_NM = 750;
/** Share of the lowest channel that lifts colours no screen can show, before they are cut at 0. */
const LIFT = 0.12;
/** Contrast a line of light must reach on the page (WCAG 2.2, text). */
const LINE_CONTRAST = 4.5;
/** Relative luminance of the page in both themes. */
const GROUND_LUMINANCE: Record<Theme, number> = { dark: 0.0061, paper: 0.872 };

function lobe(nm: number, middleNm: number, below: number, above: number): number {
  const t = (nm - middleNm) * (nm < middleNm ? below : above);
  return Math.exp(-0.5 * t * t);
}

/** Linear sRGB of a wavelength (nm, air), largest channel 1. */
export function linearRgb(nm: number): Rgb {
  const x =
    0.362 * lobe(nm, 442.0, 0.0624, 0.0374) +
    1.056 * lobe(nm, 599.8, 0.0264, 0.0323) -
    0.065 * lobe(nm, 501.1, 0.049, 0.0382);
  const y = 0.821 * lobe(nm, 568.8, 0.0213, 0.0247) + 0.286 * lobe(nm, 530.9, 0.0613, 0.0322);
  const z = 1.217 * lobe(nm, 437.0, 0.0845, 0.0278) + 0.681 * lobe(nm, 459.0, 0.0385, 0.0725);
  const rgb = [
    3.2406 * x - 1.5372 * y - 0.4986 * z,
    -0.9689 * x + 1.8758 * y + 0.0415 * z,
    0.0557 * x - 0.204 * y + 1.057 * z,
  ];
  const lowest = Math.min(0, ...rgb);
  const lifted = rgb.map((v) => Math.max(0, v - LIFT * lowest));
  const largest = Math.max(...lifted, 1e-6);
  return [lifted[0] / largest, lifted[1] / largest, lifted[2] / largest];
}

/** sRGB encoding of one linear channel, 0 to 1 (IEC 61966-2-1). */
export function encode(v: number): number {
  const c = Math.max(0, Math.min(1, v));
  return c <= 0.0031308 ? 12.92 * c : 1.055 * Math.pow(c, 1 / 2.4) - 0.055;
}

export function cssColour(c: Rgb): string {
  return `rgb(${c.map((v) => Math.round(255 * encode(v))).join(',')})`;
}

function luminance(c: Rgb): number {
  return 0.2126 * c[0] + 0.7152 * c[1] + 0.0722 * c[2];
}

/** The light itself, for pictures on the dark bed. `nm` in air; null or 0 before a fit. */
export function lightRgb(nm: number | null, goggles: boolean): Rgb {
  if (goggles || !nm || nm < SEEN_FROM_NM || nm > SEEN_TO_NM) return BONE;
  return linearRgb(nm);
}

/** The same hue moved towards white (dark) or black (paper) until it stands 4.5:1 on the page. */
export function lightLine(nm: number | null, theme: Theme, goggles: boolean): string {
  const c = lightRgb(nm, goggles);
  const ground = GROUND_LUMINANCE[theme] + 0.05;
  let moved: Rgb = c;
  for (let step = 0; step <= 100; step += 1) {
    const k = step / 100;
    moved =
      theme === 'paper'
        ? [c[0] * (1 - k), c[1] * (1 - k), c[2] * (1 - k)]
        : [c[0] + (1 - c[0]) * k, c[1] + (1 - c[1]) * k, c[2] + (1 - c[2]) * k];
    const own = luminance(moved) + 0.05;
    if ((theme === 'paper' ? ground / own : own / ground) >= LINE_CONTRAST) break;
  }
  return cssColour(moved);
}

/** Exponent on linear light before encoding, so that outer orders stay visible. */
export const STRIP_EXPONENT = 0.78;
