import type { Random } from './random';
import type { Scene } from './scene';

/** Changes the mean light of a frame in place, before the camera's noise: what stands between the fringes and the camera. */
export type Paint = (mean: Float32Array, scene: Scene) => void;

const each = (
  mean: Float32Array,
  scene: Scene,
  change: (x: number, y: number, light: number) => number,
): void => {
  for (let r = 0; r < scene.heightPx; r += 1) {
    for (let c = 0; c < scene.widthPx; c += 1) {
      const i = r * scene.widthPx + c;
      mean[i] = change(c + 0.5, r + 0.5, mean[i]);
    }
  }
};

/** Ruled paper as a screen: faint lines along one direction and the paper's own blotches. */
export function ruledPaper(r: Random): Paint {
  const pitch = r.between(28, 60);
  const phase = r.between(0, pitch);
  const depth = r.between(0.05, 0.25);
  const lean = r.between(-0.05, 0.05);
  const blot = Array.from({ length: 12 }, () => [
    r.between(0, 1),
    r.between(0, 1),
    r.between(40, 200),
    r.between(-0.08, 0.08),
  ]);
  return (mean, scene) =>
    each(mean, scene, (x, y, light) => {
      const along = (y + lean * x + phase) % pitch;
      let k = along < 2.5 ? 1 - depth : 1;
      for (const [bx, by, size, strength] of blot) {
        const q = ((x - bx * scene.widthPx) ** 2 + (y - by * scene.heightPx) ** 2) / (size * size);
        if (q < 9) k *= 1 + strength * Math.exp(-q);
      }
      return light * k;
    });
}

/** A lens's fall-off towards the corners. */
export function vignetting(depth: number): Paint {
  return (mean, scene) => {
    const cx = scene.widthPx / 2;
    const cy = scene.heightPx / 2;
    const far = cx * cx + cy * cy;
    each(mean, scene, (x, y, light) => light * (1 - (depth * ((x - cx) ** 2 + (y - cy) ** 2)) / far));
  };
}

/** A faint bright spot from a reflection. */
export function ghost(r: Random, strength: number): Paint {
  const gx = r.between(0.1, 0.9);
  const gy = r.between(0.1, 0.9);
  const size = r.between(8, 40);
  return (mean, scene) =>
    each(
      mean,
      scene,
      (x, y, light) =>
        light +
        strength *
          Math.exp(-((x - gx * scene.widthPx) ** 2 + (y - gy * scene.heightPx) ** 2) / (size * size)),
    );
}

/** A pen line across the fringes, hiding one of them. */
export function penLine(r: Random, spacingPx: number): Paint {
  const m = r.integer(-2, 2);
  const wide = r.between(0.2, 0.5) * spacingPx;
  return (mean, scene) => {
    const at = scene.zeroXPx + m * spacingPx;
    each(mean, scene, (x, _y, light) => (Math.abs(x - at) < wide / 2 ? 0.15 * light : light));
  };
}

/** Weak fringes of a cover glass or window: the light times 1 + c·cos(2π·u/Λ′ + φ), c 1 to 5 %, nearly along the others. */
export function parasiticFringes(r: Random, periodPx: number): Paint {
  const contrast = r.between(0.01, 0.05);
  const phase = r.between(0, 2 * Math.PI);
  const lean = (r.between(-4, 4) * Math.PI) / 180;
  return (mean, scene) => {
    const angle = (scene.tiltDeg * Math.PI) / 180 + lean;
    const kx = (2 * Math.PI * Math.cos(angle)) / periodPx;
    const ky = (2 * Math.PI * Math.sin(angle)) / periodPx;
    each(mean, scene, (x, y, light) => light * (1 + contrast * Math.cos(kx * x + ky * y + phase)));
  };
}

/** The screen's edge: beyond it the room. */
export function screenEdge(r: Random): Paint {
  const at = r.between(0.03, 0.12);
  return (mean, scene) => each(mean, scene, (x, _y, light) => (x < at * scene.widthPx ? 0.02 : light));
}

