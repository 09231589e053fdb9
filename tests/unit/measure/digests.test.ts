/**
 * Same bytes, region, options and engine version give the same digits, in any process and any thread: the SHA-256 of
 * whole answers is pinned here. A change of one digit of one answer needs a new ENGINE_VERSION, since readings are stored
 * under it and are made again by it.
 */
import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdirSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import path from 'node:path';
import { promisify } from 'node:util';
import { Worker } from 'node:worker_threads';
import type { FitOptions, FrameAnswer, SetupValues } from '@/lib/domain/reading-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { ENGINE_VERSION } from '@/lib/measure/engine-version';

jest.setTimeout(120_000);

const ROOT = path.resolve(__dirname, '../../..');
const FRAMES = path.join(ROOT, 'fixtures/frames');
const truth = JSON.parse(readFileSync(path.join(FRAMES, 'truth.json'), 'utf8')) as Record<
  string,
  { setup: SetupValues }
>;

/** Pinned together: the version, and what that version answers. */
const PINNED = {
  engine: '0.6.1',
  digests: {
    'clean.tif': '43ec83e0cdc4fff9bd681d1b84db38b583c95bcdb88db13a2952101fccd45b43',
    'tilted.tif, a region of its own': '3df1f9930261f67a4d53977c0af831f9080ab39cd4e0eb0e2f01afe4f62c4416',
    'clipped.tif, orders left out': '14e2df58f13f110309bdc4add0dce1caa0370705d68ef47ecd7f9c451b85ea9e',
    'photo.jpg': '031d0230bf04529d7521e4413382dc60cf822a9f3748a9d17f0a97d16d6813b4',
    'photo-turned.jpg': '8d70143b0ba632ca9ec4968489b625b38329dd0ed3860248ea8278ebc3d127c6',
    'one-slit.tif': '18c07e9c7a739830d250c0a6c1dd012a12a5b91c5813ba5cd835c4bd8d8d4b6c',
  } as Record<string, string>,
};

const REGION = { cxPx: 500, cyPx: 130, lengthPx: 700, heightPx: 90, angleDeg: 1.5 };

function optionsFor(name: string): FitOptions {
  if (name.endsWith('a region of its own')) return { region: REGION };
  if (name.endsWith('orders left out')) return { leaveOut: [1, -2.5], zeroShift: 1 };
  return {};
}

const bytesFor = (name: string) => new Uint8Array(readFileSync(path.join(FRAMES, name.split(',')[0])));
const setupFor = (name: string) => truth[name.split(',')[0]].setup;

/** Everything but the milliseconds. */
function digestOf(answer: FrameAnswer): string {
  return createHash('sha256')
    .update(JSON.stringify({ ...answer, ms: null }))
    .digest('hex');
}

const analyse = async (name: string) =>
  digestOf(await analyseFrame(bytesFor(name), setupFor(name), optionsFor(name)));

describe('answers of this engine', () => {
  test('are pinned for this very version', () => {
    if (PINNED.engine !== ENGINE_VERSION)
      throw new Error(
        `The digests here are those of engine ${PINNED.engine}, this is ${ENGINE_VERSION}. Pin the new ones, which the tests below print.`,
      );
  });

  test.each(Object.entries(PINNED.digests))('%s', async (name, pinned) => {
    const digest = await analyse(name);
    if (digest !== pinned)
      throw new Error(
        `A digit of the answer changed. That needs a new ENGINE_VERSION in lib/measure/engine-version.ts, and here\n    '${name}': '${digest}',`,
      );
  });
});

describe('the same digits', () => {
  const NAME = 'photo.jpg';
  let folder: string;
  let file: string;
  let here: string;
  beforeAll(async () => {
    // Inside the clone, so that the bundle finds the packages it leaves out.
    mkdirSync(path.join(ROOT, '.build'), { recursive: true });
    folder = mkdtempSync(path.join(ROOT, '.build', 'digests-'));
    file = path.join(folder, 'worker.cjs');
    const build = `import('./scripts/services/build.mjs').then((m) => m.bundleWorker(process.cwd(), ${JSON.stringify(file)}))`;
    await run(process.execPath, ['-e', build], { cwd: ROOT });
    here = await analyse(NAME);
  });
  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  test('come from three threads at once, in the bundle the server runs', async () => {
    const answers = await Promise.all([0, 1, 2].map(() => inThread(file, NAME)));
    expect(answers.map(digestOf)).toEqual([here, here, here]);
  });

  test('come from two processes at once', async () => {
    const answers = await Promise.all([0, 1].map(() => inProcess(file, NAME)));
    expect(answers.map(digestOf)).toEqual([here, here]);
  });
});

const run = promisify(execFile);

/** The same job in a process of its own, which reads the frame itself. */
async function inProcess(file: string, name: string): Promise<FrameAnswer> {
  const code = `const [file, frame, setup, options] = process.argv.slice(1);
    const bytes = new Uint8Array(require('node:fs').readFileSync(frame));
    const job = { task: 'analyse', bytes, setup: JSON.parse(setup), options: JSON.parse(options) };
    require(file).default(job).then((answer) => console.log(JSON.stringify(answer)));`;
  const args = [path.join(FRAMES, name), JSON.stringify(setupFor(name)), JSON.stringify(optionsFor(name))];
  const { stdout } = await run(process.execPath, ['-e', code, file, ...args], {
    cwd: ROOT,
    maxBuffer: 1 << 24,
  });
  return JSON.parse(stdout) as FrameAnswer;
}

/** One job of the worker's file in a thread of its own. */
async function inThread(file: string, name: string): Promise<FrameAnswer> {
  const code = `const { parentPort, workerData } = require('node:worker_threads');
    require(workerData.file).default(workerData.job).then((answer) => parentPort.postMessage(answer));`;
  const job = { task: 'analyse', bytes: bytesFor(name), setup: setupFor(name), options: optionsFor(name) };
  const worker = new Worker(code, { eval: true, workerData: { file, job } });
  try {
    return await new Promise<FrameAnswer>((resolve, reject) => {
      worker.once('message', resolve);
      worker.once('error', reject);
    });
  } finally {
    await worker.terminate();
  }
}
