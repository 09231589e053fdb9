/** The engine against simulated truth and against itself under changes that must not matter. Frames are invented. */
import { analyseFrame } from '@/lib/measure/analyse-frame';
import type { ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import { frame, mapped, mirrored, redJpeg, tiff16, turned, type FrameWish } from './helpers/frames';

const SETUP: SetupValues = {
  scaleUmPerPx: { value: 6.0692, u: 0.0006 },
  separationUm: { value: 250, u: 0.1 },
  distanceMm: { value: 500, u: 0.17 },
};

async function measure(bytes: Uint8Array, setup: SetupValues = {}): Promise<ReadingResult> {
  const answer = await analyseFrame(bytes, setup, {});
  if (!answer.ok) throw new Error(`${answer.code}: ${answer.message}`);
  return answer;
}

/** A result this many standard uncertainties off would happen once in 16 000 frames. */
const FAR = 4;

describe('simulated truth', () => {
  const wishes: [string, FrameWish][] = [
    ['clean', {}],
    ['tilted', { tiltDeg: -3.4, heightPx: 160, zeroY: 80 }],
    ['missing orders', { ratio: 3, spacingPx: 37 }],
    ['low visibility', { visibility: 0.12 }],
    ['clipped', { peak: 1.5 }],
    ['dim', { peak: 0.08, electrons: 400 }],
    ['fine', { spacingPx: 4.4, ratio: 18 }],
    ['few fringes', { spacingPx: 170 }],
    ['steep', { widthPx: 320, heightPx: 320, zeroX: 160, zeroY: 160, tiltDeg: 61, spacingPx: 30 }],
  ];
  it.each(wishes)('%s', async (_name, wish) => {
    for (const seed of [1, 2]) {
      const r = await measure(await tiff16(frame({ ...wish, seed })));
      const truth = wish.spacingPx ?? 52.3;
      const tilt = wish.tiltDeg ?? 0.7;
      expect(Math.abs(r.spacingPx - truth)).toBeLessThan(FAR * r.uSpacingPx);
      expect(r.uSpacingPx / truth).toBeLessThan(2e-3);
      // A hundredth of a degree on a clean frame; where light is scarce, what its own uncertainty says.
      expect(Math.abs(r.tiltDeg - tilt)).toBeLessThan(Math.max(0.01, FAR * r.uTiltDeg));
      for (const order of r.orders) {
        const c = Math.cos((tilt * Math.PI) / 180);
        const s = Math.sin((tilt * Math.PI) / 180);
        const along = (order.xPx - (wish.zeroX ?? 314.2)) * c + (order.yPx - (wish.zeroY ?? 60.3)) * s;
        // The numbering may start at a neighbour where fringes are fine; places must still be whole orders apart.
        const off = along / truth - order.m - Math.round(along / truth - order.m);
        expect(Math.abs(off * truth)).toBeLessThan((FAR + 1) * order.uPx);
      }
    }
  });

  it('bright middles are pulled inwards, raw middle minus order centre', async () => {
    const r = await measure(await tiff16(frame({ tiltDeg: 0 })));
    const pull = (m: number) => r.orders.find((o) => o.m === m)?.pullPx ?? NaN;
    expect(pull(2)).toBeLessThan(0);
    expect(pull(-2)).toBeGreaterThan(0);
  });

  it('wavelength from scale, separation and distance, in air and in vacuum', async () => {
    const spacingPx = (0.635 * 500) / (250 * 0.0060692);
    const r = await measure(await tiff16(frame({ widthPx: 1600, zeroX: 800, spacingPx })), SETUP);
    if (r.wavelengthNm === null || r.uWavelengthNm === null || r.wavelengthVacuumNm === null)
      throw new Error('no wavelength');
    // The frame has no wide-angle curvature; at these angles (order 6: 0.015 rad) that is 6e-5 of the wavelength.
    expect(Math.abs(r.wavelengthNm - 635)).toBeLessThan(FAR * r.uWavelengthNm + 0.04);
    expect(r.wavelengthVacuumNm - r.wavelengthNm).toBeGreaterThan(0.16);
    expect(r.budget.map((b) => b.key)).toEqual(
      expect.arrayContaining(['separation', 'distance', 'scale', 'fit']),
    );
  });
});

/** Share of the standard uncertainty: cells and bands fall differently on the changed frame, so digits differ, the value must not. */
const SAME = 0.8;

describe('changes that must not matter', () => {
  it('gain and offset', async () => {
    const picture = frame({ peak: 0.5 });
    const a = await measure(await tiff16(picture));
    const b = await measure(await tiff16(mapped(picture, (v) => 0.6 * v + 1500)));
    expect(Math.abs(a.spacingPx - b.spacingPx)).toBeLessThan(SAME * a.uSpacingPx);
  });
  it('mirror: same spacing, opposite tilt', async () => {
    const picture = frame({ tiltDeg: 1.3 });
    const a = await measure(await tiff16(picture));
    const b = await measure(await tiff16(mirrored(picture)));
    expect(Math.abs(a.spacingPx - b.spacingPx)).toBeLessThan(SAME * a.uSpacingPx);
    expect(Math.abs(a.tiltDeg + b.tiltDeg)).toBeLessThan(0.01);
    // The zero order's line, mirrored: distance along a's normal from a's zero order.
    const t = (a.tiltDeg * Math.PI) / 180;
    const along =
      (picture.widthPx - b.zeroOrder.xPx - a.zeroOrder.xPx) * Math.cos(t) +
      (b.zeroOrder.yPx - a.zeroOrder.yPx) * Math.sin(t);
    expect(Math.abs(along)).toBeLessThan(0.02);
  });
  it('quarter turn: same spacing, tilt a quarter turn on', async () => {
    const picture = frame({ tiltDeg: -0.8 });
    const a = await measure(await tiff16(picture));
    const b = await measure(await tiff16(turned(picture)));
    expect(Math.abs(a.spacingPx - b.spacingPx)).toBeLessThan(SAME * a.uSpacingPx);
    expect(Math.abs(b.tiltDeg - a.tiltDeg - 90)).toBeLessThan(0.01);
  });
  it('the same bytes give the same digits', async () => {
    const bytes = await tiff16(frame({ seed: 5 }));
    const strip = (r: ReadingResult) => JSON.stringify({ ...r, ms: null });
    expect(strip(await measure(bytes))).toBe(strip(await measure(bytes)));
  });
});

describe('photos', () => {
  it('a red JPEG is read in red through sRGB', async () => {
    const r = await measure(await redJpeg(frame({})));
    expect(r.picture.channel).toBe('red');
    expect(r.picture.tone).toBe('srgb');
    expect(Math.abs(r.spacingPx - 52.3)).toBeLessThan(FAR * r.uSpacingPx);
    expect(r.findings.map((f) => f.check)).toEqual(expect.arrayContaining(['compression', 'demosaic']));
  });
});

describe('what a person chooses', () => {
  it('zeroShift renumbers the orders, leaveOut leaves out', async () => {
    const bytes = await tiff16(frame({}));
    const plain = await measure(bytes);
    const moved = await analyseFrame(bytes, {}, { zeroShift: 1 });
    if (!moved.ok) throw new Error(moved.message);
    const at = (r: ReadingResult, m: number) => r.orders.find((o) => o.m === m)?.alongPx ?? NaN;
    expect(Math.abs(at(moved, 1) - at(plain, 0))).toBeLessThan(0.05);
    const less = await analyseFrame(bytes, {}, { leaveOut: [1], region: plain.region });
    if (!less.ok) throw new Error(less.message);
    expect(less.curves.left.some((v) => v === 1)).toBe(true);
    expect(Math.abs(less.spacingPx - plain.spacingPx)).toBeLessThan(FAR * plain.uSpacingPx);
    expect(less.region).toEqual(plain.region);
  });
  it('no number is missing as NaN', async () => {
    const r = await measure(await tiff16(frame({})), SETUP);
    expect(JSON.stringify(r)).not.toMatch(/NaN|Infinity/);
    const walk = (v: unknown): void => {
      if (typeof v === 'number') expect(Number.isFinite(v)).toBe(true);
      else if (v && typeof v === 'object') Object.values(v).forEach(walk);
    };
    walk(r);
  });
});
