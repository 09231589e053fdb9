import { levelFor, tracePatch, type FringePatch } from './demodulate';
import { fineLevels } from './fine-level';
import { toDegrees, toRadians, wrapAngleDeg, type Rectangle } from './geometry';
import type { Picture } from './picture';
import { coarsePlanes, PLANE_PIXELS } from './pyramid';
import { findWaves } from './spectrum';

/** A place in the frame that may hold two-slit fringes. */
export interface FringePlace {
  rect: Rectangle;
  spacingPx: number;
  patch: FringePatch;
}

const WAVES_TRIED = 7;
/** Pixels of finer levels that are searched for them, which takes longest; a wave that is begun is finished. */
const FINE_PIXELS = 3_000_000;
/** Votes below this share of the strongest wave's are noise; fringes beside a livelier pattern have far more. */
const WEAKEST_WAVE = 1e-3;
/** Bands of cells with less than this share of the liveliest one's light are not part of the pattern. */
const EDGE_SHARE = 0.1;

/** Candidates for the pattern, the one with most coherent light first. Finer than 2.2 px is not looked for. */
export function findFringes(picture: Picture, within: Rectangle | null): FringePlace[] {
  const planes = coarsePlanes(picture);
  const levels = [...fineLevels(picture, planes[0].factor), ...planes];
  const waves = findWaves(levels, WAVES_TRIED);
  const places: FringePlace[] = [];
  let finePixels = 0;
  for (const wave of waves.filter((w) => w.weight > WEAKEST_WAVE * waves[0].weight)) {
    const level = levelFor(levels, wave);
    if ('picture' in level) {
      if (finePixels >= FINE_PIXELS) continue;
      finePixels += Math.min(PLANE_PIXELS, level.widthPx * level.heightPx);
    }
    const patch = tracePatch(level, wave);
    if (patch === null) continue;
    const place = placeOf(picture, patch, within);
    if (place === null) continue;
    const twin = places.findIndex(
      (o) =>
        Math.abs(Math.log(o.spacingPx / place.spacingPx)) < 0.1 &&
        angleBetween(o.rect.angleDeg, place.rect.angleDeg) < 10,
    );
    if (twin < 0) places.push(place);
    else if (places[twin].patch.energy < place.patch.energy) places[twin] = place;
  }
  return places.sort((a, b) => scoreOf(b) - scoreOf(a));
}

/** Energy counts for less where the phase is rough or there is little room for fringes. */
function scoreOf(place: FringePlace): number {
  const fringes = place.rect.lengthPx / place.spacingPx;
  return (
    (Math.sqrt(place.patch.energy) * Math.min(1, fringes / 4)) / (1 + (place.patch.roughTurns / 0.08) ** 2)
  );
}

export function angleBetween(a: number, b: number): number {
  return Math.abs(wrapAngleDeg(a - b));
}

/** Turned rectangle round the cells of a patch. */
function placeOf(picture: Picture, patch: FringePatch, within: Rectangle | null): FringePlace | null {
  const angleDeg = wrapAngleDeg(toDegrees(Math.atan2(patch.ky, patch.kx)));
  const spacingPx = 1 / Math.hypot(patch.kx, patch.ky);
  if (within) return { rect: { ...within, angleDeg }, spacingPx, patch };
  const c = Math.cos(toRadians(angleDeg));
  const s = Math.sin(toRadians(angleDeg));
  const cell = Math.abs(s) * patch.cellWidePx + Math.abs(c) * patch.cellHighPx;
  const u = patch.cells.map((k) => (k.x - patch.cx) * c + (k.y - patch.cy) * s);
  const v = patch.cells.map((k) => -(k.x - patch.cx) * s + (k.y - patch.cy) * c);
  const amplitude = patch.cells.map((k) => k.amplitude);
  const across = liveRange(v, amplitude, cell, EDGE_SHARE);
  const kept = u.filter((_, i) => v[i] >= across.from && v[i] <= across.to);
  if (kept.length === 0) return null;
  const from = Math.min(...kept);
  const to = Math.max(...kept);
  const margin = 0.1 * (to - from) + spacingPx;
  const frame = frameExtent(picture, patch.cx, patch.cy, c, s);
  const u0 = Math.max(frame.u0, from - margin);
  const u1 = Math.min(frame.u1, to + margin);
  const v0 = Math.max(frame.v0, across.from - cell / 2);
  const v1 = Math.min(frame.v1, across.to + cell / 2);
  if (!(u1 > u0) || !(v1 > v0)) return null;
  const mu = (u0 + u1) / 2;
  const mv = (v0 + v1) / 2;
  return {
    rect: {
      cxPx: patch.cx + mu * c - mv * s,
      cyPx: patch.cy + mu * s + mv * c,
      lengthPx: u1 - u0,
      heightPx: v1 - v0,
      angleDeg,
    },
    spacingPx,
    patch,
  };
}

/** Range of t in which the amplitude summed in slots stays above a share of its largest slot, gaps of one slot allowed. */
function liveRange(
  t: number[],
  amplitude: number[],
  slot: number,
  share: number,
): { from: number; to: number } {
  const low = Math.min(...t);
  const n = Math.floor((Math.max(...t) - low) / slot) + 1;
  const sums = new Float64Array(n);
  for (let i = 0; i < t.length; i++) sums[Math.floor((t[i] - low) / slot)] += amplitude[i];
  let top = 0;
  for (let i = 0; i < n; i++) if (sums[i] > sums[top]) top = i;
  const live = (i: number) => i >= 0 && i < n && sums[i] > share * sums[top];
  let a = top;
  let b = top;
  while (live(a - 1) || live(a - 2)) a--;
  while (live(b + 1) || live(b + 2)) b++;
  return { from: low + a * slot, to: low + (b + 1) * slot };
}

/** Extent of the whole frame in coordinates along and across, about a point. */
function frameExtent(
  picture: Picture,
  cx: number,
  cy: number,
  c: number,
  s: number,
): { u0: number; u1: number; v0: number; v1: number } {
  const corners = [
    [0, 0],
    [picture.widthPx, 0],
    [0, picture.heightPx],
    [picture.widthPx, picture.heightPx],
  ].map(([x, y]) => ({ u: (x - cx) * c + (y - cy) * s, v: -(x - cx) * s + (y - cy) * c }));
  return {
    u0: Math.min(...corners.map((k) => k.u)),
    u1: Math.max(...corners.map((k) => k.u)),
    v0: Math.min(...corners.map((k) => k.v)),
    v1: Math.max(...corners.map((k) => k.v)),
  };
}
