/**
 * The light on the sensor, from the physics of two slits and nothing else: this file shares no code with the
 * fit it is used to test. Letters in formulas: d separation, w width, L distance, λ wavelength, s scale.
 */
export interface Scene {
  widthPx: number;
  heightPx: number;
  wavelengthNm: number;
  separationUm: number;
  /** Width of the slits; the second defaults to the first. */
  widthUm: number;
  secondWidthUm?: number;
  distanceMm: number;
  scaleUmPerPx: number;
  /** Where the zero order crosses the middle of the light, px. */
  zeroXPx: number;
  zeroYPx: number;
  /** Angle of the fringe normal from the x axis, degrees, positive clockwise on screen. */
  tiltDeg: number;
  visibility: number;
  /** Middle of the envelope minus the zero order, px. */
  envelopeShiftPx: number;
  /** Full width at half maximum of a Gaussian line, nm; 0 for a single line. */
  lineWidthNm: number;
  /** Half height of the lit band along the fringes, px, and the power of its fall-off exp(−|v/h|^p); Infinity lights every row alike. */
  bandHalfPx: number;
  bandPower: number;
  /** Stray light as a share of the peak: constant, slope over the frame's width, and a broad hump. */
  stray: { constant: number; slope: number; hump: number; humpXPx: number; humpSigmaPx: number };
  /** Projective shortening along the fringe normal: X = s·u/(1 − q·u), u from the zero order, q in 1/px. */
  obliquePerPx: number;
  /** Fringes that fan out, from a view oblique along them: u·1/(1 − k·v) in place of u, v along the fringes from the zero order, k in 1/px. */
  keystonePerPx?: number;
  /** 'two' slits; 'one', 'five' or 'rings' for frames that must be refused. */
  pattern: 'two' | 'one' | 'five' | 'rings';
}

/** The documentation's bench A reduced to a small sensor; every family starts from here. */
export const PLAIN_SCENE: Scene = {
  widthPx: 1024,
  heightPx: 256,
  wavelengthNm: 635,
  separationUm: 250,
  widthUm: 50,
  distanceMm: 500,
  scaleUmPerPx: 15.875, // 80 px per fringe
  zeroXPx: 512.3,
  zeroYPx: 128.1,
  tiltDeg: 0,
  visibility: 0.95,
  envelopeShiftPx: 0,
  lineWidthNm: 0,
  bandHalfPx: Infinity,
  bandPower: 4,
  stray: { constant: 0.01, slope: 0, hump: 0, humpXPx: 0, humpSigmaPx: 1 },
  obliquePerPx: 0,
  pattern: 'two',
};

function sinc(t: number): number {
  const x = Math.PI * t;
  return Math.abs(x) < 1e-7 ? 1 - (x * x) / 6 : Math.sin(x) / x;
}

/** Light at `u` px from the zero order along the fringe normal, relative to the peak, without stray light. */
export function lightAt(scene: Scene, u: number): number {
  const { wavelengthNm, separationUm, distanceMm, scaleUmPerPx } = scene;
  const mm = (x: number): number => (x * scaleUmPerPx * 1e-3) / (1 - scene.obliquePerPx * x);
  const sine = (x: number): number => x / Math.sqrt(x * x + distanceMm * distanceMm);
  const lambdaUm = wavelengthNm * 1e-3;
  const s = sine(mm(u));
  const se = sine(mm(u - scene.envelopeShiftPx));
  const orders = (separationUm * s) / lambdaUm;
  if (scene.pattern === 'one') return sinc((scene.widthUm * se) / lambdaUm) ** 2;
  if (scene.pattern === 'five') {
    const half = Math.PI * orders;
    const ratio = Math.abs(Math.sin(half)) < 1e-9 ? 5 : Math.sin(5 * half) / Math.sin(half);
    return (sinc((scene.widthUm * se) / lambdaUm) * (ratio / 5)) ** 2;
  }
  const w1 = scene.widthUm;
  const w2 = scene.secondWidthUm ?? w1;
  const a1 = w1 * sinc((w1 * se) / lambdaUm);
  const a2 = w2 * sinc((w2 * se) / lambdaUm);
  const blur = (Math.PI * scene.lineWidthNm * orders) / wavelengthNm;
  const gamma = scene.visibility * Math.exp(-(blur * blur) / (4 * Math.LN2));
  return (a1 * a1 + a2 * a2 + 2 * gamma * a1 * a2 * Math.cos(2 * Math.PI * orders)) / (w1 + w2) ** 2;
}

/** Spacing dX/dm at the zero order in px: λL/(d·s). */
export function trueSpacingPx(scene: Scene): number {
  return (scene.wavelengthNm * scene.distanceMm) / (scene.separationUm * scene.scaleUmPerPx);
}

/** The spacing at v px along the fringes from the zero order: Λ·(1 − k·v). */
export function spacingAtPx(scene: Scene, v: number): number {
  return trueSpacingPx(scene) * (1 - (scene.keystonePerPx ?? 0) * v);
}

