import { fullScale, countsPerElectron, grainAreaPx, noiseVariance, type Camera } from './camera';
import { bandAt, rangeOfU, strayAt, Table, trueSpacingPx, unfanned, type Scene } from './scene';

/**
 * Cramér–Rao bound of the spacing (and of the order centres) of one simulated frame: the inverse of
 * J = Σ (∂μ/∂p)(∂μ/∂p)ᵀ / σ² over every unclipped pixel, μ and σ² the true mean and noise of that pixel.
 *
 * Unknown, as in any fit: spacing, zero order, tilt, envelope width and middle, visibility, a brightness for
 * every line of pixels across the fringes (row, or column where the fringes lie), background constant and slope
 * across the fringes, and the curvature s/L with the prior the bench states.
 * Grain enters as what it is on scales beyond its own size: noise of (contrast · signal)² per grain, so that a
 * pixel of a grain of area a counts with a times that variance. Compression, demosaicing and dirt are not in it.
 */
export interface Bound {
  uSpacingPx: number;
  /** Standard uncertainty of order m's centre along the normal, px. */
  orderPx: (m: number) => number;
}

const SPACING = 0;
const ZERO = 1;
const TILT = 2;
const RATIO = 3;
const MIDDLE = 4;
const VISIBILITY = 5;
const CURVATURE = 6;
const CONSTANT = 7;
const SLOPE = 8;
const COUNT = 9;

function sinc(t: number): number {
  const x = Math.PI * t;
  return Math.abs(x) < 1e-6 ? 1 - (x * x) / 6 : Math.sin(x) / x;
}

/** Light with the unknowns as the fit sees them; κ = s/L per px, r the envelope's zero in orders. */
function shape(
  u: number,
  p: { spacing: number; zero: number; ratio: number; middle: number; visibility: number; curvature: number },
): number {
  const orders = (x: number): number => x / (p.spacing * Math.sqrt(1 + (p.curvature * x) ** 2));
  const envelope = sinc(orders(u - p.middle) / p.ratio);
  return envelope * envelope * 0.5 * (1 + p.visibility * Math.cos(2 * Math.PI * orders(u - p.zero)));
}

/** @param relativeCurvatureU relative standard uncertainty of L and s together, as stated by the bench */
export function cramerRao(scene: Scene, camera: Camera, relativeCurvatureU: number): Bound {
  const truth = {
    spacing: trueSpacingPx(scene),
    zero: 0,
    ratio: scene.separationUm / scene.widthUm,
    middle: scene.envelopeShiftPx,
    visibility: scene.visibility,
    curvature: scene.scaleUmPerPx / (scene.distanceMm * 1e3),
  };
  const { from, to } = rangeOfU(scene);
  const step = truth.spacing / 60;
  const along = (u: number): number => u / (1 - scene.obliquePerPx * u);
  const table = (f: (u: number) => number): Table => new Table((u) => f(along(u)), from, to, step);
  const derivative = (key: keyof typeof truth, h: number): Table =>
    table(
      (u) =>
        (shape(u, { ...truth, [key]: truth[key] + h }) - shape(u, { ...truth, [key]: truth[key] - h })) /
        (2 * h),
    );
  const mean = table((u) => shape(u, truth));
  const tables: [number, Table][] = [
    [SPACING, derivative('spacing', truth.spacing * 1e-5)],
    [ZERO, derivative('zero', truth.spacing * 1e-4)],
    [RATIO, derivative('ratio', truth.ratio * 1e-5)],
    [MIDDLE, derivative('middle', truth.spacing * 1e-3)],
    [VISIBILITY, derivative('visibility', 1e-4)],
    [CURVATURE, derivative('curvature', truth.curvature * 1e-2)],
  ];
  const information = accumulate(scene, camera, mean, tables);
  const priorU = truth.curvature * relativeCurvatureU;
  information[CURVATURE * COUNT + CURVATURE] += 1 / (priorU * priorU);
  const covariance = invert(information, COUNT);
  const spacingVariance = covariance[SPACING * COUNT + SPACING];
  const cross = covariance[SPACING * COUNT + ZERO];
  const zeroVariance = covariance[ZERO * COUNT + ZERO];
  return {
    uSpacingPx: Math.sqrt(spacingVariance),
    orderPx: (m) => Math.sqrt(Math.max(0, zeroVariance + 2 * m * cross + m * m * spacingVariance)),
  };
}

