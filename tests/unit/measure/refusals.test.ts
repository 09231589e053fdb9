/** Every reason not to answer has its code and a sentence. Files are made here; the numbers in them are invented. */
import sharp from 'sharp';
import { REFUSALS, type RefusalCode } from '@/lib/domain/reading-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { frame, mapped, tiff16, uniform } from './helpers/frames';

const text = (s: string) => Uint8Array.from(s, (c) => c.charCodeAt(0));
const rgb = (width: number, height: number, at: (x: number, y: number) => number[]) => {
  const channels = at(0, 0).length as 1 | 3 | 4;
  const data = new Uint8Array(width * height * channels);
  for (let y = 0; y < height; y++)
    for (let x = 0; x < width; x++) data.set(at(x, y), (y * width + x) * channels);
  return sharp(data, { raw: { width, height, channels } });
};
const stripes = (x: number) => [Math.round(120 + 100 * Math.cos(x / 4)), 20, 10];

/** Header of a PNG that claims a size it does not have. */
function bomb(): Uint8Array {
  const b = new Uint8Array(8 + 25 + 12);
  b.set([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52]);
  new DataView(b.buffer).setUint32(16, 60000);
  new DataView(b.buffer).setUint32(20, 60000);
  b[24] = 8;
  b.set([0x73, 0x1e, 0x2b, 0x1f], 29);
  b.set([0, 0, 0, 0, 0x49, 0x45, 0x4e, 0x44, 0xae, 0x42, 0x60, 0x82], 33);
  return b;
}

/** A bare TIFF head with one directory: sample format, bits, photometric interpretation. */
function tiffWith(format: number, bits: number, photometric: number): Uint8Array {
  const b = new Uint8Array(4096);
  const view = new DataView(b.buffer);
  b.set([0x49, 0x49, 0x2a, 0]);
  view.setUint32(4, 8, true);
  const entries = [
    [256, 100],
    [257, 60],
    [258, bits],
    [262, photometric],
    [277, 1],
    [339, format],
  ];
  view.setUint16(8, entries.length, true);
  entries.forEach(([tag, value], i) => {
    view.setUint16(10 + 12 * i, tag, true);
    view.setUint16(12 + 12 * i, 3, true);
    view.setUint32(14 + 12 * i, 1, true);
    view.setUint16(18 + 12 * i, value, true);
  });
  return b;
}

const FILES: [string, RefusalCode[], () => Promise<Uint8Array>][] = [
  ['an empty file', ['NOT_A_PICTURE'], async () => new Uint8Array(0)],
  ['a text file', ['NOT_A_PICTURE'], async () => text('position, light\n1, 2\n')],
  ['a HEIC photo', ['HEIC'], async () => text('\0\0\0\x18ftypheic\0\0\0\0mif1heic')],
  [
    'a GIF',
    ['PALETTE'],
    async () =>
      sharp(await rgb(80, 60, stripes).png().toBuffer())
        .gif()
        .toBuffer(),
  ],
  [
    'a PNG with a palette',
    ['PALETTE'],
    async () => rgb(160, 60, stripes).png({ palette: true, colours: 16 }).toBuffer(),
  ],
  ['a CMYK JPEG', ['CMYK'], async () => rgb(160, 60, stripes).toColourspace('cmyk').jpeg().toBuffer()],
  [
    'a PNG cut short',
    ['TRUNCATED_FILE'],
    async () => (await rgb(160, 60, stripes).png({ compressionLevel: 0 }).toBuffer()).subarray(0, 9000),
  ],
  [
    'a JPEG cut short',
    ['TRUNCATED_FILE', 'BROKEN_FILE'],
    async () => (await rgb(400, 300, stripes).jpeg({ quality: 95 }).toBuffer()).subarray(0, 3000),
  ],
  [
    'a TIFF cut short',
    ['TRUNCATED_FILE', 'BROKEN_FILE'],
    async () => (await tiff16(frame({}))).subarray(0, 20000),
  ],
  [
    'noise behind a JPEG head',
    ['BROKEN_FILE', 'TRUNCATED_FILE'],
    async () =>
      Uint8Array.from({ length: 4000 }, (_, i) => (i < 3 ? [0xff, 0xd8, 0xff][i] : (i * 7919) & 255)),
  ],
  ['a picture bomb', ['TOO_MANY_PIXELS'], async () => bomb()],
  ['a thumbnail', ['TOO_SMALL'], async () => rgb(30, 20, stripes).png().toBuffer()],
  ['a floating-point TIFF', ['FLOAT_SAMPLES'], async () => tiffWith(3, 32, 1)],
  ['a TIFF with a palette', ['PALETTE'], async () => tiffWith(1, 8, 3)],
  [
    'a drawing in transparency only',
    ['ALPHA_ONLY'],
    async () =>
      rgb(160, 60, (x) => [9, 9, 9, stripes(x)[0]])
        .png()
        .toBuffer(),
  ],
];

describe('files at fault', () => {
  it.each(FILES)('%s', async (_name, codes, make) => {
    const answer = await analyseFrame(await make(), {}, {});
    expect(answer.ok).toBe(false);
    if (answer.ok) return;
    expect(codes).toContain(answer.code);
    expect(answer.fileAtFault).toBe(true);
    expect(answer.message).toMatch(/^[A-Z].*\.$/);
  });
});

const noise = (level: number) =>
  mapped(
    { widthPx: 400, heightPx: 200, samples: new Uint16Array(80000) },
    (
      (r) => () =>
        level + 200 * r()
    )(uniform(3)),
  );
const FRAMES: [string, RefusalCode[], () => Promise<Uint8Array>][] = [
  ['noise', ['NO_FRINGES'], () => tiff16(noise(20000))],
  ['darkness', ['TOO_DARK', 'NO_FRINGES'], () => tiff16(noise(100))],
  ['a burnt-out frame', ['BURNT_OUT'], () => tiff16(mapped(noise(20000), () => 65535))],
  ['one slit', ['ONE_SLIT'], () => tiff16(frame({ slits: 1, ratio: 1, spacingPx: 70 }))],
  ['five slits', ['MANY_SLITS'], () => tiff16(frame({ slits: 5, ratio: 6 }))],
  [
    'a fringe and a half',
    ['TOO_FEW_FRINGES', 'NO_FRINGES', 'PATTERN_CUT'],
    () => tiff16(frame({ spacingPx: 420 })),
  ],
  [
    'a chessboard',
    ['NO_FRINGES'],
    () =>
      rgb(400, 300, (x, y) => [(Math.floor(x / 25) + Math.floor(y / 25)) % 2 ? 210 : 40])
        .toColourspace('b-w')
        .png()
        .toBuffer(),
  ],
];

describe('frames without a two-slit answer', () => {
  it.each(FRAMES)('%s', async (_name, codes, make) => {
    const answer = await analyseFrame(await make(), {}, {});
    expect(answer.ok).toBe(false);
    if (answer.ok) return;
    expect(codes).toContain(answer.code);
    expect(REFUSALS[answer.code]).toBe(false);
    expect(answer.picture).not.toBeNull();
  });
});
