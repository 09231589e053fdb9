/** A band stack is the one input of every fit: same stack, same digits, and nothing of it changes by being stored. */
import type { ReadingResult, Region, SetupValues } from '@/lib/domain/reading-result';
import { measureFrame, type MeasuredFrame } from '@/lib/measure/analyse-frame';
import { cutStack, stackCovers } from '@/lib/measure/band-stack';
import { measureStack } from '@/lib/measure/measure-stack';
import { decodeStack, encodeStack } from '@/lib/measure/stack-file';
import { frame, tiff16 } from './helpers/frames';

const SETUP: SetupValues = {
  scaleUmPerPx: { value: 6.0692, u: 0.0006 },
  separationUm: { value: 250, u: 0.1 },
  distanceMm: { value: 500, u: 0.17 },
};

async function measured(bytes: Uint8Array, options = {}): Promise<MeasuredFrame> {
  const answer = await measureFrame(bytes, SETUP, options);
  if (!('result' in answer)) throw new Error(`${answer.code}: ${answer.message}`);
  return answer;
}

/** Everything but the milliseconds. */
const digits = (r: ReadingResult) => JSON.stringify({ ...r, ms: null });

function answered(answer: ReturnType<typeof measureStack>): ReadingResult {
  if (!answer.ok) throw new Error(answer.message);
  return answer;
}

describe('band stack', () => {
  let bytes: Uint8Array;
  let first: MeasuredFrame;
  beforeAll(async () => {
    bytes = await tiff16(frame({ heightPx: 300, zeroY: 150 }));
    first = await measured(bytes);
  });

  it('gives the digits of the frame, before and after it was stored', () => {
    const again = answered(measureStack(first.stack, SETUP, {}));
    expect(digits(again)).toBe(digits(first.result));
    const stored = decodeStack(encodeStack(first.stack));
    expect(digits(answered(measureStack(stored, SETUP, {})))).toBe(digits(first.result));
  });

  it('is read from any place of a larger buffer', () => {
    const file = encodeStack(first.stack);
    const larger = new Uint8Array(file.length + 3);
    larger.set(file, 3);
    expect(digits(answered(measureStack(decodeStack(larger.subarray(3)), SETUP, {})))).toBe(
      digits(first.result),
    );
  });

  it('is made again from the bytes and its plan, to the last bit', async () => {
    const plan = JSON.parse(JSON.stringify(first.result.stack)) as MeasuredFrame['stack']['plan'];
    const again = await measured(bytes, { stack: plan });
    expect(Buffer.compare(encodeStack(again.stack), encodeStack(first.stack))).toBe(0);
    expect(digits(again.result)).toBe(digits(first.result));
  });

  it('refuses bytes that are no stack or cut off', () => {
    expect(() => decodeStack(Uint8Array.from({ length: 64 }, () => 7))).toThrow(RangeError);
    const file = encodeStack(first.stack);
    expect(() => decodeStack(file.slice(0, file.length - 4))).toThrow(RangeError);
  });

  it('has at least 64 bands and holds regions around its own, until one leaves it or turns', () => {
    const { region } = first.stack.plan;
    expect(first.stack.bands.bands).toBeGreaterThanOrEqual(64);
    const moved = (change: Partial<Region>) => stackCovers(first.stack, { ...region, ...change });
    expect(moved({})).toBe(true);
    expect(moved({ lengthPx: region.lengthPx * 0.5, cxPx: region.cxPx + 20 })).toBe(true);
    expect(moved({ angleDeg: region.angleDeg + 0.09 })).toBe(true);
    expect(moved({ angleDeg: region.angleDeg + 0.11 })).toBe(false);
    const small = { ...first.stack, picture: { ...first.stack.picture, widthPx: 100_000 } };
    expect(stackCovers(small, { ...region, cxPx: region.cxPx + 1000 })).toBe(false);
  });

  it('snaps the edges along the fringes to bands', () => {
    const { region, rect, bands } = first.stack.plan;
    const bandHeight = rect.heightPx / bands;
    const cut = cutStack(first.stack, { ...region, heightPx: 10.4 * bandHeight });
    expect(cut.data.bands).toBeGreaterThanOrEqual(10);
    expect(cut.data.bands).toBeLessThanOrEqual(11);
    expect(cut.rect.heightPx / bandHeight).toBeCloseTo(cut.data.bands, 9);
    expect(cutStack(first.stack, { ...region, heightPx: 0.01 }).data.bands).toBe(1);
  });

  it('measures a smaller region to the same spacing within its uncertainty, and says that it is less sure', () => {
    const { region } = first.stack.plan;
    const smaller: Region = { ...region, lengthPx: region.lengthPx * 0.6, heightPx: region.heightPx * 0.5 };
    const r = answered(measureStack(first.stack, SETUP, { region: smaller }));
    expect(Math.abs(r.spacingPx - first.result.spacingPx)).toBeLessThan(4 * r.uSpacingPx);
    expect(r.uSpacingPx).toBeGreaterThan(first.result.uSpacingPx);
    expect(r.region).toEqual(smaller);
  });

  it('counts from the zero order a person chose, and leaves out what is numbered so', () => {
    const shifted = answered(measureStack(first.stack, SETUP, { zeroShift: -1, leaveOut: [1] }));
    const plain = first.result.orders.find((o) => o.m === 1);
    const now = shifted.orders.find((o) => o.m === 0);
    expect(now?.alongPx).toBeCloseTo(plain?.alongPx ?? NaN, 1);
    expect(shifted.orders.find((o) => o.m === 1)?.used).toBe(false);
    const { curves } = shifted;
    const at = shifted.orders.find((o) => o.m === 1)?.alongPx ?? NaN;
    const near = curves.alongPx
      .map((u, i) => ({ u, left: curves.left[i] }))
      .filter((p) => Math.abs(p.u - at) < 15);
    expect(near.every((p) => p.left === 1)).toBe(true);
  });

  it('counts what is left out from the zero order of the plan, not from where the fit starts', () => {
    const { plan } = first.stack;
    const moved = { ...first.stack, plan: { ...plan, zeroPx: plan.zeroPx + plan.start.spacingPx } };
    const { orders, curves } = answered(measureStack(moved, SETUP, { leaveOut: [1] }));
    const left = (m: number) => {
      const at = orders.find((o) => o.m === m)?.alongPx ?? NaN;
      return curves.left.filter((_, i) => Math.abs(curves.alongPx[i] - at) < 10).every((l) => l === 1);
    };
    expect([left(1), left(2)]).toEqual([false, true]);
  });
});
