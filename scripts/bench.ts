/**
 * `npm run bench -- [family…] [--frames N] [--show] [--out FILE]`: accuracy, honesty and speed of the engine on
 * simulated frames, family by family, against the Cramér–Rao bound. Exits 1 when a target is missed;
 * `--show` names every frame that is more than 4 u off.
 */
import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import sharp from 'sharp';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { studentQuantile } from '@/lib/quantity/student';
import { cramerRao } from './simulator/bound';
import { photograph } from './simulator/camera';
import { encodeFile } from './simulator/encode';
import { curvatureU, FAMILIES, HOPELESS, setupOf, type Family, type Hopeless } from './simulator/families';
import { handSpacingPx } from './simulator/hand-method';
import { trueOrderPx, trueSpacingPx } from './simulator/scene';

interface Row {
  family: string;
  frames: number;
  answered: number;
  wrong: number;
  medianRelative: number;
  rmsE: number;
  rmsELow: number;
  rmsEHigh: number;
  rmsZ: number;
  coverage: number;
  coverageLow: number;
  coverageHigh: number;
  rmsOrder: number;
  handMedianRelative: number;
  msTotal: number;
  msDecode: number;
  missed: string[];
  codes: Record<string, number>;
}

const clock = (): number => performance.now();
const rms = (values: number[]): number =>
  Math.sqrt(values.reduce((s, v) => s + v * v, 0) / Math.max(1, values.length));
const median = (values: number[]): number => {
  if (values.length === 0) return Number.NaN;
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)];
};

/** 95 % interval of a share k/n (Wilson, J. Am. Stat. Assoc. 22, 209, 1927). */
function wilson(k: number, n: number): [number, number] {
  if (n === 0) return [0, 1];
  const z = 1.959964;
  const p = k / n;
  const middle = (p + (z * z) / (2 * n)) / (1 + (z * z) / n);
  const half = (z / (1 + (z * z) / n)) * Math.sqrt((p * (1 - p)) / n + (z * z) / (4 * n * n));
  return [middle - half, middle + half];
}

/** 95 % interval of a root mean square, from the scatter of the squares. */
function rmsInterval(values: number[]): [number, number] {
  const n = values.length;
  if (n < 2) return [0, Infinity];
  const squares = values.map((v) => v * v);
  const mean = squares.reduce((a, b) => a + b, 0) / n;
  const sd = Math.sqrt(squares.reduce((s, v) => s + (v - mean) ** 2, 0) / (n - 1));
  const half = (1.96 * sd) / Math.sqrt(n);
  return [Math.sqrt(Math.max(0, mean - half)), Math.sqrt(mean + half)];
}

async function runFamily(family: Family, frames: number, show: boolean): Promise<Row> {
  const e: number[] = [];
  const z: number[] = [];
  const relative: number[] = [];
  const orderRatio: number[] = [];
  const hand: number[] = [];
  const totals: number[] = [];
  const decodes: number[] = [];
  const codes: Record<string, number> = {};
  let answered = 0;
  let wrong = 0;
  let covered = 0;
  for (let seed = 1; seed <= frames; seed += 1) {
    const plan = family.plan(seed);
    const picture = photograph(plan.scene, plan.camera, plan.paints);
    const file = await encodeFile(picture, plan.kind, {
      quality: plan.quality,
      orientation: plan.orientation,
    });
    const setup = setupOf(plan.scene);
    const answer = await analyseFrame(file, setup, {}, clock);
    totals.push(answer.ms.total);
    const before = performance.now();
    await sharp(file).raw().toBuffer();
    decodes.push(performance.now() - before);
    const truth = trueSpacingPx(plan.scene);
    const byHand = handSpacingPx(picture, truth);
    if (byHand !== null) hand.push(Math.abs(byHand / truth - 1));
    if (!answer.ok) {
      codes[answer.code] = (codes[answer.code] ?? 0) + 1;
      continue;
    }
    answered += 1;
    const error = answer.spacingPx - truth;
    const bound = cramerRao(plan.scene, plan.camera, curvatureU(plan.scene));
    relative.push(Math.abs(error / truth));
    e.push(error / bound.uSpacingPx);
    z.push(error / answer.uSpacingPx);
    if (Math.abs(error) <= studentQuantile(0.975, answer.dofSpacing) * answer.uSpacingPx) covered += 1;
    const isWrong = Math.abs(error) > 6 * answer.uSpacingPx && Math.abs(error / truth) > family.wrongBeyond;
    if (isWrong) wrong += 1;
    if (show && (isWrong || Math.abs(error) > 4 * answer.uSpacingPx)) {
      console.log(
        `  seed ${seed}: error ${(error / truth).toExponential(2)}, z ${(error / answer.uSpacingPx).toFixed(1)}, e ${(error / bound.uSpacingPx).toFixed(1)}`,
      );
    }
    if (family.orders) {
      const angle = (plan.scene.tiltDeg * Math.PI) / 180;
      for (const order of answer.orders) {
        const along =
          (order.xPx - plan.scene.zeroXPx) * Math.cos(angle) +
          (order.yPx - plan.scene.zeroYPx) * Math.sin(angle);
        orderRatio.push((along - trueOrderPx(plan.scene, order.m)) / bound.orderPx(order.m));
      }
    }
  }
  const [rmsELow, rmsEHigh] = rmsInterval(e);
  const [coverageLow, coverageHigh] = wilson(covered, answered);
  const row: Row = {
    family: family.name,
    frames,
    answered,
    wrong,
    medianRelative: median(relative),
    rmsE: rms(e),
    rmsELow,
    rmsEHigh,
    rmsZ: rms(z),
    coverage: covered / Math.max(1, answered),
    coverageLow,
    coverageHigh,
    rmsOrder: family.orders ? rms(orderRatio) : Number.NaN,
    handMedianRelative: median(hand),
    msTotal: median(totals),
    msDecode: median(decodes),
    missed: [],
    codes,
  };
  row.missed = missedTargets(family, row, z);
  return row;
}

