import { PLAIN_CAMERA, photograph } from '@/scripts/simulator/camera';
import { encodeFile, type FileKind } from '@/scripts/simulator/encode';
import { PLAIN_SCENE, type Scene } from '@/scripts/simulator/scene';
import { PLATE, SETUP } from './world';

/** What the invented bench of these tests sees of an invented 635 nm module. */
export const BENCH_SCENE: Scene = {
  ...PLAIN_SCENE,
  distanceMm: SETUP.distanceMm.value,
  separationUm: PLATE.separationUm.value,
  widthUm: PLATE.widthUm.value,
  scaleUmPerPx: SETUP.scaleUmPerPx.value,
};

/** A simulated frame as a real file. The same seed gives the same bytes. */
export async function fringes(
  seed: number,
  kind: FileKind = 'png',
  scene: Partial<Scene> = {},
): Promise<Uint8Array<ArrayBuffer>> {
  const picture = photograph({ ...BENCH_SCENE, ...scene }, { ...PLAIN_CAMERA, seed });
  return new Uint8Array(await encodeFile(picture, kind));
}
