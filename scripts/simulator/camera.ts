import type { Paint } from './paintings';
import { random, type Random } from './random';
import { renderMean, type Scene } from './scene';

/** What the camera adds to the light. */
export interface Camera {
  seed: number;
  /** Electrons at the peak of the pattern (1.0 of the scene). */
  peakElectrons: number;
  readElectrons: number;
  /** Peak of the pattern as a share of full scale; above 1 it clips. */
  peakShare: number;
  bits: 8 | 12 | 16;
  /** Dark offset in counts of the stored depth. */
  offsetCounts: number;
  /** Stored value = encode(linear share): linear, sRGB, or a power. */
  tone: 'linear' | 'srgb' | number;
  /** Speckle: contrast 0 to 1 and grain in px; 0 for none. */
  speckle: { contrast: number; grainPx: number };
  /** Dust shadows, hot pixels, dead columns, text-like marks. */
  dirt: { dust: number; hot: number; deadColumns: number; marks: number };
  /** A colour sensor with an RGGB filter and bilinear demosaicing; the light's share seen by R, G, B. */
  bayer: readonly [number, number, number] | null;
}

export const PLAIN_CAMERA: Camera = {
  seed: 1,
  peakElectrons: 12_000,
  readElectrons: 8,
  peakShare: 0.78,
  bits: 16,
  offsetCounts: 600,
  tone: 'linear',
  speckle: { contrast: 0, grainPx: 3 },
  dirt: { dust: 0, hot: 0, deadColumns: 0, marks: 0 },
  bayer: null,
};

export interface Picture {
  widthPx: number;
  heightPx: number;
  channels: 1 | 3;
  bits: 8 | 16;
  /** Interleaved samples in counts. */
  samples: Uint16Array;
}

/** The noise of one pixel in counts², given its mean in counts above the offset. */
export function noiseVariance(camera: Camera, countsAboveOffset: number): number {
  const perElectron = countsPerElectron(camera);
  return Math.max(0, countsAboveOffset) * perElectron + (camera.readElectrons * perElectron) ** 2 + 1 / 12;
}

export function fullScale(camera: Camera): number {
  return 2 ** camera.bits - 1;
}

/** Counts per electron: the pattern's peak lands at `peakShare` of full scale. */
export function countsPerElectron(camera: Camera): number {
  return (camera.peakShare * (fullScale(camera) - camera.offsetCounts)) / camera.peakElectrons;
}

/** Photographs a scene: shot and read noise in electrons, dirt, speckle, clipping, quantisation, tone. */
export function photograph(scene: Scene, camera: Camera, paints: readonly Paint[] = []): Picture {
  const rnd = random(camera.seed);
  const mean = renderMean(scene);
  for (const paint of paints) paint(mean, scene);
  if (camera.speckle.contrast > 0) applySpeckle(mean, scene, camera, rnd);
  applyDust(mean, scene, camera, rnd);
  const { widthPx, heightPx } = scene;
  const sensor = new Float32Array(widthPx * heightPx);
  const full = fullScale(camera);
  const perElectron = countsPerElectron(camera);
  for (let r = 0; r < heightPx; r += 1) {
    for (let c = 0; c < widthPx; c += 1) {
      const i = r * widthPx + c;
      const seen = camera.bayer ? camera.bayer[(r & 1) + (c & 1)] : 1;
      const electrons =
        rnd.poisson(mean[i] * camera.peakElectrons * seen) + camera.readElectrons * rnd.normal();
      sensor[i] = camera.offsetCounts + perElectron * electrons;
    }
  }
  applyDefects(sensor, scene, camera, rnd);
  const encode = encoder(camera.tone);
  const quantise = (counts: number): number =>
    Math.min(full, Math.max(0, Math.round(full * encode(Math.min(1, Math.max(0, counts / full))))));
  const bits = camera.bits === 8 ? 8 : 16;
  if (!camera.bayer) {
    return { widthPx, heightPx, channels: 1, bits, samples: Uint16Array.from(sensor, quantise) };
  }
  return {
    widthPx,
    heightPx,
    channels: 3,
    bits,
    samples: Uint16Array.from(demosaic(sensor, widthPx, heightPx), quantise),
  };
}

function encoder(tone: Camera['tone']): (share: number) => number {
  if (tone === 'linear') return (v) => v;
  // IEC 61966-2-1.
  if (tone === 'srgb') return (v) => (v <= 0.0031308 ? 12.92 * v : 1.055 * Math.pow(v, 1 / 2.4) - 0.055);
  return (v) => Math.pow(v, tone);
}

/** Partly developed speckle: |field|² of a smoothed complex normal field, mixed to the stated contrast. */
function applySpeckle(mean: Float32Array, scene: Scene, camera: Camera, rnd: Random): void {
  const { widthPx: w, heightPx: h } = scene;
  const field = () =>
    smooth(
      Float32Array.from({ length: w * h }, () => rnd.normal()),
      w,
      h,
      camera.speckle.grainPx,
    );
  const re = field();
  const im = field();
  let power = 0;
  for (let i = 0; i < re.length; i += 1) power += re[i] * re[i] + im[i] * im[i];
  power /= re.length;
  const c = camera.speckle.contrast;
  for (let i = 0; i < mean.length; i += 1) mean[i] *= 1 - c + (c * (re[i] * re[i] + im[i] * im[i])) / power;
}

