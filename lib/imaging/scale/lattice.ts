import type { Plane } from '../picture';

/** One crossing or corner of a photographed grid. */
export interface LatticePoint {
  /** Whole-number place in the grid. */
  i: number;
  j: number;
  /** Position in px of the frame. */
  xPx: number;
  yPx: number;
}

/**
 * Finds the corners of a chessboard (saddles of the light) or the crossings of a line grid (points dark, or
 * bright, in both directions) to a fraction of a pixel and gives each its place in the lattice, growing outwards
 * from the middle so that a slanted view does no harm. `a` and `b` are the lattice's two steps in px of the frame.
 */
export function findLattice(
  plane: Plane,
  kind: 'grid' | 'chessboard',
  a: { x: number; y: number },
  b: { x: number; y: number },
): LatticePoint[] {
  const f = plane.factor;
  const step = Math.min(Math.hypot(a.x, a.y), Math.hypot(b.x, b.y)) / f;
  const sigma = Math.min(8, Math.max(1.5, step / 9));
  const response = cornerResponse(smooth(plane, sigma), plane.widthPx, plane.heightPx, kind);
  const peaks = strongPeaks(
    response,
    plane.widthPx,
    plane.heightPx,
    Math.max(3, 0.33 * step),
    Math.ceil(3 * sigma),
  );
  const points = grow(
    peaks,
    { x: a.x / f, y: a.y / f },
    { x: b.x / f, y: b.y / f },
    plane.widthPx / 2,
    plane.heightPx / 2,
  );
  return points.map((p) => ({ i: p.i, j: p.j, xPx: (p.x + 0.5) * f, yPx: (p.y + 0.5) * f }));
}

/** Gaussian of the given width, rows then columns, edges repeated. */
function smooth(plane: Plane, sigma: number): Float32Array {
  const reach = Math.ceil(3.5 * sigma);
  const kernel = Float64Array.from({ length: 2 * reach + 1 }, (_, k) =>
    Math.exp(-0.5 * ((k - reach) / sigma) ** 2),
  );
  const total = kernel.reduce((s, v) => s + v, 0);
  const pass = (
    from: Float32Array,
    count: number,
    lines: number,
    stride: number,
    jump: number,
  ): Float32Array => {
    const out = new Float32Array(from.length);
    for (let line = 0; line < lines; line += 1) {
      const base = line * jump;
      for (let k = 0; k < count; k += 1) {
        let sum = 0;
        for (let t = -reach; t <= reach; t += 1)
          sum += kernel[t + reach] * from[base + Math.min(count - 1, Math.max(0, k + t)) * stride];
        out[base + k * stride] = sum / total;
      }
    }
    return out;
  };
  const { widthPx: w, heightPx: h } = plane;
  return pass(pass(plane.data, w, h, 1, w), h, w, w, 1);
}

/** Minus the Hessian's determinant for saddles; for crossings its determinant where the light curves the same way in both directions. */
function cornerResponse(s: Float32Array, w: number, h: number, kind: 'grid' | 'chessboard'): Float32Array {
  const out = new Float32Array(w * h);
  for (let y = 1; y < h - 1; y += 1) {
    for (let x = 1; x < w - 1; x += 1) {
      const i = y * w + x;
      const xx = s[i - 1] - 2 * s[i] + s[i + 1];
      const yy = s[i - w] - 2 * s[i] + s[i + w];
      const xy = (s[i - w - 1] + s[i + w + 1] - s[i - w + 1] - s[i + w - 1]) / 4;
      const determinant = xx * yy - xy * xy;
      if (kind === 'chessboard') out[i] = Math.max(0, -determinant);
      else if (determinant > 0) out[i] = Math.sign(xx + yy) * determinant;
    }
  }
  if (kind === 'grid') {
    // Lines are dark on light, or light on dark. Where two lines cross the light curves most; the corners of the
    // fields between them curve the other way, but less.
    const sorted = Float32Array.from(out).sort();
    const rank = Math.min(sorted.length - 1, 60);
    const sign = sorted[sorted.length - 1 - rank] >= -sorted[rank] ? 1 : -1;
    for (let i = 0; i < out.length; i += 1) out[i] = Math.max(0, sign * out[i]);
  }
  return out;
}

interface Peak {
  x: number;
  y: number;
  height: number;
}

