/** From a file's bytes to one channel of codes. The only place that knows sharp. */
import sharp, { type Metadata, type Sharp } from 'sharp';
import { chooseChannel, type ChannelChoice } from './channel';
import { iccToneCurve } from './icc';
import { asRefused, paletteRefusal, samplesRefusal, tooManyPixels, truncated } from './file-refusals';
import { findLevels, histogram } from './levels';
import { turnUpright } from './orientation';
import { COARSE_PIXELS, type Picture, type SourceFacts } from './picture';
import { Refused, type PictureBrief } from './refused';
import { jpegQuality, readPng, readTiff, sniffKind, type FileKind, type PngFacts } from './sniff';
import { LINEAR, SRGB, exponentCurve, lightTable, type ToneCurve } from './tone';

export interface DecodeLimits {
  fileBytes: number;
  filePixels: number;
}

export type ToneWish = 'auto' | 'linear' | 'srgb';

/** Shortest side with room for three fringes of the finest kind and the bands along them. */
const SMALLEST_SIDE_PX = 24;
const SMALLEST_LONG_SIDE_PX = 48;
/** A lossy colour file above this size is looked at in small before the channel is decoded at full size. */
const LOOK_FIRST_PIXELS = 1_500_000;
const LOOK_SIDE_PX = 500;
/** Reductions that a JPEG decoder makes on its way, by computing fewer pixels of each block. */
const DECODER_FACTORS = [4, 8];
/** Red: most two-slit frames are of red light. */
const LIKELY_CHANNEL = 0;

interface Header {
  kind: FileKind;
  meta: Metadata;
  png: PngFacts | null;
  brief: PictureBrief;
  bits: 8 | 16;
  colour: boolean;
}

/** Decodes the channel that carries the light. Refuses, with a code and a sentence, what cannot be measured. */
export async function decodePicture(
  bytes: Uint8Array,
  wish: ToneWish,
  limits: DecodeLimits,
): Promise<Picture> {
  if (bytes.length > limits.fileBytes) {
    throw new Refused(
      'TOO_LARGE',
      `The file has ${Math.round(bytes.length / 1e6)} MB; at most ${Math.round(limits.fileBytes / 1048576)} MB are read. Crop the frame to the fringes or store it compressed without loss.`,
    );
  }
  const header = await readHeader(bytes, limits);
  try {
    return await decodeChannel(bytes, header, wish, limits);
  } catch (error) {
    throw asRefused(error, header.brief);
  }
}

async function readHeader(bytes: Uint8Array, limits: DecodeLimits): Promise<Header> {
  const kind = sniffKind(bytes);
  const png = kind === 'PNG' ? readPng(bytes) : null;
  if (png && png.widthPx * png.heightPx > limits.filePixels)
    throw tooManyPixels(limits, { widthPx: png.widthPx, heightPx: png.heightPx, format: kind });
  const tiff = kind === 'TIFF' ? readTiff(bytes) : null;
  if (tiff?.palette) throw paletteRefusal(null);
  if (tiff && (tiff.floating || tiff.wide)) throw samplesRefusal(tiff.floating, null);
  let meta: Metadata;
  try {
    meta = await open(bytes, limits).metadata();
  } catch (error) {
    throw asRefused(error, null, limits);
  }
  const turned = (meta.orientation ?? 1) >= 5;
  const brief: PictureBrief = {
    widthPx: turned ? meta.height : meta.width,
    heightPx: turned ? meta.width : meta.height,
    format: kind,
  };
  refuseUnmeasurable(kind, meta, png, brief, limits);
  const bits = meta.depth === 'ushort' || meta.depth === 'short' ? 16 : 8;
  return { kind, meta, png, brief, bits, colour: (meta.channels ?? 3) >= 3 };
}

