import { PLAIN_CAMERA, type Camera } from '../simulator/camera';
import type { FileKind } from '../simulator/encode';
import type { FramePlan } from '../simulator/family';
import { random, type Random } from '../simulator/random';
import type { ScanPlan } from '../simulator/scan';
import { PLAIN_SCENE, type Scene } from '../simulator/scene';

/**
 * The invented receiving lab of the demo: what its benches state, what they truly are, and every frame taken
 * over 90 days. Frames become files by the simulator and readings by the product's own engine; nothing here
 * is a result. All names, lots and serials are invented.
 */
export const DEMO_DAYS = 90;

export type Fate = 'accept' | 'return' | 'review' | 'draft' | 'as-it-falls';

export interface DemoFrame {
  /** Days before the demo's now, with the time of day as a fraction. */
  daysAgo: number;
  bench: number;
  fileName: string;
  subject: { kind: 'source' } | { kind: 'unit'; lot: string; serial: string };
  plan: FramePlan | ScanPlan;
  /** Cut the file off after this share of its bytes. */
  cutAt?: number;
  fate: Fate;
  /** Which technician takes it, 0 or 1. */
  by: 0 | 1;
}

export interface DemoSetup {
  bench: number;
  daysAgo: number;
  plate: string;
  scaleUmPerPx: [value: number, stated: number];
  separationUm: [value: number, stated: number];
  widthUm: [value: number, stated: number];
  distanceMm: [value: number, stated: number];
  camera: { model: string; serial: string; bits: number };
  why: string;
  dueInDays: { plate: number; scale: number; distance: number };
  /** Nobody has decided on it yet. */
  waits?: true;
}

export const DEMO_BENCHES = [
  { name: 'Bench 1', note: 'Invented. Bare sensor, 6.9 µm pixels, no lens.' },
  { name: 'Bench 2', note: 'Invented. Paper screen and camera with lens.' },
  { name: 'Bench 3', note: 'Invented. Ground-glass screen, used for short wavelengths.' },
];

export const DEMO_SETUPS: DemoSetup[] = [
  {
    bench: 0,
    daysAgo: 90,
    plate: 'P-2',
    scaleUmPerPx: [6.9, 0.0014],
    separationUm: [250.1, 0.2],
    widthUm: [50.2, 0.6],
    distanceMm: [300.2, 0.3],
    camera: { model: 'Invented sensor S-6.9', serial: '0101', bits: 12 },
    why: 'First setup of this bench.',
    dueInDays: { plate: 120, scale: 300, distance: 41 },
  },
  {
    bench: 1,
    daysAgo: 90,
    plate: 'P-3',
    scaleUmPerPx: [52.092, 0.031],
    separationUm: [250.0, 0.19],
    widthUm: [30.0, 0.4],
    distanceMm: [1852.4, 0.9],
    camera: { model: 'Invented camera K-2', serial: '0207', bits: 12 },
    why: 'First setup of this bench.',
    dueInDays: { plate: 110, scale: 30, distance: 60 },
  },
  {
    bench: 1,
    daysAgo: 51,
    plate: 'P-3',
    scaleUmPerPx: [52.092, 0.031],
    separationUm: [250.0, 0.19],
    widthUm: [30.0, 0.4],
    distanceMm: [1850.2, 0.9],
    camera: { model: 'Invented camera K-2', serial: '0207', bits: 12 },
    why: 'Screen re-clamped, distance measured again.',
    dueInDays: { plate: 110, scale: 30, distance: 60 },
  },
  {
    bench: 1,
    daysAgo: 17,
    plate: 'P-3',
    scaleUmPerPx: [52.04, 0.031],
    separationUm: [250.0, 0.19],
    widthUm: [30.0, 0.4],
    distanceMm: [1850.2, 0.9],
    camera: { model: 'Invented camera K-2', serial: '0207', bits: 12 },
    why: 'Pixel scale measured again from a photographed scale.',
    dueInDays: { plate: 110, scale: 200, distance: 20 },
  },
  {
    bench: 2,
    daysAgo: 90,
    plate: 'P-5',
    scaleUmPerPx: [25.0, 0.012],
    separationUm: [249.6, 0.2],
    widthUm: [40.3, 0.5],
    distanceMm: [1000.4, 0.5],
    camera: { model: 'Invented camera K-2', serial: '0212', bits: 12 },
    why: 'First setup of this bench.',
    dueInDays: { plate: 90, scale: 2, distance: 80 },
  },
  {
    bench: 2,
    daysAgo: 0.2,
    plate: 'P-5',
    scaleUmPerPx: [25.006, 0.012],
    separationUm: [249.6, 0.2],
    widthUm: [40.3, 0.5],
    distanceMm: [1000.4, 0.5],
    camera: { model: 'Invented camera K-2', serial: '0212', bits: 12 },
    why: 'Pixel scale measured again: its date is near.',
    dueInDays: { plate: 90, scale: 200, distance: 80 },
    waits: true,
  },
];