/** Where a point seen at (u, v) would stand without keystone: u/(1 − k·v). */
export function unfanned(scene: Scene, u: number, v: number): number {
  return u / (1 - (scene.keystonePerPx ?? 0) * v);
}

/** Where order m stands, px from the zero order along the fringe normal. */
export function trueOrderPx(scene: Scene, m: number): number {
  const mm = scene.distanceMm * Math.tan(Math.asin((m * scene.wavelengthNm * 1e-3) / scene.separationUm));
  const plane = (mm * 1e3) / scene.scaleUmPerPx;
  return plane / (1 + scene.obliquePerPx * plane);
}

/** Share of the light that reaches the row at v px from the band's middle. */
export function bandAt(scene: Scene, v: number): number {
  return Number.isFinite(scene.bandHalfPx)
    ? Math.exp(-Math.pow(Math.abs(v) / scene.bandHalfPx, scene.bandPower))
    : 1;
}

export function strayAt(scene: Scene, x: number): number {
  const { constant, slope, hump, humpXPx, humpSigmaPx } = scene.stray;
  const h = hump === 0 ? 0 : hump * Math.exp(-0.5 * ((x - humpXPx) / humpSigmaPx) ** 2);
  // Stray light is never less than none.
  return Math.max(0, constant + slope * (x / scene.widthPx - 0.5) + h);
}

const GAUSS = [-Math.sqrt(0.6) / 2, 0, Math.sqrt(0.6) / 2];
const WEIGHT = [5 / 18, 8 / 18, 5 / 18];

/** A fine table of a function of u, read by cubic interpolation: relative error below 1e-8 at 24 points a fringe. */
export class Table {
  private readonly values: Float64Array;
  constructor(
    f: (u: number) => number,
    private readonly from: number,
    to: number,
    private readonly step: number,
  ) {
    const n = Math.ceil((to - from) / step) + 4;
    this.values = new Float64Array(n);
    for (let i = 0; i < n; i += 1) this.values[i] = f(from + (i - 1) * step);
  }
  at(u: number): number {
    const p = (u - this.from) / this.step + 1;
    const i = Math.floor(p);
    const t = p - i;
    const v = this.values;
    const a = v[i - 1];
    const b = v[i];
    const c = v[i + 1];
    const d = v[i + 2];
    return b + 0.5 * t * (c - a + t * (2 * a - 5 * b + 4 * c - d + t * (3 * (b - c) + d - a)));
  }
}

/** Range of u over the frame's corners, with a margin. */
export function rangeOfU(scene: Scene): { from: number; to: number } {
  const t = (scene.tiltDeg * Math.PI) / 180;
  const corners = [
    [0, 0],
    [scene.widthPx, 0],
    [0, scene.heightPx],
    [scene.widthPx, scene.heightPx],
  ].map(([cx, cy]) => {
    const x = cx - scene.zeroXPx;
    const y = cy - scene.zeroYPx;
    return unfanned(scene, x * Math.cos(t) + y * Math.sin(t), -x * Math.sin(t) + y * Math.cos(t));
  });
  return { from: Math.min(...corners) - 4, to: Math.max(...corners) + 4 };
}

/**
 * Mean light of every pixel (row by row), relative to the peak: the irradiance integrated over each pixel's
 * square by 3 × 3 Gauss points.
 */
export function renderMean(scene: Scene): Float32Array {
  const { widthPx, heightPx } = scene;
  const out = new Float32Array(widthPx * heightPx);
  const t = (scene.tiltDeg * Math.PI) / 180;
  const cos = Math.cos(t);
  const sin = Math.sin(t);
  const { from, to } = rangeOfU(scene);
  const table =
    scene.pattern === 'rings'
      ? null
      : new Table((u) => lightAt(scene, u), from, to, Math.min(0.25, trueSpacingPx(scene) / 60));
  for (let r = 0; r < heightPx; r += 1) {
    for (let c = 0; c < widthPx; c += 1) {
      let sum = 0;
      for (let j = 0; j < 3; j += 1) {
        const y = r + 0.5 + GAUSS[j] - scene.zeroYPx;
        for (let i = 0; i < 3; i += 1) {
          const x = c + 0.5 + GAUSS[i] - scene.zeroXPx;
          const u = unfanned(scene, x * cos + y * sin, -x * sin + y * cos);
          const light = table ? table.at(u) : ringsAt(scene, Math.hypot(x, y));
          sum += WEIGHT[i] * WEIGHT[j] * light;
        }
      }
      const v = -(c + 0.5 - scene.zeroXPx) * sin + (r + 0.5 - scene.zeroYPx) * cos;
      out[r * widthPx + c] = sum * bandAt(scene, v) + strayAt(scene, c + 0.5);
    }
  }
  return out;
}

/** Rings of even spacing under a broad envelope: a pattern that is periodic but no two-slit pattern. */
function ringsAt(scene: Scene, radius: number): number {
  const spacing = trueSpacingPx(scene);
  return (
    0.5 *
    (1 + scene.visibility * Math.cos((2 * Math.PI * radius) / spacing)) *
    Math.exp(-((radius / (0.4 * scene.widthPx)) ** 2))
  );
}