function missedTargets(family: Family, row: Row, z: number[]): string[] {
  const missed: string[] = [];
  const [zLow, zHigh] = rmsInterval(z);
  if (family.efficiency !== null && row.rmsELow > family.efficiency)
    missed.push(`√mean e² above ${family.efficiency}`);
  if (row.coverageHigh < family.coverage[0]) missed.push(`coverage below ${family.coverage[0]}`);
  if (row.coverageLow > family.coverage[1]) missed.push(`coverage above ${family.coverage[1]}`);
  if (zLow > 1.25 || zHigh < 0.6) missed.push('√mean z² outside 0.6 to 1.25');
  if (row.wrong > 0) missed.push(`${row.wrong} wrong`);
  if (wilson(row.answered, row.frames)[1] < family.answered) missed.push(`answered below ${family.answered}`);
  if (family.orders && row.rmsOrder > 1.3) missed.push('order centres above 1.3 × bound');
  return missed;
}

async function runHopeless(
  kind: Hopeless,
  frames: number,
): Promise<{
  name: string;
  frames: number;
  refused: number;
  codes: Record<string, number>;
  missed: string[];
}> {
  const codes: Record<string, number> = {};
  let right = 0;
  for (let seed = 1; seed <= frames; seed += 1) {
    const plan = kind.plan(seed);
    const file = await encodeFile(photograph(plan.scene, plan.camera, plan.paints), plan.kind);
    const answer = await analyseFrame(file, setupOf(plan.scene), {}, clock);
    codes[answer.code] = (codes[answer.code] ?? 0) + 1;
    if (!answer.ok && kind.codes.includes(answer.code)) right += 1;
  }
  return {
    name: kind.name,
    frames,
    refused: right,
    codes,
    missed: right === frames ? [] : [`${frames - right} not refused rightly`],
  };
}

function line(row: Row): string {
  const share = (v: number) => `${(100 * v).toFixed(1)} %`;
  const cells = [
    row.family,
    String(row.frames),
    share(row.answered / row.frames),
    String(row.wrong),
    row.medianRelative.toExponential(1),
    `${row.rmsE.toFixed(2)} (${row.rmsELow.toFixed(2)} to ${row.rmsEHigh.toFixed(2)})`,
    row.rmsZ.toFixed(2),
    `${share(row.coverage)} (${share(row.coverageLow)} to ${share(row.coverageHigh)})`,
    Number.isNaN(row.rmsOrder) ? '' : row.rmsOrder.toFixed(2),
    Number.isNaN(row.handMedianRelative) ? '' : row.handMedianRelative.toExponential(1),
    row.msTotal.toFixed(0),
    row.msDecode.toFixed(0),
    row.missed.join('; ') || 'met',
  ];
  return `| ${cells.join(' | ')} |`;
}

const HEAD =
  '| family | frames | answered | wrong | median rel. error | √mean e² (95 %) | √mean z² | 95 % coverage (95 %) | orders | hand method, median rel. | ms | decode ms | targets |\n' +
  '|---|---|---|---|---|---|---|---|---|---|---|---|---|';

async function main(argv: string[]): Promise<number> {
  const option = (name: string): string | undefined =>
    argv.includes(name) ? argv[argv.indexOf(name) + 1] : undefined;
  const frames = option('--frames') ? Number(option('--frames')) : null;
  const out = option('--out');
  const names = argv.filter(
    (a, i) => !a.startsWith('--') && argv[i - 1] !== '--frames' && argv[i - 1] !== '--out',
  );
  const chosen = (name: string): boolean => names.length === 0 || names.some((n) => name.includes(n));
  const lines = [HEAD];
  console.log(HEAD);
  let missed = 0;
  for (const family of FAMILIES.filter((f) => chosen(f.name))) {
    const row = await runFamily(family, frames ?? family.frames, argv.includes('--show'));
    missed += row.missed.length;
    lines.push(line(row));
    console.log(line(row), Object.keys(row.codes).length ? JSON.stringify(row.codes) : '');
  }
  lines.push('', '| hopeless frames | frames | refused rightly | codes | target |', '|---|---|---|---|---|');
  for (const kind of HOPELESS.filter((f) => chosen(f.name))) {
    const row = await runHopeless(kind, Math.min(frames ?? 30, 30));
    missed += row.missed.length;
    const text = `| ${row.name} | ${row.frames} | ${row.refused} | ${Object.entries(row.codes)
      .map(([c, n]) => `${c} ${n}`)
      .join(', ')} | ${row.missed.join('; ') || 'met'} |`;
    lines.push(text);
    console.log(text);
  }
  if (out) {
    await mkdir(path.dirname(out), { recursive: true });
    await writeFile(out, `${lines.join('\n')}\n`);
  }
  console.log(missed === 0 ? 'All targets met.' : `${missed} targets missed.`);
  return missed === 0 ? 0 : 1;
}

main(process.argv.slice(2)).then(
  (code) => {
    process.exitCode = code;
  },
  (error: unknown) => {
    console.error(error);
    process.exitCode = 2;
  },
);
