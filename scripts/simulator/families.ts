import type { RefusalCode, SetupValues } from '@/lib/domain/reading-result';
import { PLAIN_CAMERA, type Camera } from './camera';
import type { FileKind } from './encode';
import { ghost, NO_FRINGES, penLine, ruledPaper, screenEdge, vignetting, type Paint } from './paintings';
import { random, type Random } from './random';
import { PLAIN_SCENE, trueSpacingPx, type Scene } from './scene';

/** One frame to make: everything that decides its bytes. */
export interface FramePlan {
  scene: Scene;
  camera: Camera;
  kind: FileKind;
  quality?: number;
  orientation?: number;
  paints?: Paint[];
}

/** What the benchmark asks of a family; see the table in DEVELOPERS.md. */
export interface Family {
  name: string;
  frames: number;
  /** √mean (error / bound)² at most; null where only the other figures count. */
  efficiency: number | null;
  /** Least and most coverage of the 95 % interval. */
  coverage: [number, number];
  /** Least share of answered frames. */
  answered: number;
  /** A wrong answer is off by more than 6 u and more than this share of the spacing. */
  wrongBeyond: number;
  /** Order centres are held against their bound. */
  orders: boolean;
  plan: (seed: number) => FramePlan;
}

/** A family whose frames must all be refused, each with one of these codes. */
export interface Hopeless {
  name: string;
  codes: RefusalCode[];
  plan: (seed: number) => FramePlan;
}

/** The standard uncertainties every simulated bench states. */
export const BENCH_U = { separationUm: 0.1, scaleRelative: 1e-4, distanceMm: 0.17 };

export function setupOf(scene: Scene): SetupValues {
  return {
    scaleUmPerPx: { value: scene.scaleUmPerPx, u: scene.scaleUmPerPx * BENCH_U.scaleRelative },
    separationUm: { value: scene.separationUm, u: BENCH_U.separationUm },
    widthUm: { value: scene.widthUm, u: 0.4 },
    distanceMm: { value: scene.distanceMm, u: BENCH_U.distanceMm },
  };
}

export function curvatureU(scene: Scene): number {
  return Math.hypot(BENCH_U.scaleRelative, BENCH_U.distanceMm / scene.distanceMm);
}

/** Sets the scale so that a fringe has this many px. */
function withSpacing(scene: Scene, px: number): Scene {
  return { ...scene, scaleUmPerPx: (scene.scaleUmPerPx * trueSpacingPx(scene)) / px };
}

function plain(r: Random): Scene {
  const widthPx = 1024;
  const heightPx = 192;
  const constant = r.between(0, 0.04);
  const scene: Scene = {
    ...PLAIN_SCENE,
    widthPx,
    heightPx,
    wavelengthNm: r.between(440, 690),
    widthUm: r.between(32, 62),
    zeroXPx: widthPx / 2 + r.between(-60, 60),
    zeroYPx: heightPx / 2 + r.between(-15, 15),
    visibility: r.between(0.85, 0.98),
    envelopeShiftPx: r.between(-4, 4),
    tiltDeg: r.between(-0.3, 0.3),
    bandHalfPx: r.uniform() < 0.5 ? Infinity : r.between(60, 90),
    stray: {
      constant,
      // Light is never less than none, so its slope is at most what the constant part leaves room for.
      slope: r.between(-1, 1) * Math.min(0.02, 2 * constant),
      hump: 0,
      humpXPx: 0,
      humpSigmaPx: 1,
    },
  };
  return withSpacing(scene, r.between(45, 130));
}

function camera(r: Random, change: Partial<Camera> = {}): Camera {
  return {
    ...PLAIN_CAMERA,
    seed: r.integer(1, 2 ** 31),
    peakElectrons: r.between(6000, 20_000),
    peakShare: r.between(0.55, 0.85),
    ...change,
  };
}

const STRICT: Pick<Family, 'frames' | 'coverage' | 'answered' | 'wrongBeyond'> = {
  frames: 200,
  coverage: [0.92, 0.98],
  answered: 0.98,
  wrongBeyond: 1e-4,
};
const LOOSE = { ...STRICT, coverage: [0.9, 1] as [number, number] };

function family(
  name: string,
  rules: Partial<Family>,
  make: (r: Random) => {
    scene: Scene;
    camera: Camera;
    kind?: FileKind;
    quality?: number;
    orientation?: number;
    paints?: Paint[];
  },
): Family {
  return {
    ...STRICT,
    efficiency: 1.1,
    orders: false,
    name,
    ...rules,
    plan: (seed) => {
      const r = random(seed * 7919 + name.length * 104_729 + name.charCodeAt(0));
      return { kind: 'tiff', ...make(r) };
    },
  };
}

