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
  engine: '0.6.0',
  digests: {
    'clean.tif': '99047d5f76dc58222714b3c4f2b956cd6118182d801e2fb0db0bb09a665d97fd',
    'tilted.tif, a region of its own': '12d9d0efc2c7a5c6d539491214f1edde036bf773b0cc256c63ae000c0661d5c6',
    'clipped.tif, orders left out': 'a73bfc4a23ddd6149acce4485ca37c0a27577e22e74eb51404ed58622e1e6d08',
    'photo.jpg': '9f77c28646189b4d84ff5cf46028124f68dd9d9b56582653bbce0fb6cf651a4c',
    'photo-turned.jpg': '5aa76a866046e1bf7474dfe65226c548c99cdb5562fc767e1a8b25411b6ce1e6',
    'one-slit.tif': 'e3bcd7bc07c45506d06282ae1b9322bfac547e030be886d5fe09c78c6e10c01c',
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
