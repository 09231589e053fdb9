import { Refused } from './refused';

export type FileKind = 'PNG' | 'JPEG' | 'TIFF' | 'WebP';

const KEEP_AS = 'Save the frame as PNG or TIFF (16 bit) or JPEG and send that.';

/** The kind of a file by its first bytes, never by its name. Refuses what is no picture the engine reads. */
export function sniffKind(b: Uint8Array): FileKind {
  if (b.length === 0)
    throw new Refused('NOT_A_PICTURE', 'The file is empty. Copy it again, then replace it.');
  if (starts(b, [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a])) return 'PNG';
  if (starts(b, [0xff, 0xd8, 0xff])) return 'JPEG';
  if (starts(b, [0x52, 0x49, 0x46, 0x46]) && text(b, 8, 4) === 'WEBP') return 'WebP';
  if (
    starts(b, [0x49, 0x49, 0x2a, 0]) ||
    starts(b, [0x4d, 0x4d, 0, 0x2a]) ||
    starts(b, [0x49, 0x49, 0x2b, 0]) ||
    starts(b, [0x4d, 0x4d, 0, 0x2b])
  ) {
    if (text(b, 8, 2) === 'CR')
      throw new Refused('NOT_A_PICTURE', `This is a raw camera file, which cannot be read. ${KEEP_AS}`);
    return 'TIFF';
  }
  if (text(b, 4, 4) === 'ftyp') refuseContainer(text(b, 8, 4));
  if (text(b, 0, 4) === 'GIF8')
    throw new Refused('PALETTE', `A GIF holds at most 256 picked colours, not measured light. ${KEEP_AS}`);
  if (text(b, 0, 2) === 'BM') throw new Refused('NOT_A_PICTURE', `BMP files are not read. ${KEEP_AS}`);
  throw new Refused(
    'NOT_A_PICTURE',
    `This file is not a picture in PNG, TIFF, JPEG or WebP form. ${KEEP_AS}`,
  );
}

function refuseContainer(brand: string): never {
  if (['heic', 'heix', 'hevc', 'heim', 'heis', 'mif1', 'msf1'].includes(brand)) {
    throw new Refused(
      'HEIC',
      'This is a HEIC photo, which cannot be read. On an iPhone choose Settings, Camera, Formats, Most Compatible; on other phones switch off high-efficiency pictures. Then take the frame again as JPEG.',
    );
  }
  if (brand.startsWith('avi')) throw new Refused('NOT_A_PICTURE', `AVIF files are not read. ${KEEP_AS}`);
  throw new Refused('NOT_A_PICTURE', `This is a film or another container, not a picture. ${KEEP_AS}`);
}

function starts(b: Uint8Array, head: number[]): boolean {
  return b.length >= head.length && head.every((v, i) => b[i] === v);
}

function text(b: Uint8Array, at: number, length: number): string {
  return b.length < at + length ? '' : String.fromCharCode(...b.subarray(at, at + length));
}

export interface PngFacts {
  widthPx: number;
  heightPx: number;
  colourType: number;
  bitDepth: number;
  animated: boolean;
  complete: boolean;
  /** gAMA value (0.45455 for 1/2.2); null where the chunk is absent. */
  gamma: number | null;
  srgb: boolean;
}

/** Header facts of a PNG that decide whether it may be decoded. Source: PNG specification, third edition. */
export function readPng(b: Uint8Array): PngFacts {
  const view = new DataView(b.buffer, b.byteOffset, b.byteLength);
  const facts: PngFacts = {
    widthPx: b.length >= 24 ? view.getUint32(16) : 0,
    heightPx: b.length >= 24 ? view.getUint32(20) : 0,
    colourType: b[25] ?? 0,
    bitDepth: b[24] ?? 0,
    animated: false,
    complete: false,
    gamma: null,
    srgb: false,
  };
  let at = 8;
  while (at + 8 <= b.length) {
    const length = view.getUint32(at);
    const name = text(b, at + 4, 4);
    if (name === 'acTL') facts.animated = true;
    if (name === 'sRGB') facts.srgb = true;
    if (name === 'gAMA' && at + 12 <= b.length) facts.gamma = view.getUint32(at + 8) / 100000;
    if (name === 'IEND') {
      facts.complete = true;
      break;
    }
    at += 12 + length;
  }
  return facts;
}

/** Sum of the standard luminance table (ITU-T T.81, K.1), which quality 50 uses as it is. */
const STANDARD_LUMINANCE_SUM = 3690;

/** Quality 1 to 100 after the common scaling of the standard tables; null where no table is found. */
export function jpegQuality(b: Uint8Array): number | null {
  let at = 2;
  while (at + 4 < b.length && b[at] === 0xff) {
    const marker = b[at + 1];
    if (marker === 0xff) {
      at += 1;
      continue;
    }
    if (marker === 0xda) return null;
    const length = (b[at + 2] << 8) | b[at + 3];
    if (marker === 0xdb && at + 2 + length <= b.length) {
      const wide = b[at + 4] >> 4 !== 0;
      let sum = 0;
      for (let i = 0; i < 64; i++) sum += wide ? (b[at + 5 + 2 * i] << 8) | b[at + 6 + 2 * i] : b[at + 5 + i];
      const scale = (100 * sum) / STANDARD_LUMINANCE_SUM;
      const quality = scale <= 100 ? (200 - scale) / 2 : 5000 / scale;
      return Math.max(1, Math.min(100, Math.round(quality)));
    }
    at += 2 + length;
  }
  return null;
}

export interface TiffFacts {
  palette: boolean;
  /** Samples are not whole numbers of 8 or 16 bits. */
  floating: boolean;
  wide: boolean;
}

/** First directory of a TIFF: PhotometricInterpretation 262, BitsPerSample 258, SampleFormat 339. Source: TIFF 6.0, section 8. */
export function readTiff(b: Uint8Array): TiffFacts {
  const facts: TiffFacts = { palette: false, floating: false, wide: false };
  const view = new DataView(b.buffer, b.byteOffset, b.byteLength);
  const little = b[0] === 0x49;
  if (b[2] === 0x2b || b[3] === 0x2b || b.length < 16) return facts;
  const directory = view.getUint32(4, little);
  if (directory + 2 > b.length) return facts;
  const entries = view.getUint16(directory, little);
  for (let i = 0; i < entries; i++) {
    const at = directory + 2 + 12 * i;
    if (at + 12 > b.length) return facts;
    const tag = view.getUint16(at, little);
    const count = view.getUint32(at + 4, little);
    // Up to two 16-bit values stand in the entry itself, more of them elsewhere.
    const place = count > 2 ? view.getUint32(at + 8, little) : at + 8;
    if (place + 2 > b.length) continue;
    const value = view.getUint16(place, little);
    if (tag === 262) facts.palette = value === 3;
    if (tag === 339) facts.floating = value === 3;
    if (tag === 258) facts.wide = value > 16;
  }
  return facts;
}
