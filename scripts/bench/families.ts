import sharp from 'sharp';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { studentQuantile } from '@/lib/quantity/student';
import { cramerRao } from '../simulator/bound';
import { photograph } from '../simulator/camera';
import { encodeFile } from '../simulator/encode';
import { curvatureU, setupOf, type Family } from '../simulator/family';
import { handSpacingPx } from '../simulator/hand-method';
import { spacingAtPx, trueOrderPx, trueSpacingPx, type Scene } from '../simulator/scene';
import { Table, type Section } from './section';
import { median, rms, rmsInterval, wilson } from './statistics';

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

/** v of a point: along the fringes from the middle of the zero order. */
function alongFringes(scene: Scene, point: { xPx: number; yPx: number }): number {
  const t = (scene.tiltDeg * Math.PI) / 180;
  return -(point.xPx - scene.zeroXPx) * Math.sin(t) + (point.yPx - scene.zeroYPx) * Math.cos(t);
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
    const nominal = trueSpacingPx(plan.scene);
    const byHand = handSpacingPx(picture, nominal);
    if (byHand !== null) hand.push(Math.abs(byHand / nominal - 1));
    if (!answer.ok) {
      codes[answer.code] = (codes[answer.code] ?? 0) + 1;
      continue;
    }
    answered += 1;
    // The spacing is stated where the zero order crosses the region's long axis.
    const truth = spacingAtPx(plan.scene, alongFringes(plan.scene, answer.zeroOrder));
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

function cellsOf(row: Row): string[] {
  const share = (v: number) => `${(100 * v).toFixed(1)} %`;
  return [
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
  ];
}

const COLUMNS = [
  'family',
  'frames',
  'answered',
  'wrong',
  'median rel. error',
  '√mean e² (95 %)',
  '√mean z²',
  '95 % coverage (95 %)',
  'orders',
  'hand method, median rel.',
  'ms',
  'decode ms',
  'targets',
];

/** One line a family: accuracy against the bound, honesty of the intervals, answered share, time. */
export async function benchFamilies(
  families: readonly Family[],
  frames: number | null,
  show: boolean,
): Promise<Section> {
  const table = new Table(COLUMNS);
  for (const family of families) {
    const row = await runFamily(family, frames ?? family.frames, show);
    table.add(cellsOf(row), row.missed, Object.keys(row.codes).length ? JSON.stringify(row.codes) : '');
  }
  return table;
}