/** Local maxima, the strongest first, none within `apart` of a stronger one; placed by a parabola in x and y. */
function strongPeaks(response: Float32Array, w: number, h: number, apart: number, margin: number): Peak[] {
  const found: Peak[] = [];
  for (let y = margin; y < h - margin; y += 1) {
    for (let x = margin; x < w - margin; x += 1) {
      const i = y * w + x;
      const v = response[i];
      if (
        v <= 0 ||
        v < response[i - 1] ||
        v <= response[i + 1] ||
        v < response[i - w] ||
        v <= response[i + w]
      )
        continue;
      if (
        v < response[i - w - 1] ||
        v < response[i - w + 1] ||
        v <= response[i + w - 1] ||
        v <= response[i + w + 1]
      )
        continue;
      const dx = parabola(response[i - 1], v, response[i + 1]);
      const dy = parabola(response[i - w], v, response[i + w]);
      found.push({ x: x + dx, y: y + dy, height: v });
    }
  }
  found.sort((p, q) => q.height - p.height);
  const level = (found[Math.min(found.length - 1, 20)]?.height ?? 0) * 0.12;
  const kept: Peak[] = [];
  for (const peak of found) {
    if (peak.height < level) break;
    if (kept.every((k) => Math.hypot(k.x - peak.x, k.y - peak.y) > apart)) kept.push(peak);
    if (kept.length > 6000) break;
  }
  return kept;
}

function parabola(before: number, at: number, after: number): number {
  const bend = before - 2 * at + after;
  return bend < 0 ? Math.max(-0.5, Math.min(0.5, (0.5 * (before - after)) / bend)) : 0;
}

/** Walks from the strongest point near the middle to its neighbours, adapting the two steps to where it is. */
function grow(
  peaks: Peak[],
  a: { x: number; y: number },
  b: { x: number; y: number },
  mx: number,
  my: number,
): (Peak & { i: number; j: number })[] {
  if (peaks.length === 0) return [];
  const half = peaks[Math.floor(peaks.length / 2)].height;
  const start = peaks
    .filter((p) => p.height >= half)
    .reduce((best, p) => (Math.hypot(p.x - mx, p.y - my) < Math.hypot(best.x - mx, best.y - my) ? p : best));
  const cell = Math.max(8, Math.hypot(a.x, a.y));
  const buckets = new Map<string, Peak[]>();
  const keyOf = (x: number, y: number): string => `${Math.floor(x / cell)}:${Math.floor(y / cell)}`;
  for (const p of peaks) buckets.set(keyOf(p.x, p.y), [...(buckets.get(keyOf(p.x, p.y)) ?? []), p]);
  const nearest = (x: number, y: number, within: number): Peak | null => {
    let best: Peak | null = null;
    let least = within;
    for (let dy = -1; dy <= 1; dy += 1) {
      for (let dx = -1; dx <= 1; dx += 1) {
        for (const p of buckets.get(keyOf(x + dx * cell, y + dy * cell)) ?? []) {
          const d = Math.hypot(p.x - x, p.y - y);
          if (d < least) {
            least = d;
            best = p;
          }
        }
      }
    }
    return best;
  };
  interface Node {
    peak: Peak;
    i: number;
    j: number;
    a: { x: number; y: number };
    b: { x: number; y: number };
  }
  const placed = new Map<string, Node>();
  const taken = new Set<Peak>([start]);
  const queue: Node[] = [{ peak: start, i: 0, j: 0, a, b }];
  placed.set('0:0', queue[0]);
  for (let head = 0; head < queue.length; head += 1) {
    const from = queue[head];
    for (const [di, dj] of [
      [1, 0],
      [-1, 0],
      [0, 1],
      [0, -1],
    ]) {
      const key = `${from.i + di}:${from.j + dj}`;
      if (placed.has(key)) continue;
      const vx = di * from.a.x + dj * from.b.x;
      const vy = di * from.a.y + dj * from.b.y;
      const peak = nearest(from.peak.x + vx, from.peak.y + vy, 0.22 * Math.hypot(vx, vy));
      if (!peak || taken.has(peak)) continue;
      const seen = { x: peak.x - from.peak.x, y: peak.y - from.peak.y };
      const sign = di + dj;
      const blend = (old: { x: number; y: number }, use: boolean) =>
        use ? { x: 0.5 * (old.x + sign * seen.x), y: 0.5 * (old.y + sign * seen.y) } : old;
      const node: Node = {
        peak,
        i: from.i + di,
        j: from.j + dj,
        a: blend(from.a, di !== 0),
        b: blend(from.b, dj !== 0),
      };
      placed.set(key, node);
      taken.add(peak);
      queue.push(node);
    }
  }
  return queue.map(({ peak, i, j }) => ({ ...peak, i, j }));
}
