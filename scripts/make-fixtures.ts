/**
 * `npm run fixtures`: makes every file under fixtures/frames and fixtures/hostile again, from seeds. The truth
 * of each simulated frame stands beside it in truth.json; the hostile files are small on purpose.
 */
import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { crc32, deflateSync } from 'node:zlib';
import sharp from 'sharp';
import { photograph, PLAIN_CAMERA, type Camera } from './simulator/camera';
import { encodeFile, type FileKind } from './simulator/encode';
import { setupOf } from './simulator/family';
import { PLAIN_SCENE, trueSpacingPx, type Scene } from './simulator/scene';

const FRAMES = path.join('fixtures', 'frames');
const HOSTILE = path.join('fixtures', 'hostile');

interface Plan {
  file: string;
  scene?: Partial<Scene>;
  camera?: Partial<Camera>;
  orientation?: number;
  quality?: number;
}

const SMALL: Partial<Scene> = {
  widthPx: 720,
  heightPx: 160,
  zeroXPx: 361.7,
  zeroYPx: 80.4,
  bandHalfPx: 60,
  scaleUmPerPx: 25.4,
  tiltDeg: 0.2,
};

const PLANS: Plan[] = [
  { file: 'clean.tif' },
  { file: 'clean.png', camera: { seed: 2 } },
  { file: 'tilted.tif', scene: { tiltDeg: 2.4 }, camera: { seed: 3 } },
  { file: 'clipped.tif', camera: { seed: 4, peakShare: 1.4 } },
  { file: 'dim.tif', camera: { seed: 5, peakShare: 0.1, peakElectrons: 1500 } },
  {
    file: 'photo.jpg',
    scene: { widthPx: 900, heightPx: 300, zeroXPx: 450, zeroYPx: 150 },
    camera: { seed: 6, bits: 8, offsetCounts: 2, tone: 'srgb', bayer: [1, 0.12, 0.03] },
  },
  {
    file: 'photo-turned.jpg',
    scene: { widthPx: 900, heightPx: 300, zeroXPx: 450, zeroYPx: 150 },
    camera: { seed: 7, bits: 8, offsetCounts: 2, tone: 'srgb', bayer: [1, 0.12, 0.03] },
    orientation: 6,
  },
  {
    file: 'photo.webp',
    camera: { seed: 8, bits: 8, offsetCounts: 2, tone: 'srgb', bayer: [1, 0.12, 0.03] },
    quality: 95,
  },
  { file: 'one-slit.tif', scene: { pattern: 'one', widthUm: 120 }, camera: { seed: 9 } },
  { file: 'black.tif', camera: { seed: 10, peakShare: 0.0001, peakElectrons: 1 } },
];

async function frames(): Promise<void> {
  const truth: Record<string, unknown> = {};
  for (const plan of PLANS) {
    const scene: Scene = { ...PLAIN_SCENE, ...SMALL, ...plan.scene };
    const camera: Camera = { ...PLAIN_CAMERA, ...plan.camera };
    const ending = path.extname(plan.file).slice(1);
    const kind: FileKind = ending === 'tif' ? 'tiff' : ending === 'jpg' ? 'jpeg' : (ending as FileKind);
    const bytes = await encodeFile(photograph(scene, camera), kind, {
      orientation: plan.orientation,
      quality: plan.quality ?? 92,
    });
    await writeFile(path.join(FRAMES, plan.file), bytes);
    truth[plan.file] = {
      pattern: scene.pattern,
      spacingPx: trueSpacingPx(scene),
      wavelengthNm: scene.wavelengthNm,
      tiltDeg: scene.tiltDeg,
      visibility: scene.visibility,
      orientation: plan.orientation ?? 1,
      setup: setupOf(scene),
      camera,
    };
  }
  await writeFile(path.join(FRAMES, 'truth.json'), `${JSON.stringify(truth, null, 1)}\n`);
}

/** Pitch of the drawn ruler's ticks, px; with ticks 1 mm apart the scale is 1000 / 17.3 µm/px. */
const RULER_PITCH_PX = 17.3;

