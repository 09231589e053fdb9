import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { promisify } from 'node:util';
import sharp from 'sharp';
import { analyseFrame, measureFrame } from '@/lib/measure/analyse-frame';
import { measureStack } from '@/lib/measure/measure-stack';
import type { SetupValues } from '@/lib/domain/reading-result';
import { photograph, PLAIN_CAMERA, type Camera } from '../simulator/camera';
import { encodeFile } from '../simulator/encode';
import { setupOf, withSpacing } from '../simulator/family';
import { PLAIN_SCENE, type Scene } from '../simulator/scene';
import { Table, type Section } from './section';
import { median, medianInterval } from './statistics';

const run = promisify(execFile);

const BIG = { widthPx: 6000, heightPx: 4000 };
const LARGE_JPEGS = [
  {
    name: '24-megapixel JPEG, fringes fill the frame',
    most: 1.6,
    spacingPx: 240,
    widthUm: 20,
    bandHalfPx: Infinity,
  },
  {
    name: '24-megapixel JPEG, fringes fill a quarter',
    most: 1.3,
    spacingPx: 120,
    widthUm: 45,
    bandHalfPx: 480,
  },
];
/** Bundled beside this program. */
const MEMORY = path.join(process.cwd(), '.build', 'bench', 'memory.cjs');
const LARGE_RUNS = 5;
const MOST_MEMORY = 5;
const MOST_MS = 60;
const MOST_REFIT_MS = 30;
const WARM_UP = 6;
const RUNS = 15;

const clock = (): number => performance.now();

const sceneOf = (change: Partial<Scene>, spacingPx: number): Scene =>
  withSpacing({ ...PLAIN_SCENE, ...change }, spacingPx);

async function timed(work: () => unknown): Promise<number> {
  const before = clock();
  await work();
  return clock() - before;
}

const ms = (values: readonly number[]): string => {
  const [low, high] = medianInterval(values);
  return `${median(values).toFixed(1)} (${low.toFixed(1)} to ${high.toFixed(1)})`;
};

/** A photo of red fringes as a colour JPEG: the light of the scene in red, little of it in green and blue. */
async function redJpeg(scene: Scene): Promise<Buffer> {
  const camera: Camera = { ...PLAIN_CAMERA, bits: 8, offsetCounts: 3, tone: 'srgb', peakElectrons: 4000 };
  const grey = photograph(scene, camera);
  const samples = new Uint16Array(3 * grey.samples.length);
  for (let i = 0; i < grey.samples.length; i += 1) {
    samples[3 * i] = grey.samples[i];
    samples[3 * i + 1] = grey.samples[i] >> 2;
    samples[3 * i + 2] = grey.samples[i] >> 3;
  }
  return encodeFile({ ...grey, channels: 3, samples }, 'jpeg', { quality: 92 });
}

/** Peak memory above idle of one analysis, in a process of its own. */
async function peakBytes(file: Buffer, setup: SetupValues): Promise<number> {
  const folder = await mkdtemp(path.join(tmpdir(), 'midfringe-bench-'));
  try {
    const name = path.join(folder, 'frame.jpg');
    await writeFile(name, file);
    const { stdout } = await run(process.execPath, ['--expose-gc', MEMORY, name, JSON.stringify(setup)]);
    return Number(stdout);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

async function largeJpegs(table: Table): Promise<void> {
  for (const { name, most, spacingPx, widthUm, bandHalfPx } of LARGE_JPEGS) {
    const scene = sceneOf(
      { ...BIG, zeroXPx: 3010, zeroYPx: 2020, tiltDeg: 1.3, widthUm, bandHalfPx },
      spacingPx,
    );
    const file = await redJpeg(scene);
    const setup = setupOf(scene);
    const decodes: number[] = [];
    const wholes: number[] = [];
    for (let i = -1; i < LARGE_RUNS; i += 1) {
      const decode = await timed(() => sharp(file).raw().toBuffer());
      const whole = await timed(() => analyseFrame(file, setup, {}));
      // The first of each warms up.
      if (i < 0) continue;
      decodes.push(decode);
      wholes.push(whole);
    }
    const memory = (await peakBytes(file, setup)) / (BIG.widthPx * BIG.heightPx);
    const ratio = median(wholes) / median(decodes);
    const missed: string[] = [];
    if (Math.min(...wholes) / Math.max(...decodes) > most) missed.push(`above ${most} × decode alone`);
    if (memory > MOST_MEMORY) missed.push(`memory above ${MOST_MEMORY} × frame`);
    table.add(
      [name, ms(wholes), ms(decodes), `${ratio.toFixed(2)} (at most ${most})`, memory.toFixed(1)],
      missed,
    );
  }
}

async function oneMegapixel(table: Table): Promise<void> {
  const scene = sceneOf({ widthPx: 1024, heightPx: 1024, zeroYPx: 515, tiltDeg: 0.2 }, 80);
  const file = await encodeFile(photograph(scene, PLAIN_CAMERA), 'tiff');
  const wholes: number[] = [];
  const decodes: number[] = [];
  for (let i = -WARM_UP; i < RUNS; i += 1) {
    const decode = await timed(() => sharp(file).raw().toBuffer());
    const whole = await timed(() => analyseFrame(file, setupOf(scene), {}));
    if (i < 0) continue;
    wholes.push(whole);
    decodes.push(decode);
  }
  const missed = medianInterval(wholes)[0] > MOST_MS ? [`above ${MOST_MS} ms`] : [];
  table.add(['1 megapixel, 16 bit TIFF', ms(wholes), ms(decodes), `at most ${MOST_MS} ms`, ''], missed);
}

async function refit(table: Table): Promise<void> {
  const scene = sceneOf(
    { widthPx: 4096, heightPx: 512, zeroXPx: 2031, zeroYPx: 255, tiltDeg: 0.2, widthUm: 10 },
    45,
  );
  const setup = setupOf(scene);
  const file = await encodeFile(photograph(scene, PLAIN_CAMERA), 'tiff');
  const whole = { cxPx: 2048, cyPx: 256, lengthPx: 4096, heightPx: 512, angleDeg: 0.2 };
  const measured = await measureFrame(file, setup, { region: whole });
  if (!('result' in measured)) {
    table.add(['re-fit from a band stack', measured.code, '', '', ''], ['not answered']);
    return;
  }
  const { stack } = measured;
  const { region } = stack.plan;
  const times: number[] = [];
  for (let i = -WARM_UP; i < RUNS; i += 1) {
    // Every run has a region of its own, as while an edge is dragged.
    const moved = { ...region, lengthPx: region.lengthPx - 2 * Math.abs(i) };
    const time = await timed(() => measureStack(stack, setup, { region: moved }));
    if (i >= 0) times.push(time);
  }
  const missed = medianInterval(times)[0] > MOST_REFIT_MS ? [`above ${MOST_REFIT_MS} ms`] : [];
  const size = `${stack.bands.bins} points × ${stack.bands.bands} bands`;
  table.add([`re-fit from a band stack, ${size}`, ms(times), '', `at most ${MOST_REFIT_MS} ms`, ''], missed);
}

/** Time and memory, after a warm-up; medians with their intervals. A target is missed when the interval lies beyond it. */
export async function benchSpeed(): Promise<Section> {
  const table = new Table([
    'speed',
    'whole, ms',
    'decode alone, ms',
    'ratio or limit',
    'peak memory ÷ frame',
    'target',
  ]);
  await oneMegapixel(table);
  await refit(table);
  await largeJpegs(table);
  return table;
}