export const FAMILIES: Family[] = [
  family('clean', { orders: true }, (r) => ({ scene: plain(r), camera: camera(r) })),
  family('low light', { orders: true }, (r) => ({
    scene: plain(r),
    camera: camera(r, { peakElectrons: r.between(20, 200), readElectrons: 2, peakShare: 0.3 }),
  })),
  family('low visibility', { orders: true }, (r) => ({
    scene: { ...plain(r), visibility: r.between(0.05, 0.4) },
    camera: camera(r),
  })),
  family('tilted', { orders: true }, (r) => {
    const scene = { ...plain(r), heightPx: 512, zeroYPx: 256 + r.between(-40, 40) };
    return {
      scene: { ...scene, tiltDeg: (r.uniform() < 0.5 ? -1 : 1) * r.between(0.3, 4) },
      camera: camera(r),
    };
  }),
  family('any angle', {}, (r) => {
    const scene = {
      ...plain(r),
      widthPx: 640,
      heightPx: 640,
      zeroXPx: 320 + r.between(-30, 30),
      zeroYPx: 320 + r.between(-30, 30),
      bandHalfPx: r.between(60, 140),
    };
    return {
      scene: { ...withSpacing(scene, r.between(25, 60)), tiltDeg: r.between(-89, 90) },
      camera: camera(r),
    };
  }),
  family('missing orders', { orders: true }, (r) => {
    const scene = plain(r);
    const ratio = r.integer(2, 6);
    return {
      scene: withSpacing({ ...scene, widthUm: scene.separationUm / ratio }, r.between(28, 60)),
      camera: camera(r),
    };
  }),
  family('clipped', { efficiency: 1.25 }, (r) => ({
    scene: plain(r),
    camera: camera(r, { peakShare: r.between(1.08, 2.2) }),
  })),
  family('fine', { efficiency: 1.3, answered: 0.9 }, (r) => {
    const scene = plain(r);
    return {
      scene: withSpacing(
        { ...scene, widthUm: r.between(6, 14), widthPx: 640, zeroXPx: 320 + r.between(-20, 20) },
        r.between(2.55, 6),
      ),
      camera: camera(r),
    };
  }),
  family('few fringes', { efficiency: 1.5, answered: 0.9 }, (r) => {
    const scene = plain(r);
    const spacing = scene.widthPx / r.between(3.2, 6);
    return { scene: withSpacing(scene, spacing), camera: camera(r) };
  }),
  family('wide fringes', {}, (r) => {
    const scene = { ...plain(r), widthPx: 2400, zeroXPx: 1200 + r.between(-90, 90) };
    return { scene: withSpacing(scene, r.between(200, 400)), camera: camera(r) };
  }),
  family('spots on a dark frame', { efficiency: 1.5 }, (r) => {
    const scene: Scene = {
      ...plain(r),
      widthPx: 1280,
      heightPx: 1024,
      zeroXPx: r.between(300, 980),
      zeroYPx: r.between(200, 820),
      bandHalfPx: r.between(16, 24),
      bandPower: 2.2,
      tiltDeg: r.between(0, 4),
      stray: { constant: 0.002, slope: 0, hump: 0, humpXPx: 0, humpSigmaPx: 1 },
    };
    return {
      scene: withSpacing({ ...scene, widthUm: r.between(38, 55) }, r.between(32, 40)),
      camera: camera(r, { bits: 8, offsetCounts: 20, peakElectrons: 5000, readElectrons: 12 }),
    };
  }),
  family('off centre', { efficiency: 1.5, answered: 0.9 }, (r) => {
    const scene = plain(r);
    return {
      scene: {
        ...withSpacing({ ...scene, widthUm: r.between(28, 40) }, r.between(50, 70)),
        zeroXPx: -r.between(10, 120),
      },
      camera: camera(r),
    };
  }),
  family('glow', { efficiency: 1.5 }, (r) => {
    const scene = plain(r);
    return {
      scene: {
        ...scene,
        stray: {
          constant: 0.07,
          slope: r.between(-0.1, 0.1),
          hump: r.between(0.05, 0.2),
          humpXPx: r.between(200, 800),
          humpSigmaPx: r.between(200, 500),
        },
      },
      camera: camera(r),
    };
  }),
  family('speckle', { ...LOOSE, efficiency: 2, wrongBeyond: 1e-3 }, (r) => ({
    scene: plain(r),
    camera: camera(r, { speckle: { contrast: r.between(0.1, 0.6), grainPx: r.between(2, 6) } }),
  })),
  family('clutter', { ...LOOSE, efficiency: 3, answered: 0.9 }, (r) => ({
    scene: plain(r),
    camera: camera(r, {
      dirt: {
        dust: r.integer(2, 6),
        hot: r.integer(5, 60),
        deadColumns: r.integer(0, 3),
        marks: r.integer(0, 6),
      },
    }),
  })),
  family('oblique view', { ...LOOSE, efficiency: 3 }, (r) => {
    const scene = plain(r);
    return {
      scene: {
        ...scene,
        obliquePerPx: (r.uniform() < 0.5 ? -1 : 1) * (r.between(0.01, 0.05) / scene.widthPx),
      },
      camera: camera(r),
    };
  }),
  family('tone curve', { efficiency: null }, (r) => ({
    scene: plain(r),
    camera: camera(r, { tone: r.between(0.45, 1.1), offsetCounts: 0 }),
    kind: 'png',
  })),
  family('phone JPEG', { ...LOOSE, frames: 50, efficiency: 6, wrongBeyond: 1e-3 }, (r) => {
    const scene: Scene = {
      ...plain(r),
      widthPx: 2000,
      heightPx: 1500,
      zeroXPx: 1000 + r.between(-150, 150),
      zeroYPx: 750 + r.between(-150, 150),
      bandHalfPx: r.between(90, 220),
      bandPower: 3,
      tiltDeg: r.between(-3, 3),
      wavelengthNm: r.between(620, 660),
      stray: { constant: 0.02, slope: r.between(-0.02, 0.02), hump: 0.03, humpXPx: 1000, humpSigmaPx: 700 },
    };
    return {
      scene: withSpacing(scene, r.between(60, 120)),
      camera: camera(r, {
        bits: 8,
        offsetCounts: 3,
        tone: 'srgb',
        bayer: [1, 0.12, 0.03],
        peakShare: r.between(0.6, 1.3),
        peakElectrons: 4000,
        speckle: { contrast: r.between(0.1, 0.4), grainPx: r.between(2, 5) },
        dirt: { dust: 1, hot: 20, deadColumns: 0, marks: 3 },
      }),
      kind: 'jpeg',
      quality: r.integer(80, 95),
      orientation: [1, 3, 6, 8][r.integer(0, 3)],
      paints: [ruledPaper(r), vignetting(r.between(0, 0.4)), ghost(r, r.between(0, 0.25))],
    };
  }),
  family(
    'phone, red burnt out, oblique',
    { ...LOOSE, frames: 50, efficiency: null, wrongBeyond: 1e-3 },
    (r) => {
      const scene: Scene = {
        ...plain(r),
        widthPx: 2000,
        heightPx: 1500,
        zeroXPx: 1000 + r.between(-150, 150),
        zeroYPx: 750 + r.between(-150, 150),
        bandHalfPx: r.between(90, 220),
        bandPower: 3,
        wavelengthNm: r.between(620, 660),
        obliquePerPx: r.between(-0.05, 0.05) / 2000,
      };
      return {
        scene: withSpacing(scene, r.between(60, 120)),
        camera: camera(r, {
          bits: 8,
          offsetCounts: 3,
          tone: 'srgb',
          bayer: [1, 0.12, 0.03],
          peakShare: r.between(1.5, 3),
          peakElectrons: 9000,
          speckle: { contrast: r.between(0.1, 0.3), grainPx: r.between(2, 5) },
        }),
        kind: 'jpeg',
        quality: r.integer(85, 95),
        paints: [ruledPaper(r), screenEdge(r)],
      };
    },
  ),
  family('pen line', { efficiency: 3, answered: 0.9, coverage: [0.9, 1] }, (r) => {
    const scene = { ...plain(r), heightPx: 480, zeroYPx: 240, bandHalfPx: Infinity, tiltDeg: 0 };
    return { scene, camera: camera(r), paints: [penLine(r, trueSpacingPx(scene))] };
  }),
];

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
  hopeless('single slit', ['ONE_SLIT', 'NO_FRINGES'], (r) => ({
    scene: { pattern: 'one', widthUm: r.between(40, 250) },
  })),
  hopeless('single slit, burnt out middle', ['ONE_SLIT', 'NO_FRINGES', 'BURNT_OUT'], (r) => ({
    scene: { pattern: 'one', widthUm: r.between(120, 250) },
    camera: { peakShare: 6 },
  })),
  hopeless('five slits', ['MANY_SLITS', 'NO_FRINGES'], () => ({ scene: { pattern: 'five' } })),
  hopeless('rings', ['RINGS', 'NO_FRINGES'], (r) => ({
    scene: { pattern: 'rings', heightPx: 700, zeroYPx: r.between(250, 450) },
  })),
  hopeless('noise only', ['NO_FRINGES', 'TOO_DARK'], () => ({ scene: { visibility: 0, widthUm: 0.01 } })),
  hopeless('black', ['TOO_DARK', 'NO_FRINGES'], () => ({ camera: { peakShare: 0.0002, peakElectrons: 2 } })),
  hopeless('burnt out', ['BURNT_OUT', 'NO_FRINGES'], () => ({
    scene: { stray: { constant: 3, slope: 0, hump: 0, humpXPx: 0, humpSigmaPx: 1 } },
  })),
  hopeless('two fringes', ['TOO_FEW_FRINGES', 'NO_FRINGES', 'PATTERN_CUT'], (r) => {
    const base = withSpacing(PLAIN_SCENE, 1024 / r.between(1.2, 2));
    return { scene: { scaleUmPerPx: base.scaleUmPerPx, wavelengthNm: 635 } };
  }),
  ...Object.entries(NO_FRINGES).map(([name, paint]) =>
    hopeless(name, ['NO_FRINGES', 'MANY_SLITS', 'RINGS', 'ONE_SLIT', 'TOO_FEW_FRINGES'], (r) => ({
      scene: { widthPx: 900, heightPx: 600, zeroYPx: 300 },
      camera: { bits: 8, offsetCounts: 3 },
      paints: [paint(r)],
    })),
  ),
];