/** Pages, walls, blinds, photographs: pictures without two-slit fringes. */
export const NO_FRINGES: Record<string, (r: Random) => Paint> = {
  'text page': (r) => {
    const lineHeight = r.integer(22, 40);
    const seed = Array.from({ length: 4096 }, () => r.uniform());
    return (mean, scene) =>
      each(mean, scene, (x, y, _light) => {
        const row = Math.floor(y / lineHeight);
        const inLine = (y % lineHeight) / lineHeight;
        const glyph = Math.floor(x / (lineHeight * 0.45));
        const q = seed[(row * 131 + glyph * 7) & 4095];
        if (inLine < 0.25 || inLine > 0.8 || q < 0.18) return 0.85;
        const gx = (x / (lineHeight * 0.45)) % 1;
        const ink = (q * 10) % 1 < 0.5 ? gx > 0.2 && gx < 0.4 : inLine > 0.45 && inLine < 0.58 && gx < 0.85;
        return ink || (gx > 0.6 && gx < 0.75 && (q * 100) % 1 < 0.6) ? 0.1 : 0.85;
      });
  },
  'brick wall': (r) => {
    const w = r.between(60, 120);
    const h = w / r.between(2.4, 3.2);
    return (mean, scene) =>
      each(mean, scene, (x, y) => {
        const row = Math.floor(y / h);
        const bx = (x + (row % 2) * (w / 2)) % w;
        const mortar = bx < 5 || y % h < 5;
        return mortar
          ? 0.8
          : 0.35 + 0.1 * Math.sin(row * 12.9 + Math.floor((x + (row % 2) * (w / 2)) / w) * 78.2);
      });
  },
  blinds: (r) => {
    const pitch = r.between(18, 60);
    const open = r.between(0.3, 0.6);
    return (mean, scene) =>
      each(
        mean,
        scene,
        (x, y) => ((y + 0.02 * x) % pitch < open * pitch ? 0.8 : 0.12) * (0.8 + (0.2 * x) / scene.widthPx),
      );
  },
  'striped cloth': (r) => {
    const pitch = r.between(20, 50);
    return (mean, scene) =>
      each(
        mean,
        scene,
        (x, y) =>
          0.45 + 0.3 * Math.sin((2 * Math.PI * (x + 9 * Math.sin(y / 45) + 5 * Math.sin(x / 90))) / pitch),
      );
  },
  chessboard: (r) => {
    const side = r.between(20, 70);
    return (mean, scene) =>
      each(mean, scene, (x, y) => ((Math.floor(x / side) + Math.floor(y / side)) % 2 ? 0.8 : 0.15));
  },
  ruler: (r) => {
    const pitch = r.between(9, 30);
    return (mean, scene) =>
      each(mean, scene, (x, y) => {
        const tick = Math.floor(x / pitch);
        const length = tick % 10 === 0 ? 0.6 : tick % 5 === 0 ? 0.45 : 0.3;
        return y < length * scene.heightPx && x % pitch < 2.5 ? 0.1 : 0.75;
      });
  },
  photograph: (r) => {
    const blobs = Array.from({ length: 60 }, () => [
      r.uniform(),
      r.uniform(),
      10 ** r.between(0.6, 2.2),
      r.between(-0.5, 0.5),
      r.uniform() < 0.4 ? 12 : 1,
    ]);
    return (mean, scene) =>
      each(mean, scene, (x, y) => {
        let v = 0.4 + (0.2 * y) / scene.heightPx;
        for (const [bx, by, size, strength, power] of blobs) {
          const q = ((x - bx * scene.widthPx) ** 2 + (y - by * scene.heightPx) ** 2) / (size * size);
          if (q < 4) v += strength * Math.exp(-Math.pow(q, power));
        }
        return Math.min(0.95, Math.max(0.02, v));
      });
  },
};