function accumulate(scene: Scene, camera: Camera, mean: Table, tables: [number, Table][]): Float64Array {
  const angle = (scene.tiltDeg * Math.PI) / 180;
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  const counts = countsPerElectron(camera) * camera.peakElectrons;
  const full = fullScale(camera);
  const grain = camera.speckle.contrast ** 2 * grainAreaPx(camera.speckle.grainPx);
  const total = new Float64Array(COUNT * COUNT);
  const row = new Float64Array(COUNT * COUNT);
  const withBrightness = new Float64Array(COUNT);
  const g = new Float64Array(COUNT);
  // Lines that run across the fringes: with one brightness for each, along the fringes nothing else is known.
  const lying = Math.abs(sin) > Math.abs(cos);
  const lines = lying ? scene.widthPx : scene.heightPx;
  const length = lying ? scene.heightPx : scene.widthPx;
  for (let line = 0; line < lines; line += 1) {
    row.fill(0);
    withBrightness.fill(0);
    let brightness = 0;
    for (let k = 0; k < length; k += 1) {
      const c = lying ? line : k;
      const x = c + 0.5 - scene.zeroXPx;
      const y = (lying ? k : line) + 0.5 - scene.zeroYPx;
      const v = -x * sin + y * cos;
      const u = unfanned(scene, x * cos + y * sin, v);
      const lit = bandAt(scene, v);
      const light = mean.at(u);
      const signal = counts * (lit * light + strayAt(scene, c + 0.5));
      if (signal + camera.offsetCounts >= full) continue;
      const weight = 1 / (noiseVariance(camera, signal) + grain * (counts * lit * light) ** 2);
      for (const [index, t] of tables) g[index] = counts * lit * t.at(u);
      // Turning moves fringes and envelope alike.
      g[TILT] = -(g[ZERO] + g[MIDDLE]) * v;
      g[CONSTANT] = counts;
      g[SLOPE] = (counts * u) / length;
      const gain = counts * lit * light;
      brightness += weight * gain * gain;
      for (let i = 0; i < COUNT; i += 1) {
        const wi = weight * g[i];
        withBrightness[i] += wi * gain;
        for (let j = i; j < COUNT; j += 1) row[i * COUNT + j] += wi * g[j];
      }
    }
    for (let i = 0; i < COUNT; i += 1) {
      for (let j = i; j < COUNT; j += 1) {
        const lost = brightness > 0 ? (withBrightness[i] * withBrightness[j]) / brightness : 0;
        total[i * COUNT + j] += row[i * COUNT + j] - lost;
      }
    }
  }
  for (let i = 0; i < COUNT; i += 1)
    for (let j = 0; j < i; j += 1) total[i * COUNT + j] = total[j * COUNT + i];
  return total;
}

/** Inverse of a symmetric positive matrix by Gauss–Jordan after scaling its diagonal to 1. */
function invert(matrix: Float64Array, n: number): Float64Array {
  const scale = Float64Array.from({ length: n }, (_, i) => 1 / Math.sqrt(matrix[i * n + i]));
  const a = Array.from({ length: n }, (_, i) =>
    Float64Array.from({ length: 2 * n }, (_v, j) =>
      j < n ? matrix[i * n + j] * scale[i] * scale[j] : j - n === i ? 1 : 0,
    ),
  );
  for (let p = 0; p < n; p += 1) {
    let best = p;
    for (let i = p + 1; i < n; i += 1) if (Math.abs(a[i][p]) > Math.abs(a[best][p])) best = i;
    [a[p], a[best]] = [a[best], a[p]];
    const pivot = a[p][p];
    if (!(Math.abs(pivot) > 1e-14)) throw new Error('The information matrix of this frame is singular.');
    for (let j = 0; j < 2 * n; j += 1) a[p][j] /= pivot;
    for (let i = 0; i < n; i += 1) {
      if (i === p) continue;
      const f = a[i][p];
      for (let j = 0; j < 2 * n; j += 1) a[i][j] -= f * a[p][j];
    }
  }
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1)
    for (let j = 0; j < n; j += 1) out[i * n + j] = a[i][n + j] * scale[i] * scale[j];
  return out;
}
