/** Small invented frames for the engine's tests: two slits written straight from the formula, with a seeded camera. */
import sharp from 'sharp';

export interface FrameWish {
  widthPx?: number;
  heightPx?: number;
  spacingPx?: number;
  /** d/w */
  ratio?: number;
  visibility?: number;
  tiltDeg?: number;
  zeroX?: number;
  zeroY?: number;
  /** Largest fringe as a share of full scale before clipping. */
  peak?: number;
  offset?: number;
  seed?: number;
  slits?: 0 | 1 | 2 | 5;
  electrons?: number;
}

export interface Grey16 {
  widthPx: number;
  heightPx: number;
  samples: Uint16Array;
}

/** Linear congruential numbers (Numerical Recipes' constants); good enough for noise in a test. */
export function uniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return (state + 0.5) / 4294967296;
  };
}

const sinc = (t: number) => (Math.abs(t) < 1e-9 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t));

function pattern(u: number, wish: Required<FrameWish>): number {
  const m = u / wish.spacingPx;
  const envelope = sinc(m / wish.ratio) ** 2;
  if (wish.slits === 0) return 0;
  if (wish.slits === 1) return envelope;
  if (wish.slits === 5)
    return (
      envelope *
      (Math.abs(Math.sin(Math.PI * m)) < 1e-9
        ? 1
        : (Math.sin(5 * Math.PI * m) / (5 * Math.sin(Math.PI * m))) ** 2)
    );
  return 0.5 * envelope * (1 + wish.visibility * Math.cos(2 * Math.PI * m));
}

/** Pixel means by 3 x 3 points, Gaussian noise of photon and read variance, rounding to 16 bits, clipping at the top. */
export function frame(given: FrameWish): Grey16 {
  const wish: Required<FrameWish> = {
    widthPx: 640,
    heightPx: 120,
    spacingPx: 52.3,
    ratio: 4.6,
    visibility: 0.92,
    tiltDeg: 0.7,
    zeroX: 314.2,
    zeroY: 60.3,
    peak: 0.7,
    offset: 0.01,
    seed: 1,
    slits: 2,
    electrons: 9000,
    ...given,
  };
  const random = uniform(wish.seed * 7919 + 17);
  const normal = () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
  const c = Math.cos((wish.tiltDeg * Math.PI) / 180);
  const s = Math.sin((wish.tiltDeg * Math.PI) / 180);
  const samples = new Uint16Array(wish.widthPx * wish.heightPx);
  for (let y = 0; y < wish.heightPx; y++) {
    for (let x = 0; x < wish.widthPx; x++) {
      let light = 0;
      for (const dy of [1 / 6, 1 / 2, 5 / 6])
        for (const dx of [1 / 6, 1 / 2, 5 / 6])
          light += pattern((x + dx - wish.zeroX) * c + (y + dy - wish.zeroY) * s, wish) / 9;
      const electrons = light * wish.electrons;
      const noisy = electrons + Math.sqrt(electrons + 36) * normal();
      samples[y * wish.widthPx + x] = Math.max(
        0,
        Math.min(65535, Math.round(65535 * (wish.offset + (wish.peak * noisy) / wish.electrons))),
      );
    }
  }
  return { widthPx: wish.widthPx, heightPx: wish.heightPx, samples };
}

export async function tiff16(picture: Grey16): Promise<Uint8Array> {
  return sharp(picture.samples, { raw: { width: picture.widthPx, height: picture.heightPx, channels: 1 } })
    .toColourspace('grey16')
    .tiff({ compression: 'none' })
    .toBuffer();
}

/** A colour photo of red fringes, sRGB encoded, as JPEG. */
export async function redJpeg(picture: Grey16, quality = 92): Promise<Uint8Array> {
  const encode = (v: number) =>
    Math.round(255 * (v <= 0.0031308 ? 12.92 * v : 1.055 * v ** (1 / 2.4) - 0.055));
  const rgb = new Uint8Array(3 * picture.samples.length);
  picture.samples.forEach((v, i) => {
    rgb[3 * i] = encode(v / 65535);
    rgb[3 * i + 1] = encode((0.15 * v) / 65535);
    rgb[3 * i + 2] = encode((0.05 * v) / 65535);
  });
  return sharp(rgb, { raw: { width: picture.widthPx, height: picture.heightPx, channels: 3 } })
    .jpeg({ quality })
    .toBuffer();
}

export function mapped(picture: Grey16, change: (v: number) => number): Grey16 {
  return {
    ...picture,
    samples: Uint16Array.from(picture.samples, (v) => Math.max(0, Math.min(65535, Math.round(change(v))))),
  };
}

export function mirrored(picture: Grey16): Grey16 {
  const { widthPx, heightPx } = picture;
  const samples = new Uint16Array(picture.samples.length);
  for (let y = 0; y < heightPx; y++)
    for (let x = 0; x < widthPx; x++)
      samples[y * widthPx + widthPx - 1 - x] = picture.samples[y * widthPx + x];
  return { widthPx, heightPx, samples };
}

/** A quarter turn clockwise. */
export function turned(picture: Grey16): Grey16 {
  const { widthPx, heightPx } = picture;
  const samples = new Uint16Array(picture.samples.length);
  for (let y = 0; y < heightPx; y++)
    for (let x = 0; x < widthPx; x++)
      samples[x * heightPx + heightPx - 1 - y] = picture.samples[y * widthPx + x];
  return { widthPx: heightPx, heightPx: widthPx, samples };
}