/** A light ruler with ticks of three lengths, turned by 4°, drawn with soft edges and 4 × 4 points a pixel. */
async function ruler(): Promise<void> {
  const width = 700;
  const height = 360;
  const angle = (4 * Math.PI) / 180;
  const light = (x: number, y: number): number => {
    const u = ((x - width / 2) * Math.cos(angle) + (y - height / 2) * Math.sin(angle)) / RULER_PITCH_PX;
    const v = -(x - width / 2) * Math.sin(angle) + (y - height / 2) * Math.cos(angle);
    if (Math.abs(v) > 120) return 0.3;
    const n = Math.round(u);
    const length = n % 10 === 0 ? 95 : n % 5 === 0 ? 72 : 50;
    const dark = v < -120 + length ? 1 / (1 + Math.exp((Math.abs(u - n) * RULER_PITCH_PX - 1.3) / 0.5)) : 0;
    return 0.75 - 0.6 * dark;
  };
  const points = [0.125, 0.375, 0.625, 0.875];
  const samples = new Uint8Array(width * height);
  for (let i = 0; i < samples.length; i += 1) {
    const [x, y] = [i % width, Math.floor(i / width)];
    let sum = 0;
    for (const dy of points) for (const dx of points) sum += light(x + dx, y + dy) / 16;
    samples[i] = Math.round(255 * sum);
  }
  const image = sharp(samples, { raw: { width, height, channels: 1 } }).toColourspace('b-w');
  await writeFile(path.join(FRAMES, 'ruler.png'), await image.png().toBuffer());
}

/** A PNG header that claims a size no memory holds, with an honest checksum and no pixels. */
function pictureBomb(): Buffer {
  const chunk = (name: string, data: Buffer): Buffer => {
    const body = Buffer.concat([Buffer.from(name, 'latin1'), data]);
    const length = Buffer.alloc(4);
    length.writeUInt32BE(data.length);
    const sum = Buffer.alloc(4);
    sum.writeUInt32BE(crc32(body));
    return Buffer.concat([length, body, sum]);
  };
  const header = Buffer.alloc(13);
  header.writeUInt32BE(60_000, 0);
  header.writeUInt32BE(60_000, 4);
  header[8] = 8;
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(Buffer.alloc(60_001))),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

async function hostile(): Promise<void> {
  const scene: Scene = { ...PLAIN_SCENE, ...SMALL };
  const picture = photograph(scene, { ...PLAIN_CAMERA, bits: 8, offsetCounts: 3 });
  const png = await encodeFile(picture, 'png');
  const jpeg = await encodeFile(picture, 'jpeg');
  const grey = sharp(Uint8Array.from(picture.samples), {
    raw: { width: scene.widthPx, height: scene.heightPx, channels: 1 },
  });
  const colour = await grey.clone().toColourspace('srgb').png().toBuffer();
  const page = await sharp(colour).resize(120, 40).png().toBuffer();
  // Frames that are alike would be stored as one.
  const turned = await sharp(page).flop().negate().png().toBuffer();
  const put = (name: string, bytes: Buffer | string) => writeFile(path.join(HOSTILE, name), bytes);
  await put('truncated.png', png.subarray(0, Math.floor(png.length * 0.4)));
  await put('truncated.jpg', jpeg.subarray(0, Math.floor(jpeg.length * 0.5)));
  await put('not-a-picture.png', 'A note beside the camera, and no picture.\n');
  await put('empty.tif', '');
  await put('bomb.png', pictureBomb());
  await put('palette.png', await sharp(colour).png({ palette: true, colours: 16 }).toBuffer());
  await put('cmyk.jpg', await sharp(colour).toColourspace('cmyk').jpeg().toBuffer());
  await put(
    'animated.webp',
    await sharp([page, turned, page], { join: { animated: true } })
      .webp({ delay: [100, 100, 100] })
      .toBuffer(),
  );
  // The first box of a HEIC file as ISO/IEC 23008-12 has it: size, 'ftyp', brand 'heic'. Nothing follows.
  await put('camera.heic', Buffer.from('000000186674797068656963000000006d69663168656963', 'hex'));
  await put('tiny.png', await sharp(colour).resize(16, 9).toColourspace('b-w').png().toBuffer());
}

async function main(): Promise<void> {
  await mkdir(FRAMES, { recursive: true });
  await mkdir(HOSTILE, { recursive: true });
  await frames();
  await ruler();
  await hostile();
}

main().catch((error: unknown) => {
  console.error(error);
  process.exitCode = 1;
});
