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
  engine: '0.7.0',
  digests: {
    'clean.tif': '3b6d41c149bf82866c702f1b55282e00495d11ee5a122d94b56a6c872dbf0f89',
    'tilted.tif, a region of its own': '2c2d3c1b421970bbaffbcddfda6c995aa4e5b66375088f9ee52a24aaab97fcd8',
    'clipped.tif, orders left out': '7049f7be951923644806c4bbe169d8df2d4755649f848f100fdebc148a637659',
    'photo.jpg': '89b2a75669fbda39c3696750d7147b689151759f5e5ba72a9768fedad2de8232',
    'photo-turned.jpg': 'ccd3ddb75d90b785a2388e30e8609489ab86cac37ae0a990aa20facfb1880cb4',
    'one-slit.tif': 'dd3a926e489fc619a484cf360908b86b4b549c70a181b7a32e4990a77f5058ee',
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
