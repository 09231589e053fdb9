import type { RefusalCode } from '@/lib/domain/reading-result';
import type { Camera } from './camera';
import { camera, plain, withSpacing, type FramePlan } from './family';
import { NO_FRINGES, type Paint } from './paintings';
import { random, type Random } from './random';
import { PLAIN_SCENE, type Scene } from './scene';

/** A family whose frames must all be refused, each with one of these codes. */
export interface Hopeless {
  name: string;
  codes: RefusalCode[];
  plan: (seed: number) => FramePlan;
}

const hopeless = (
  name: string,
  codes: RefusalCode[],
  change: (r: Random) => { scene?: Partial<Scene>; camera?: Partial<Camera>; paints?: Paint[] },
): Hopeless => ({
  name,
  codes,
  plan: (seed) => {
    const r = random(seed * 6007 + name.length * 31);
    const base = plain(r);
    const asked = change(r);
    return {
      scene: { ...base, ...asked.scene },
      camera: camera(r, asked.camera),
      kind: 'tiff',
      paints: asked.paints,
    };
  },
});

export const HOPELESS: Hopeless[] = [
  // Where only its middle maximum is in the frame, one slit is just a spot.
  hopeless('single slit', ['ONE_SLIT', 'NO_FRINGES'], (r) => ({
    scene: { pattern: 'one', widthUm: r.between(40, 250) },
  })),
  hopeless('single slit, burnt out middle', ['ONE_SLIT', 'BURNT_OUT'], (r) => ({
    scene: { pattern: 'one', widthUm: r.between(120, 250) },
    camera: { peakShare: 6 },
  })),
  hopeless('five slits', ['MANY_SLITS'], () => ({ scene: { pattern: 'five' } })),
  hopeless('rings', ['RINGS'], (r) => ({
    scene: { pattern: 'rings', heightPx: 700, zeroYPx: r.between(250, 450) },
  })),
  hopeless('noise only', ['NO_FRINGES'], () => ({ scene: { visibility: 0, widthUm: 0.01 } })),
  hopeless('black', ['TOO_DARK'], () => ({ camera: { peakShare: 0.0002, peakElectrons: 2 } })),
  hopeless('burnt out', ['BURNT_OUT'], () => ({
    scene: { stray: { constant: 3, slope: 0, hump: 0, humpXPx: 0, humpSigmaPx: 1 } },
  })),
  // Below one and a half there is one bright fringe with hardly a dark one beside it: no fringes to be seen.
  hopeless('two fringes', ['TOO_FEW_FRINGES', 'NO_FRINGES'], (r) => {
    const base = withSpacing(PLAIN_SCENE, 1024 / r.between(1.2, 2));
    return { scene: { scaleUmPerPx: base.scaleUmPerPx, wavelengthNm: 635 } };
  }),
  ...Object.entries(NO_FRINGES).map(([name, paint]) =>
    hopeless(name, ['NO_FRINGES'], (r) => ({
      scene: { widthPx: 900, heightPx: 600, zeroYPx: 300 },
      camera: { bits: 8, offsetCounts: 3 },
      paints: [paint(r)],
    })),
  ),
];
