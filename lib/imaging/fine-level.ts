import type { Picture, Plane } from './picture';
import { PLANE_PIXELS, reducePicture, reduceWindow } from './pyramid';

/**
 * A finer level of the pyramid than is made as a whole: only tiles of it are read, and a plane is made of it where a
 * wave that is fine enough to need it was seen.
 */
export interface FineLevel {
  picture: Picture;
  factor: number;
  widthPx: number;
  heightPx: number;
  /** The whole level once it was made; kept, because several waves may need it. */
  plane: Plane | null;
}

/** The levels finer than one of this factor, finest first. */
export function fineLevels(picture: Picture, factor: number): FineLevel[] {
  const levels: FineLevel[] = [];
  for (let f = 1; f < factor; f *= 2) {
    levels.push({
      picture,
      factor: f,
      widthPx: Math.floor(picture.widthPx / f),
      heightPx: Math.floor(picture.heightPx / f),
      plane: null,
    });
  }
  return levels;
}

/** Linear light of a tile whose corner is at (x0, y0) of the level, row by row with `stride` entries a row. */
export function readTile(
  level: FineLevel,
  x0: number,
  y0: number,
  widthPx: number,
  heightPx: number,
  out: Float32Array,
  stride: number,
): void {
  const { picture, factor } = level;
  const { samples, light } = picture;
  const scale = 1 / (factor * factor);
  for (let y = 0; y < heightPx; y++) {
    const to = y * stride;
    for (let x = 0; x < widthPx; x++) out[to + x] = 0;
    for (let dy = 0; dy < factor; dy++) {
      let i = ((y0 + y) * factor + dy) * picture.widthPx + x0 * factor;
      for (let x = 0; x < widthPx; x++) {
        let s = 0;
        for (let dx = 0; dx < factor; dx++) s += light[samples[i++]];
        out[to + x] += s;
      }
    }
    for (let x = 0; x < widthPx; x++) out[to + x] *= scale;
  }
}

const ENERGY_STEP_X = 5;
const ENERGY_STEP_Y = 7;

/** Mean squared difference of neighbours three apart, from a few pixels of a tile. */
export function tileEnergyOf(level: FineLevel, x0: number, y0: number, tw: number, th: number): number {
  const { picture, factor } = level;
  const { samples, light, widthPx } = picture;
  const right = 3 * factor;
  const down = 3 * factor * widthPx;
  let s = 0;
  let n = 0;
  for (let y = y0; y + 3 < y0 + th; y += ENERGY_STEP_Y) {
    const row = y * factor * widthPx;
    for (let x = x0; x + 3 < x0 + tw; x += ENERGY_STEP_X) {
      const i = row + x * factor;
      const here = light[samples[i]];
      const a = here - light[samples[i + right]];
      const b = here - light[samples[i + down]];
      s += a * a + b * b;
      n++;
    }
  }
  return n > 0 ? s / n : 0;
}

/** The level as a plane; of a large one the window of PLANE_PIXELS around a place of the frame. */
export function planeAt(level: FineLevel, xPx: number, yPx: number): Plane {
  const { picture, factor, widthPx, heightPx } = level;
  if (level.plane) return level.plane;
  if (widthPx * heightPx <= PLANE_PIXELS) {
    level.plane = reducePicture(picture, factor);
    return level.plane;
  }
  const side = Math.sqrt(PLANE_PIXELS);
  const w = Math.min(widthPx, Math.floor(PLANE_PIXELS / Math.min(side, heightPx)));
  const h = Math.min(heightPx, Math.floor(PLANE_PIXELS / w));
  const x0 = Math.max(0, Math.min(widthPx - w, Math.round(xPx / factor - w / 2)));
  const y0 = Math.max(0, Math.min(heightPx - h, Math.round(yPx / factor - h / 2)));
  return reduceWindow(picture, factor, x0, y0, w, h);
}