function refuseUnmeasurable(
  kind: FileKind,
  meta: Metadata,
  png: PngFacts | null,
  brief: PictureBrief,
  limits: DecodeLimits,
): void {
  const pixels = brief.widthPx * brief.heightPx;
  if (pixels > limits.filePixels) throw tooManyPixels(limits, brief);
  if ((meta.pages ?? 1) > 1 || png?.animated) {
    throw new Refused(
      'ANIMATED',
      'The file holds several pictures. Save the one to be measured as a file of its own.',
      brief,
    );
  }
  if (png?.colourType === 3 || meta.isPalette === true) {
    throw paletteRefusal(brief);
  }
  if (meta.space === 'cmyk') {
    throw new Refused(
      'CMYK',
      'The file is made for printing (CMYK); its numbers are ink, not light. Save the camera frame as RGB or grey.',
      brief,
    );
  }
  if (meta.depth && !['uchar', 'ushort', 'char', 'short'].includes(meta.depth)) {
    throw samplesRefusal(meta.depth === 'float' || meta.depth === 'double', brief);
  }
  if (
    Math.min(brief.widthPx, brief.heightPx) < SMALLEST_SIDE_PX ||
    Math.max(brief.widthPx, brief.heightPx) < SMALLEST_LONG_SIDE_PX
  ) {
    throw new Refused(
      'TOO_SMALL',
      `The picture has ${brief.widthPx} by ${brief.heightPx} px. At least ${SMALLEST_LONG_SIDE_PX} by ${SMALLEST_SIDE_PX} px are needed.`,
      brief,
    );
  }
  if (kind === 'PNG' && png && !png.complete) throw truncated(brief);
}

async function decodeChannel(
  bytes: Uint8Array,
  header: Header,
  wish: ToneWish,
  limits: DecodeLimits,
): Promise<Picture> {
  const { kind, meta, bits, brief } = header;
  const curveOf = (channel: 'grey' | 'red' | 'green' | 'blue') => toneFor(header, wish, channel);
  const stored = await storedChannel(bytes, header, limits, () =>
    lightTable(curveOf('red'), bits, bits === 16 ? 65535 : 255),
  );
  const { choice } = stored;
  const upright = <T extends Uint8Array | Uint16Array>(codes: T, factor: number): T =>
    turnUpright(codes, meta.width / factor, meta.height / factor, meta.orientation ?? 1);
  const samples = upright(stored.samples, 1);
  const small = stored.small && {
    samples: upright(stored.small.samples, stored.small.factor),
    factor: stored.small.factor,
  };
  const lossy = kind === 'JPEG' || kind === 'WebP';
  const levels = findLevels(histogram(samples, bits, brief.widthPx), bits, lossy);
  const curve = curveOf(channelName(choice));
  const source: SourceFacts = {
    format: `${kind}, ${bits} bit`,
    channel: choice.name,
    tone: curve.kind,
    toneBecause: curve.because,
    colour: choice.colour,
    jpegQuality: kind === 'JPEG' ? jpegQuality(bytes) : null,
    chromaSubsampling: meta.chromaSubsampling ?? null,
    lossy,
  };
  return {
    widthPx: brief.widthPx,
    heightPx: brief.heightPx,
    samples,
    bits,
    light: lightTable(curve, bits, levels.whiteCode),
    clipCode: levels.clipCode,
    floorCode: levels.floorCode,
    small,
    source,
  };
}

interface StoredChannel {
  choice: ChannelChoice;
  /** As the file has them, before the orientation tag. */
  samples: Uint8Array | Uint16Array;
  small: { samples: Uint8Array; factor: number } | null;
}

async function storedChannel(
  bytes: Uint8Array,
  header: Header,
  limits: DecodeLimits,
  lookLight: () => Float32Array,
): Promise<StoredChannel> {
  const { kind, bits, colour, brief } = header;
  if (!colour) {
    const grey = open(bytes, limits)
      .extractChannel(0)
      .toColourspace(bits === 16 ? 'grey16' : 'b-w');
    return {
      choice: { index: 0, name: 'grey', colour: false, clippedShare: [] },
      samples: await rawSamples(grey, bits),
      small: null,
    };
  }
  if (kind === 'JPEG' && brief.widthPx * brief.heightPx > LOOK_FIRST_PIXELS)
    return decodeAfterLook(bytes, header, limits, lookLight());
  return decodeAllChannels(bytes, header, limits, lookLight());
}

