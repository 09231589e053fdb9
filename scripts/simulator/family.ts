import type { SetupValues } from '@/lib/domain/reading-result';
import { PLAIN_CAMERA, type Camera } from './camera';
import type { FileKind } from './encode';
import type { Paint } from './paintings';
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
export function withSpacing(scene: Scene, px: number): Scene {
  return { ...scene, scaleUmPerPx: (scene.scaleUmPerPx * trueSpacingPx(scene)) / px };
}

export function plain(r: Random): Scene {
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

export function camera(r: Random, change: Partial<Camera> = {}): Camera {
  return {
    ...PLAIN_CAMERA,
    seed: r.integer(1, 2 ** 31),
    peakElectrons: r.between(6000, 20_000),
    peakShare: r.between(0.55, 0.85),
    ...change,
  };
}

export const STRICT: Pick<Family, 'frames' | 'coverage' | 'answered' | 'wrongBeyond'> = {
  frames: 200,
  coverage: [0.92, 0.98],
  answered: 0.98,
  wrongBeyond: 1e-4,
};
export const LOOSE = { ...STRICT, coverage: [0.9, 1] as [number, number] };

export function family(
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
