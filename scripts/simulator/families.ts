import { camera, family, LOOSE, plain, withSpacing, type Family } from './family';
import { ghost, parasiticFringes, penLine, ruledPaper, screenEdge, vignetting } from './paintings';
import { trueSpacingPx, type Scene } from './scene';

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
  family('unequal slits', { ...LOOSE, efficiency: null }, (r) => {
    const scene = plain(r);
    const ratio = 1 + (r.uniform() < 0.5 ? -1 : 1) * r.between(0.05, 0.25);
    return { scene: { ...scene, secondWidthUm: scene.widthUm * ratio }, camera: camera(r) };
  }),
  family('bandwidth', { ...LOOSE, efficiency: null }, (r) => {
    // Narrow slits and many orders, so that the contrast's fall with order can be seen.
    const scene = { ...plain(r), widthUm: r.between(14, 28), lineWidthNm: r.between(8, 25) };
    return { scene: withSpacing(scene, r.between(26, 45)), camera: camera(r) };
  }),
  family('second fringe system', { ...LOOSE, efficiency: null, wrongBeyond: 1e-3 }, (r) => {
    const scene = plain(r);
    const ratio = r.uniform() < 0.4 ? r.between(0.8, 0.94) : r.between(1.07, 1.4);
    return { scene, camera: camera(r), paints: [parasiticFringes(r, ratio * trueSpacingPx(scene))] };
  }),
  family('keystone', { ...LOOSE, efficiency: null }, (r) => {
    const scene = { ...plain(r), heightPx: 256, zeroYPx: 128 };
    const change = (r.uniform() < 0.5 ? -1 : 1) * r.between(0.005, 0.03);
    return { scene: { ...scene, keystonePerPx: change / scene.heightPx }, camera: camera(r) };
  }),
  family('small frames', { answered: 0.9 }, (r) => {
    const scene = {
      ...plain(r),
      widthPx: 400,
      heightPx: 100,
      zeroXPx: 200 + r.between(-30, 30),
      zeroYPx: 50 + r.between(-10, 10),
    };
    return { scene: withSpacing(scene, r.between(16, 45)), camera: camera(r) };
  }),
];