/**
 * A large JPEG: the channel is chosen on a small picture, which costs little to decode. The channel that carries most
 * lasers is decoded meanwhile, and another one only where the small picture says so.
 */
async function decodeAfterLook(
  bytes: Uint8Array,
  header: Header,
  limits: DecodeLimits,
  lookLight: Float32Array,
): Promise<StoredChannel> {
  const channel = (index: ChannelChoice['index']) => rawSamples(open(bytes, limits).extractChannel(index), 8);
  const [look, guessed] = await Promise.all([
    lookAt(bytes, header.meta, limits, lookLight),
    channel(LIKELY_CHANNEL),
  ]);
  const { choice, small } = look;
  return { choice, small, samples: choice.index === LIKELY_CHANNEL ? guessed : await channel(choice.index) };
}

/** The small picture: a whole-number reduction that the decoder itself makes where the sides allow it, else any small size. */
async function lookAt(
  bytes: Uint8Array,
  meta: Metadata,
  limits: DecodeLimits,
  lookLight: Float32Array,
): Promise<Pick<StoredChannel, 'choice' | 'small'>> {
  const { width, height } = meta;
  const factor = DECODER_FACTORS.find(
    (f) => width % f === 0 && height % f === 0 && (width / f) * (height / f) <= COARSE_PIXELS,
  );
  const size = factor
    ? ({ width: width / factor, height: height / factor, fit: 'fill' } as const)
    : ({ width: LOOK_SIDE_PX, height: LOOK_SIDE_PX, fit: 'inside' } as const);
  const { data, info } = await open(bytes, limits).resize(size).raw().toBuffer({ resolveWithObject: true });
  const rgb = new Uint8Array(data);
  const choice = chooseChannel(rgb, info.width, info.height, lookLight);
  if (!factor) return { choice, small: null };
  const samples = new Uint8Array(info.width * info.height);
  for (let i = 0, j: number = choice.index; i < samples.length; i++, j += info.channels) samples[i] = rgb[j];
  return { choice, small: { samples, factor } };
}

const channelName = (choice: ChannelChoice) =>
  choice.name === 'red' || choice.name === 'green' || choice.name === 'blue' ? choice.name : 'grey';

/** Small and lossless colour files: every channel is decoded once, then one is kept. */
async function decodeAllChannels(
  bytes: Uint8Array,
  header: Header,
  limits: DecodeLimits,
  lookLight: Float32Array,
): Promise<StoredChannel> {
  const { meta, bits, brief } = header;
  const { width, height } = meta;
  const pipeline = open(bytes, limits);
  const rgb = await rawSamples(
    (meta.hasAlpha ? pipeline : pipeline.removeAlpha()).toColourspace(bits === 16 ? 'rgb16' : 'srgb'),
    bits,
  );
  const n = width * height;
  const stride = Math.round(rgb.length / n);
  const look = Math.max(1, Math.floor(Math.max(width, height) / LOOK_SIDE_PX));
  const small = thinned(rgb, width, height, stride, look);
  if (stride === 4) refuseAlphaOnly(small.rgb, rgb, n, brief);
  const choice = chooseChannel(small.rgb, small.widthPx, small.heightPx, lookLight);
  const samples = bits === 16 ? new Uint16Array(n) : new Uint8Array(n);
  for (let i = 0, j = choice.index; i < n; i++, j += stride) samples[i] = rgb[j];
  return { choice, samples, small: null };
}