export const DEMO_SPECIFICATIONS = [
  { key: 'red', name: 'Red module 635 ± 5', nominalNm: 635, half: 5, rule: 'guard-expanded' as const },
  { key: 'green', name: 'Green module 520 ± 5', nominalNm: 520, half: 5, rule: 'guard-expanded' as const },
  { key: 'blue', name: 'Blue module 450 ± 5', nominalNm: 450, half: 5, rule: 'simple' as const },
  {
    key: 'narrow',
    name: 'Narrow red module 635 ± 0.5',
    nominalNm: 635,
    half: 0.5,
    rule: 'guard-expanded' as const,
  },
];

export const DEMO_LOTS = [
  {
    number: '0930',
    specification: 'blue',
    supplier: 'Invented supplier A',
    prefix: 'LM-17',
    first: 60,
    units: 12,
    daysAgo: 60,
  },
  {
    number: '0931',
    specification: 'red',
    supplier: 'Invented supplier B',
    prefix: 'LM-24',
    first: 1,
    units: 24,
    daysAgo: 40,
  },
  {
    number: '0932',
    specification: 'green',
    supplier: 'Invented supplier A',
    prefix: 'LM-20',
    first: 80,
    units: 12,
    daysAgo: 25,
  },
  {
    number: '0933',
    specification: 'narrow',
    supplier: 'Invented supplier C',
    prefix: 'LM-33',
    first: 1,
    units: 6,
    daysAgo: 10,
  },
];

export function serialsOf(lot: (typeof DEMO_LOTS)[number]): string[] {
  return Array.from(
    { length: lot.units },
    (_, i) => `${lot.prefix}${String(lot.first + i).padStart(2, '0')}`,
  );
}

/** The true geometry behind a bench's stated one at a moment, off by less than it states. */
function truth(bench: number, daysAgo: number, r: Random): Scene {
  const remount = 1 + 1e-4 * r.normal();
  const base = {
    ...PLAIN_SCENE,
    widthPx: 1280,
    heightPx: 400,
    visibility: r.between(0.9, 0.96),
    tiltDeg: r.between(-0.6, 0.9),
    envelopeShiftPx: r.between(-3, 3),
    zeroXPx: 640 + r.between(-35, 35),
    zeroYPx: 200 + r.between(-15, 15),
    bandHalfPx: r.between(120, 150),
  };
  if (bench === 0)
    return {
      ...base,
      scaleUmPerPx: 6.9003,
      separationUm: 250.04,
      widthUm: 50.0,
      distanceMm: 300.15 * remount,
    };
  if (bench === 2)
    return {
      ...base,
      scaleUmPerPx: 25.004,
      separationUm: 249.66,
      widthUm: 40.1,
      distanceMm: 1000.5 * remount,
    };
  // The scale of bench 2 creeps as its lens works loose, until it is measured again; its screen moved once.
  const creep = daysAgo > 51 || daysAgo <= 17 ? 0 : ((51 - daysAgo) / 34) * 3.5e-4;
  const scale = daysAgo > 17 ? 52.083 : 52.043;
  return {
    ...base,
    scaleUmPerPx: scale * (1 - creep),
    separationUm: 250.03,
    widthUm: 30.1,
    distanceMm: (daysAgo > 51 ? 1852.1 : 1850.0) * remount,
  };
}

function camera(r: Random, change: Partial<Camera> = {}): Camera {
  return {
    ...PLAIN_CAMERA,
    seed: r.integer(1, 2 ** 30),
    peakElectrons: r.between(8000, 16_000),
    peakShare: r.between(0.6, 0.84),
    speckle: { contrast: 0.06, grainPx: 3 },
    ...change,
  };
}

/** Reference frames: He-Ne R-1, taken to see that the bench agrees. */
function references(r: Random): DemoFrame[] {
  const AIR_632_8 = 632.8195;
  const frames: DemoFrame[] = [];
  const take = (bench: number, daysAgo: number): void => {
    const scene = { ...truth(bench, daysAgo, r), wavelengthNm: AIR_632_8 };
    // One run with the screen knocked out of place, as happens.
    if (bench === 1 && Math.abs(daysAgo - 41.5) < 0.5) scene.distanceMm *= 1.0016;
    frames.push({
      daysAgo,
      bench,
      fileName: `b${bench + 1}-ref-${String(Math.round(1000 - daysAgo * 10))}.tif`,
      subject: { kind: 'source' },
      plan: { scene, camera: camera(r), kind: 'tiff' },
      fate: 'accept',
      by: 0,
    });
  };
  for (let day = 88; day >= 1; day -= 3.1) take(1, day);
  for (let day = 85; day >= 3; day -= 16) take(0, day);
  for (let day = 80; day >= 6; day -= 19) take(2, day);
  return frames;
}

