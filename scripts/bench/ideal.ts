import { measureFrame } from '@/lib/measure/analyse-frame';
import { PLAIN_CAMERA, type Picture } from '../simulator/camera';
import { encodeFile } from '../simulator/encode';
import { setupOf, withSpacing } from '../simulator/family';
import { PLAIN_SCENE, renderMean, type Scene } from '../simulator/scene';
import { Table, type Section } from './section';

const MOST_WAVELENGTH_NM = 0.01;
const MOST_WIDTH_UM = 0.01;

const SCENES: Record<string, Scene> = {
  'd/w 5, 80 px a fringe': PLAIN_SCENE,
  'd/w 5, leaning 2°': { ...PLAIN_SCENE, tiltDeg: 2 },
  'd/w 3, 45 px a fringe': withSpacing({ ...PLAIN_SCENE, widthUm: PLAIN_SCENE.separationUm / 3 }, 45),
  'd/w 5, 368 px a fringe, 4096 px': withSpacing(
    { ...PLAIN_SCENE, widthPx: 4096, zeroXPx: 2031.7, heightPx: 128, zeroYPx: 64 },
    368.1,
  ),
  'd/w 8, lying fringes': withSpacing(
    {
      ...PLAIN_SCENE,
      widthPx: 256,
      heightPx: 1024,
      zeroXPx: 128.4,
      zeroYPx: 505.2,
      tiltDeg: 89,
      widthUm: 250 / 8,
    },
    40,
  ),
};

/** 16 bit codes of the light itself, without noise; only rounding is left. */
function noiseFree(scene: Scene): Picture {
  const { peakShare, offsetCounts } = PLAIN_CAMERA;
  const samples = Uint16Array.from(renderMean(scene), (light) =>
    Math.round(offsetCounts + peakShare * (65_535 - offsetCounts) * light),
  );
  return { widthPx: scene.widthPx, heightPx: scene.heightPx, channels: 1, bits: 16, samples };
}

/** Frames without noise: what is left is the error of model and arithmetic. λ = d·s·Λ/L, w = d divided by the fitted d/w. */
export async function benchIdeal(): Promise<Section> {
  const table = new Table(['ideal noise-free frame', 'λ off by, nm', 'w off by, µm', 'target']);
  for (const [name, scene] of Object.entries(SCENES)) {
    const bytes = await encodeFile(noiseFree(scene), 'tiff');
    const measured = await measureFrame(bytes, setupOf(scene), {});
    if (!('result' in measured)) {
      table.add([name, measured.code, ''], ['not answered']);
      continue;
    }
    const { spacingPx, envelopeZeroOrder } = measured.result;
    const wavelengthNm = (scene.separationUm * scene.scaleUmPerPx * spacingPx) / scene.distanceMm;
    const offNm = wavelengthNm - scene.wavelengthNm;
    const offUm = envelopeZeroOrder === null ? NaN : scene.separationUm / envelopeZeroOrder - scene.widthUm;
    const missed: string[] = [];
    if (!(Math.abs(offNm) <= MOST_WAVELENGTH_NM)) missed.push(`λ beyond ${MOST_WAVELENGTH_NM} nm`);
    if (!(Math.abs(offUm) <= MOST_WIDTH_UM)) missed.push(`w beyond ${MOST_WIDTH_UM} µm`);
    table.add([name, offNm.toFixed(5), offUm.toFixed(5)], missed);
  }
  return table;
}