function thinned(
  rgb: Uint8Array | Uint16Array,
  widthPx: number,
  heightPx: number,
  stride: number,
  step: number,
): { rgb: Uint16Array; widthPx: number; heightPx: number } {
  const w = Math.floor(widthPx / step);
  const h = Math.floor(heightPx / step);
  const out = new Uint16Array(3 * w * h);
  for (let y = 0, k = 0; y < h; y++) {
    for (let x = 0; x < w; x++) {
      const at = (y * step * widthPx + x * step) * stride;
      out[k++] = rgb[at];
      out[k++] = rgb[at + 1];
      out[k++] = rgb[at + 2];
    }
  }
  return { rgb: out, widthPx: w, heightPx: h };
}

/** A file whose colour is one and the same everywhere while its transparency varies holds no measured light. */
function refuseAlphaOnly(
  small: Uint16Array,
  all: Uint8Array | Uint16Array,
  n: number,
  brief: PictureBrief,
): void {
  for (let i = 3; i < small.length; i++) if (small[i] !== small[i - 3]) return;
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < n; i += 7) {
    const a = all[4 * i + 3];
    if (a < low) low = a;
    if (a > high) high = a;
  }
  if (high > low)
    throw new Refused(
      'ALPHA_ONLY',
      'The picture is drawn in transparency only; its colours hold no light. Save it without transparency.',
      brief,
    );
}

/** Tone in order of trust: the person's choice, the file's profile or chunks, the habit of its kind. */
function toneFor(header: Header, wish: ToneWish, channel: 'grey' | 'red' | 'green' | 'blue'): ToneCurve {
  const { kind, meta, png, bits, colour } = header;
  if (wish === 'linear') return LINEAR('chosen: linear');
  if (wish === 'srgb') return SRGB('chosen: sRGB');
  if (meta.icc) {
    const curve = iccToneCurve(new Uint8Array(meta.icc), colour ? channel : 'grey');
    if (curve) return curve;
  }
  if (png?.srgb) return SRGB('sRGB chunk in the file');
  if (png && png.gamma !== null && png.gamma > 0)
    return exponentCurve(1 / png.gamma, `gamma chunk in the file (${png.gamma})`);
  if (kind === 'JPEG' || kind === 'WebP') return SRGB(`${kind} without a profile is taken as sRGB`);
  if (colour && bits === 8) return SRGB('8 bit colour without a profile is taken as sRGB');
  return LINEAR(`${colour ? '16 bit colour' : 'grey'} ${kind} without a profile is taken as linear`);
}

function open(bytes: Uint8Array, limits: DecodeLimits): Sharp {
  return sharp(bytes, { limitInputPixels: limits.filePixels, ignoreIcc: true, failOn: 'warning' });
}

async function rawSamples(pipeline: Sharp, bits: 8 | 16): Promise<Uint8Array | Uint16Array> {
  if (bits === 8) {
    const data = await pipeline.raw().toBuffer();
    return new Uint8Array(data.buffer, data.byteOffset, data.length);
  }
  const data = await pipeline.raw({ depth: 'ushort' }).toBuffer();
  const bytes = data.byteOffset % 2 === 0 ? data : Uint8Array.prototype.slice.call(data);
  return new Uint16Array(bytes.buffer, bytes.byteOffset, bytes.length / 2);
}

export interface Preview {
  webp: Uint8Array;
  widthPx: number;
  heightPx: number;
}

const PREVIEW_LONG_SIDE_PX = 1600;

/** The picture as a person sees it: oriented, 8 bit, at most 1600 px, not stretched; null where it cannot be read. */
export async function renderPreview(bytes: Uint8Array, limits: DecodeLimits): Promise<Preview | null> {
  try {
    sniffKind(bytes);
    const { data, info } = await sharp(bytes, { limitInputPixels: limits.filePixels })
      .autoOrient()
      .resize({
        width: PREVIEW_LONG_SIDE_PX,
        height: PREVIEW_LONG_SIDE_PX,
        fit: 'inside',
        withoutEnlargement: true,
      })
      .webp({ quality: 82 })
      .toBuffer({ resolveWithObject: true });
    return { webp: new Uint8Array(data), widthPx: info.width, heightPx: info.height };
  } catch (error) {
    if (asRefused(error, null, limits) instanceof Refused) return null;
    throw error;
  }
}
