import { readFile } from 'node:fs/promises';
import path from 'node:path';
import type { RefusalCode } from '@/lib/domain/reading-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { photograph } from '../simulator/camera';
import { encodeFile } from '../simulator/encode';
import type { Hopeless } from '../simulator/hopeless';
import { Table, type Section } from './section';

const FIXTURES = path.join(process.cwd(), 'fixtures');

/** Files of fixtures/hostile with the code each must be refused with. */
const HOSTILE: Record<string, RefusalCode> = {
  'animated.webp': 'ANIMATED',
  'bomb.png': 'TOO_MANY_PIXELS',
  'camera.heic': 'HEIC',
  'cmyk.jpg': 'CMYK',
  'empty.tif': 'NOT_A_PICTURE',
  'not-a-picture.png': 'NOT_A_PICTURE',
  'palette.png': 'PALETTE',
  'tiny.png': 'TOO_SMALL',
  'truncated.jpg': 'TRUNCATED_FILE',
  'truncated.png': 'TRUNCATED_FILE',
};

/** Good frames that are cut off at these shares of their bytes. */
const CUT_FILES = ['clean.png', 'clean.tif', 'photo.jpg', 'photo.webp'];
const CUTS = [0.15, 0.4, 0.7, 0.95];
const BROKEN: RefusalCode[] = ['TRUNCATED_FILE', 'BROKEN_FILE', 'NOT_A_PICTURE'];

interface Case {
  bytes: Uint8Array;
  codes: readonly RefusalCode[];
  name: string;
}

async function broken(): Promise<Case[]> {
  const hostile = await Promise.all(
    Object.entries(HOSTILE).map(async ([name, code]) => ({
      name,
      bytes: await readFile(path.join(FIXTURES, 'hostile', name)),
      codes: [code],
    })),
  );
  const cut = await Promise.all(
    CUT_FILES.map(async (name) => {
      const bytes = await readFile(path.join(FIXTURES, 'frames', name));
      return CUTS.map((share) => ({
        name: `${name} cut at ${100 * share} %`,
        bytes: bytes.subarray(0, Math.floor(share * bytes.length)),
        codes: BROKEN,
      }));
    }),
  );
  return [...hostile, ...cut.flat()];
}

async function runCases(
  table: Table,
  name: string,
  count: number,
  cases: AsyncIterable<Case>,
): Promise<void> {
  const codes: Record<string, number> = {};
  const wrong: string[] = [];
  for await (const one of cases) {
    const answer = await analyseFrame(one.bytes, {}, {});
    codes[answer.code] = (codes[answer.code] ?? 0) + 1;
    if (answer.ok || !one.codes.includes(answer.code)) wrong.push(`${one.name}: ${answer.code}`);
  }
  const said = Object.entries(codes)
    .map(([code, n]) => `${code} ${n}`)
    .join(', ');
  table.add([name, String(count), String(count - wrong.length), said], wrong);
}

async function* simulated(kind: Hopeless, frames: number): AsyncIterable<Case> {
  for (let seed = 1; seed <= frames; seed += 1) {
    const plan = kind.plan(seed);
    const bytes = await encodeFile(photograph(plan.scene, plan.camera, plan.paints), plan.kind);
    yield { name: `seed ${seed}`, bytes, codes: kind.codes };
  }
}

async function* each(cases: readonly Case[]): AsyncIterable<Case> {
  yield* cases;
}

/** Frames and files without an answer: every one refused, with a right code. */
export async function benchRefusals(
  kinds: readonly Hopeless[],
  frames: number,
  files: boolean,
): Promise<Section> {
  const table = new Table(['hopeless frames', 'frames', 'refused rightly', 'codes', 'target']);
  for (const kind of kinds) await runCases(table, kind.name, frames, simulated(kind, frames));
  if (files) {
    const cases = await broken();
    await runCases(table, 'broken, cut and foreign files', cases.length, each(cases));
  }
  return table;
}