/**
 * Area of a grain in px: the sum of the light's correlation over all lags, which for a normal field is the squared
 * correlation of the field itself. The field is smoothed by two running means, whose joint kernel is a triangle.
 */
export function grainAreaPx(grainPx: number): number {
  const radius = Math.max(0, Math.round(grainPx / 2));
  const side = 2 * radius + 1;
  const kernel = Array.from({ length: 2 * side - 1 }, (_, k) => side - Math.abs(k - (side - 1)));
  const at = (lag: number): number => kernel.reduce((sum, v, k) => sum + v * (kernel[k + lag] ?? 0), 0);
  let sum = 0;
  for (let lag = 1 - kernel.length; lag < kernel.length; lag += 1) sum += (at(Math.abs(lag)) / at(0)) ** 2;
  return sum * sum;
}

/** Two running means in each direction: a triangle of about the given width. */
function smooth(data: Float32Array, w: number, h: number, grainPx: number): Float32Array {
  const radius = Math.max(0, Math.round(grainPx / 2));
  if (radius === 0) return data;
  let from = data;
  for (let pass = 0; pass < 2; pass += 1) {
    from = runningMean(from, w, h, radius, 1, w);
    from = runningMean(from, h, w, radius, w, 1);
  }
  return from;
}

function runningMean(
  data: Float32Array,
  along: number,
  lines: number,
  radius: number,
  step: number,
  jump: number,
): Float32Array {
  const out = new Float32Array(data.length);
  for (let line = 0; line < lines; line += 1) {
    const base = line * jump;
    let sum = 0;
    for (let k = -radius; k <= radius; k += 1) sum += data[base + ((k + along) % along) * step];
    for (let i = 0; i < along; i += 1) {
      out[base + i * step] = sum / (2 * radius + 1);
      sum +=
        data[base + ((i + radius + 1) % along) * step] - data[base + ((i - radius + along) % along) * step];
    }
  }
  return out;
}

function applyDust(mean: Float32Array, scene: Scene, camera: Camera, rnd: Random): void {
  for (let n = 0; n < camera.dirt.dust; n += 1) {
    const cx = rnd.between(0.05, 0.95) * scene.widthPx;
    const cy = rnd.between(0.1, 0.9) * scene.heightPx;
    const radius = rnd.between(3, 18);
    const depth = rnd.between(0.3, 0.9);
    const reach = Math.ceil(3 * radius);
    for (let y = Math.max(0, Math.floor(cy - reach)); y < Math.min(scene.heightPx, cy + reach); y += 1) {
      for (let x = Math.max(0, Math.floor(cx - reach)); x < Math.min(scene.widthPx, cx + reach); x += 1) {
        const q = ((x + 0.5 - cx) ** 2 + (y + 0.5 - cy) ** 2) / (radius * radius);
        mean[y * scene.widthPx + x] *= 1 - depth * Math.exp(-q * q);
      }
    }
  }
}

/** Hot pixels, dead columns, and short dark strokes like writing or ruler ticks. */
function applyDefects(sensor: Float32Array, scene: Scene, camera: Camera, rnd: Random): void {
  const { widthPx: w, heightPx: h } = scene;
  const full = fullScale(camera);
  for (let n = 0; n < camera.dirt.hot; n += 1) sensor[rnd.integer(0, w * h - 1)] = full * rnd.between(0.7, 1);
  for (let n = 0; n < camera.dirt.deadColumns; n += 1) {
    const c = rnd.integer(0, w - 1);
    for (let r = 0; r < h; r += 1) sensor[r * w + c] = camera.offsetCounts * 0.5;
  }
  for (let n = 0; n < camera.dirt.marks; n += 1) {
    const x = rnd.integer(4, w - 8);
    const y = rnd.integer(4, h - 8);
    const upright = rnd.uniform() < 0.6;
    const length = rnd.integer(8, Math.max(9, Math.floor(h / 6)));
    for (let k = 0; k < length; k += 1) {
      for (let t = 0; t < 3; t += 1) {
        const c = x + (upright ? t : k);
        const r = y + (upright ? k : t);
        if (c < w && r < h)
          sensor[r * w + c] = camera.offsetCounts + 0.25 * (sensor[r * w + c] - camera.offsetCounts);
      }
    }
  }
}

/** Bilinear demosaicing of an RGGB mosaic to interleaved R, G, B. */
function demosaic(sensor: Float32Array, w: number, h: number): Float32Array {
  const out = new Float32Array(3 * w * h);
  const colour = (r: number, c: number): number => (r & 1) + (c & 1);
  for (let r = 0; r < h; r += 1) {
    for (let c = 0; c < w; c += 1) {
      const sum = [0, 0, 0];
      const count = [0, 0, 0];
      for (let j = -1; j <= 1; j += 1) {
        for (let i = -1; i <= 1; i += 1) {
          const y = r + j;
          const x = c + i;
          if (y < 0 || x < 0 || y >= h || x >= w) continue;
          const k = colour(y & 1, x & 1);
          const weight = k === colour(r & 1, c & 1) ? (i === 0 && j === 0 ? 1 : 0) : 1;
          sum[k] += weight * sensor[y * w + x];
          count[k] += weight;
        }
      }
      for (let k = 0; k < 3; k += 1) out[3 * (r * w + c) + k] = count[k] > 0 ? sum[k] / count[k] : 0;
    }
  }
  return out;
}