/** Unit frames, lot by lot, with the things that go wrong on a bench. */
function units(r: Random): DemoFrame[] {
  const frames: DemoFrame[] = [];
  const add = (
    lot: string,
    serial: string,
    bench: number,
    daysAgo: number,
    wavelengthNm: number,
    fate: Fate,
    change: {
      scene?: Partial<Scene>;
      camera?: Partial<Camera>;
      kind?: FileKind;
      cutAt?: number;
      take?: number;
    } = {},
  ): void => {
    const kind = change.kind ?? 'tiff';
    const ending = kind === 'jpeg' ? 'jpg' : kind === 'tiff' ? 'tif' : kind;
    frames.push({
      daysAgo,
      bench,
      fate,
      by: frames.length % 3 === 0 ? 1 : 0,
      cutAt: change.cutAt,
      fileName: `b${bench + 1}-${lot}-${serial}-${change.take ?? 1}.${ending}`,
      subject: { kind: 'unit', lot, serial },
      plan: {
        scene: { ...truth(bench, daysAgo, r), wavelengthNm, ...change.scene },
        camera: camera(r, change.camera),
        kind,
        quality: 92,
      },
    });
  };
  const [blue, red, green, narrow] = DEMO_LOTS.map(serialsOf);
  blue
    .slice(0, 10)
    .forEach((serial, i) => add('0930', serial, 2, 58 - i * 0.8, 450.6 + 1.1 * r.normal(), 'accept'));
  add('0930', blue[10], 2, 49.5, 457.1, 'accept');
  red
    .slice(0, 13)
    .forEach((serial, i) => add('0931', serial, 1, 38 - i * 1.4, 634.7 + 1.2 * r.normal(), 'accept'));
  green.slice(0, 6).forEach((serial, i) =>
    add('0932', serial, 2, 22 - i * 1.3, 520.8 + 1.3 * r.normal(), 'accept', {
      camera: { peakShare: r.between(0.55, 0.8) },
    }),
  );
  add('0931', red[13], 1, 9.3, 634.2, 'return', {
    camera: { dirt: { dust: 9, hot: 4, deadColumns: 1, marks: 0 } },
  });
  add('0931', red[13], 1, 8.2, 634.2, 'accept', { take: 2 });
  add('0932', green[6], 2, 6.4, 521.4, 'return', { scene: { tiltDeg: 3.6 } });
  add('0931', red[14], 1, 5.3, 635.4, 'as-it-falls', { scene: { pattern: 'one', widthUm: 60 } });
  add('0931', red[14], 1, 5.2, 635.4, 'review', { take: 2 });
  add('0931', red[15], 1, 4.4, 639.55, 'review');
  add('0931', red[16], 1, 3.4, 634.9, 'review', { camera: { peakShare: 1.25 } });
  add('0931', red[17], 1, 3.3, 634.1, 'review', { scene: { tiltDeg: 1.82 } });
  add('0932', green[7], 2, 2.6, 520.1, 'review', {
    kind: 'jpeg',
    camera: { bits: 8, offsetCounts: 3, tone: 'srgb' },
  });
  add('0933', narrow[0], 1, 2.2, 634.95, 'review');
  add('0933', narrow[1], 1, 2.1, 635.2, 'draft');
  add('0931', red[18], 1, 1.2, 634.6, 'draft');
  add('0931', red[19], 1, 1.1, 633.9, 'draft', { camera: { peakShare: 0.16, peakElectrons: 2500 } });
  add('0931', red[20], 1, 0.9, 634.4, 'as-it-falls', { kind: 'png', cutAt: 0.43 });
  return frames;
}

/** Two modules measured with a counter on a slide instead of the camera, in front of the same bench. */
function scans(): DemoFrame[] {
  const r = random(20_261_202);
  const red = serialsOf(DEMO_LOTS[1]);
  const scan = (serial: string, daysAgo: number, fate: Fate, wavelengthNm: number, detectorMm: number) => ({
    daysAgo,
    bench: 1,
    fate,
    by: 0 as const,
    fileName: `b2-0931-${serial}-scan.csv`,
    subject: { kind: 'unit' as const, lot: '0931', serial },
    plan: {
      scene: { ...truth(1, daysAgo, r), envelopeShiftPx: 0.4, wavelengthNm },
      fromMm: -36,
      toMm: 36,
      stepMm: 0.2,
      zeroMm: r.between(-2, 2),
      detectorMm,
      peakCounts: 26_000,
      dark: 900,
      seed: r.integer(1, 2 ** 30),
    },
  });
  return [scan(red[21], 6.1, 'accept', 635.1, 0.5), scan(red[22], 0.7, 'review', 634.3, 1.5)];
}

/** All frames of the demo, oldest first. */
export function demoFrames(): DemoFrame[] {
  const r = random(20_261_201);
  return [...references(r), ...units(r), ...scans()].sort((a, b) => b.daysAgo - a.daysAgo);
}
