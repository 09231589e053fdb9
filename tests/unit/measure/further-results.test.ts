/**
 * What a frame says beside the wavelength, on frames made from the physics by the simulator (which shares no code with the
 * fit): mean slit width and the slits' difference, line width, a second fringe system, a view from above.
 */
import type { ReadingResult } from '@/lib/domain/reading-result';
import { analyseFrame } from '@/lib/measure/analyse-frame';
import { photograph, PLAIN_CAMERA } from '@/scripts/simulator/camera';
import { encodeFile } from '@/scripts/simulator/encode';
import { setupOf, withSpacing } from '@/scripts/simulator/family';
import type { Paint } from '@/scripts/simulator/paintings';
import { spacingAtPx, PLAIN_SCENE, type Scene } from '@/scripts/simulator/scene';

async function measured(
  change: Partial<Scene>,
  spacingPx = 60,
  paints: Paint[] = [],
): Promise<ReadingResult> {
  const scene = withSpacing({ ...PLAIN_SCENE, ...change }, spacingPx);
  const camera = { ...PLAIN_CAMERA, seed: 7, peakElectrons: 12_000, peakShare: 0.7 };
  const answer = await analyseFrame(
    await encodeFile(photograph(scene, camera, paints), 'tiff'),
    setupOf(scene),
    {},
  );
  if (!answer.ok) throw new Error(`${answer.code}: ${answer.message}`);
  return answer;
}

const check = (r: ReadingResult, name: string) => {
  const found = r.findings.find((f) => f.check === name);
  if (!found) throw new Error(`no check ${name}`);
  return found;
};

/** A value this many standard uncertainties off would happen once in 16 000 frames. */
const FAR = 4;

describe('beside the wavelength', () => {
  it('slit width from the envelope, visibility, and a limit for the line width', async () => {
    const r = await measured({ widthUm: 47.3, visibility: 0.91 });
    expect(Math.abs((r.slit?.widthUm ?? NaN) - 47.3)).toBeLessThan(FAR * (r.slit?.uWidthUm ?? 0));
    expect(r.slit?.difference).toBeNull();
    expect(Math.abs(r.visibility - 0.91)).toBeLessThan(FAR * (r.uVisibility ?? 0));
    expect(r.bandwidth?.fwhmNm).toBeNull();
    expect(r.bandwidth?.limitNm).toBeLessThan(10);
    for (const name of ['unequal', 'second-system', 'bandwidth', 'lock', 'keystone'])
      expect(check(r, name).word).toBe('clear');
    expect(r.words?.width).not.toBe('stop');
  });

  it('slits of unequal width: their mean and how they differ', async () => {
    const r = await measured({ widthUm: 52, secondWidthUm: 44 });
    expect(Math.abs((r.slit?.widthUm ?? NaN) - 48)).toBeLessThan(FAR * (r.slit?.uWidthUm ?? 0));
    const { difference, uDifference } = r.slit ?? { difference: null, uDifference: null };
    expect(Math.abs((difference ?? NaN) - 8 / 48)).toBeLessThan(FAR * (uDifference ?? 0));
    expect(check(r, 'unequal').seen).toMatch(/differ by about 17 %/);
  });

  it('line width where the contrast fades with order', async () => {
    const r = await measured({ widthUm: 20, lineWidthNm: 14 }, 32);
    expect(Math.abs((r.bandwidth?.fwhmNm ?? NaN) - 14)).toBeLessThan(FAR * (r.bandwidth?.uFwhmNm ?? 0));
    expect(check(r, 'bandwidth').word).toBe('look');
  });

  it('a second fringe system is named with its strength and period, and the spacing stays true', async () => {
    const period = 1.31 * 60;
    const window: Paint = (mean, scene) => {
      for (let y = 0; y < scene.heightPx; y++)
        for (let x = 0; x < scene.widthPx; x++)
          mean[y * scene.widthPx + x] *= 1 + 0.03 * Math.cos((2 * Math.PI * (x + 0.5)) / period + 1);
    };
    const r = await measured({}, 60, [window]);
    const found = check(r, 'second-system');
    expect(found.word).not.toBe('clear');
    const [, percent] = /\(([\d.]+) %/.exec(found.seen) ?? [];
    expect(Math.abs(Number(percent) - 3)).toBeLessThan(0.6);
    expect(Math.abs(r.spacingPx - 60)).toBeLessThan(FAR * r.uSpacingPx);
  });

  it('a view from above: the spacing is that at the middle of the region', async () => {
    const scene = { keystonePerPx: 6e-5, heightPx: 256, zeroYPx: 128 };
    const r = await measured(scene);
    const there = spacingAtPx(withSpacing({ ...PLAIN_SCENE, ...scene }, 60), r.region.cyPx - scene.zeroYPx);
    expect(Math.abs(r.spacingPx - there)).toBeLessThan(FAR * r.uSpacingPx + 1e-5 * there);
    expect(check(r, 'keystone').word).toBe('look');
  });
});
