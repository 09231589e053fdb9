/** Fringes whose spacing changes along them, and frames that must not look dirty; simulated, all numbers invented. */
import type { ReadingResult } from '@/lib/domain/reading-result';
import { measureFrame } from '@/lib/measure/analyse-frame';
import { photograph, PLAIN_CAMERA } from '@/scripts/simulator/camera';
import { encodeFile } from '@/scripts/simulator/encode';
import { setupOf, withSpacing } from '@/scripts/simulator/family';
import { PLAIN_SCENE, spacingAtPx, type Scene } from '@/scripts/simulator/scene';

jest.setTimeout(120_000);

/** Five standard uncertainties: once in two million by chance. */
const FAR = 5;

async function measured(
  scene: Scene,
  region?: { lengthPx: number; heightPx: number },
): Promise<ReadingResult> {
  const bytes = await encodeFile(photograph(scene, PLAIN_CAMERA), 'tiff');
  const whole = region && { cxPx: scene.widthPx / 2, cyPx: scene.heightPx / 2, angleDeg: 0, ...region };
  const answer = await measureFrame(bytes, setupOf(scene), whole ? { region: whole } : {});
  if (!('result' in answer)) throw new Error(answer.message);
  return answer.result;
}

/** Where the zero order crosses the region's long axis the spacing is spacing (1 - k v). */
function truthAt(scene: Scene, { xPx, yPx }: { xPx: number; yPx: number }): number {
  const t = (scene.tiltDeg * Math.PI) / 180;
  return spacingAtPx(scene, -(xPx - scene.zeroXPx) * Math.sin(t) + (yPx - scene.zeroYPx) * Math.cos(t));
}

describe('fringes that fan out', () => {
  it.each([1e-4, -1e-4])(
    'are stated where the zero order crosses the region, %d a px',
    async (keystonePerPx) => {
      const frame = { widthPx: 1024, heightPx: 256, zeroXPx: 560, zeroYPx: 128, tiltDeg: 0.3, keystonePerPx };
      const scene = withSpacing({ ...PLAIN_SCENE, ...frame }, 100);
      const result = await measured(scene);
      const truth = truthAt(scene, result.zeroOrder);
      expect(Math.abs(result.spacingPx - truth)).toBeLessThan(FAR * result.uSpacingPx);
      // The bands agree once the fan is undone; left in, it would be three hundred times the noise.
      expect(result.uSpacingPx / truth).toBeLessThan(1e-5);
      expect(result.findings.find((f) => f.check === 'keystone')?.word).toBe('look');
      expect(result.findings.find((f) => f.check === 'dust')?.word).toBe('clear');
    },
  );
});

describe('a clean frame with many rows a band and several pixels a bin', () => {
  it('shows no dirt', async () => {
    const frame = { widthPx: 2048, heightPx: 512, zeroXPx: 1015, zeroYPx: 255, tiltDeg: 0.2, widthUm: 10 };
    const scene = withSpacing({ ...PLAIN_SCENE, ...frame }, 45);
    const result = await measured(scene, { lengthPx: 2048, heightPx: 512 });
    expect(result.findings.find((f) => f.check === 'dust')?.word).toBe('clear');
    expect(Math.abs(result.spacingPx - 45)).toBeLessThan(FAR * result.uSpacingPx);
  });
});
