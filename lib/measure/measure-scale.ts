/**
 * Pixel scale from a photographed ruler, line grid or chessboard of known pitch: lines or corners to a fraction of
 * a pixel, pitch in px with its uncertainty, the scale in µm per px, and what the picture says about the view
 * (perspective from a grid, uneven pitch along a ruler, lens distortion where the data show it).
 */
import { leastSquares, type LeastSquaresResult } from '@/lib/fit/least-squares';
import type { Picture } from '@/lib/imaging/picture';
import { buildPyramid } from '@/lib/imaging/pyramid';
import { Refused } from '@/lib/imaging/refused';
import { findLattice, type LatticePoint } from '@/lib/imaging/scale/lattice';
import { findTicks } from '@/lib/imaging/scale/ticks';
import { findWaves, type WaveCandidate } from '@/lib/imaging/spectrum';
import type { ScaleAnswer, ScaleKind } from '@/lib/domain/scale-result';

/** A misfit this many times the scatter is a scratch or a reflection, not a line. */
const OUTLIER = 4;
/** A further term (uneven pitch, distortion) is kept when it exceeds this many of its standard uncertainties. */
const SIGNIFICANT = 4;
/** Chance peaks that were taken for lines scatter by about a tenth of their pitch; those of a scale do not. */
const LARGEST_SCATTER = 0.04;

/**
 * @param pitchMm pitch of the photographed scale, mm  @param uPitchRelative relative standard uncertainty of that pitch
 * Throws Refused (NO_FRINGES) with a sentence when the asked kind of scale is not in the picture.
 */
export function measureScale(
  picture: Picture,
  kind: ScaleKind,
  pitchMm: number,
  uPitchRelative: number,
): ScaleAnswer {
  const planes = buildPyramid(picture);
  const waves = findWaves(planes, 12);
  const answer =
    kind === 'lines' ? fromTicks(planes[0], waves) : fromLattice(picture, planes[0], kind, waves);
  const scaleUmPerPx = (pitchMm * 1000) / answer.pitchPx;
  const uRelative = Math.hypot(answer.uPitchPx / answer.pitchPx, uPitchRelative);
  return {
    ok: true,
    kind,
    pitchMm,
    scaleUmPerPx,
    uScaleUmPerPx: scaleUmPerPx * uRelative,
    widthPx: picture.widthPx,
    heightPx: picture.heightPx,
    ...answer,
  };
}

type Geometry = Omit<
  ScaleAnswer,
  'ok' | 'kind' | 'pitchMm' | 'scaleUmPerPx' | 'uScaleUmPerPx' | 'widthPx' | 'heightPx'
>;

function notFound(what: string): Refused {
  return new Refused(
    'NO_FRINGES',
    `No ${what} was found in this picture. Let it fill the picture, in focus and evenly lit, and photograph it again.`,
  );
}

// ---- a ruler or line scale ----

function fromTicks(plane: Parameters<typeof findTicks>[0], waves: readonly WaveCandidate[]): Geometry {
  const tried: number[] = [];
  let best: ReturnType<typeof findTicks> = null;
  for (const wave of waves) {
    const angle = (Math.atan2(wave.ky, wave.kx) * 180) / Math.PI;
    if (tried.some((t) => Math.abs(((angle - t + 90) % 180) - 90) < 1)) continue;
    tried.push(angle);
    const series = findTicks(plane, angle);
    if (series && (!best || series.ticks.length > best.ticks.length)) best = series;
    if (tried.length >= 6) break;
  }
  if (!best) throw notFound('scale with evenly spaced lines');
  // Strips along a wrong direction smear the ticks: once more along the direction they show.
  const size = [plane.widthPx * plane.factor, plane.heightPx * plane.factor] as const;
  for (let round = 0; round < 3; round += 1) {
    const again = findTicks(plane, fitTicks(best, ...size).angleDeg);
    if (!again || again.ticks.length < 0.8 * best.ticks.length) break;
    best = again;
  }
  return fitTicks(best, ...size);
}

function fitTicks(
  series: NonNullable<ReturnType<typeof findTicks>>,
  widthPx: number,
  heightPx: number,
): Geometry {
  const middle = (series.ticks[0].index + series.ticks[series.ticks.length - 1].index) / 2;
  let ticks = series.ticks;
  let fit = solveTicks(ticks, middle, true);
  for (let round = 0; round < 3; round += 1) {
    const kept = ticks.filter((_, i) => Math.abs(fit.misfits[i]) <= OUTLIER * fit.scatter);
    if (kept.length === ticks.length || kept.length < 6) break;
    ticks = kept;
    fit = solveTicks(ticks, middle, true);
  }
  if (fit.scatter > LARGEST_SCATTER * fit.parameters[1]) throw notFound('scale with evenly spaced lines');
  const uneven = ticks.length >= 8 && Math.abs(fit.parameters[3]) > SIGNIFICANT * fit.u[3];
  if (!uneven) fit = solveTicks(ticks, middle, false);
  const lean = Math.atan(fit.parameters[2]);
  const pitchPx = fit.parameters[1] * Math.cos(lean);
  const angle = (series.angleDeg * Math.PI) / 180;
  const points = ticks.map((tick, n) => {
    const u = tick.points.reduce((s, p) => s + p.u, 0) / tick.points.length;
    const v = tick.points.reduce((s, p) => s + p.v, 0) / tick.points.length;
    return {
      xPx: widthPx / 2 + u * Math.cos(angle) - v * Math.sin(angle),
      yPx: heightPx / 2 + u * Math.sin(angle) + v * Math.cos(angle),
      misfitPx: fit.misfits[n],
    };
  });
  const span = series.ticks[series.ticks.length - 1].index - series.ticks[0].index;
  return {
    pitchPx,
    uPitchPx: fit.u[1],
    dof: ticks.length - (uneven ? 4 : 3),
    angleDeg: normalAngle(series.angleDeg - (lean * 180) / Math.PI, 180),
    points,
    largestMisfitPx: Math.max(...fit.misfits.map(Math.abs)),
    changeAcross: uneven ? (2 * fit.parameters[3] * span) / fit.parameters[1] : null,
    viewAngleDeg: null,
    distortion: null,
  };
}

/** u = a + b·n + lean·v + c·n² by least squares over every point; misfits are per tick. */
function solveTicks(
  ticks: NonNullable<ReturnType<typeof findTicks>>['ticks'],
  middle: number,
  curved: boolean,
) {
  const rows = ticks.flatMap((tick) => tick.points.map((p) => ({ n: tick.index - middle, ...p })));
  const terms = curved ? 4 : 3;
  const result = leastSquares(
    {
      residuals: rows.length,
      evaluate(p, r, jacobian) {
        rows.forEach((row, i) => {
          const basis = [1, row.n, row.v, row.n * row.n];
          let model = 0;
          for (let k = 0; k < terms; k += 1) model += p[k] * basis[k];
          r[i] = row.u - model;
          if (jacobian) for (let k = 0; k < terms; k += 1) jacobian[k * rows.length + i] = basis[k];
        });
        return true;
      },
    },
    new Float64Array(terms),
  );
  const p = result.parameters;
  const misfits = ticks.map((tick) => {
    const n = tick.index - middle;
    return (
      tick.points.reduce(
        (s, q) => s + q.u - (p[0] + p[1] * n + p[2] * q.v + (curved ? p[3] * n * n : 0)),
        0,
      ) / tick.points.length
    );
  });
  const dof = Math.max(1, ticks.length - terms);
  const scatter = Math.sqrt(misfits.reduce((s, m) => s + m * m, 0) / dof);
  // A tick's own error is shared by all its strips, so the scatter of ticks is what counts, not that of points.
  const nMean = ticks.reduce((s, t) => s + (t.index - middle), 0) / ticks.length;
  const spread = ticks.reduce((s, t) => s + (t.index - middle - nMean) ** 2, 0);
  const spread4 = ticks.reduce((s, t) => s + ((t.index - middle) ** 2 - spread / ticks.length) ** 2, 0);
  const parameters = [p[0], p[1], p[2], curved ? p[3] : 0];
  return {
    parameters,
    misfits,
    scatter,
    u: [scatter, scatter / Math.sqrt(spread), 0, scatter / Math.sqrt(spread4)],
  };
}

// ---- a grid or a chessboard ----

const LATTICE_WORDS = { grid: 'square line grid', chessboard: 'chessboard' };

function fromLattice(
  picture: Picture,
  plane: Parameters<typeof findLattice>[0],
  kind: 'grid' | 'chessboard',
  waves: readonly WaveCandidate[],
): Geometry {
  let points: LatticePoint[] = [];
  for (const [k1, k2] of crossedPairs(waves)) {
    const found = findLattice(plane, kind, ...stepsOf(kind, k1, k2));
    if (found.length > points.length) points = found;
  }
  if (points.length < 16) throw notFound(LATTICE_WORDS[kind]);
  const map = fitMap(points, picture.widthPx, picture.heightPx);
  const scatter = Math.sqrt(map.points.reduce((sum, p) => sum + p.misfitPx ** 2, 0) / map.points.length);
  if (!(scatter <= LARGEST_SCATTER * map.pitchPx)) throw notFound(LATTICE_WORDS[kind]);
  return map;
}

/** Pairs of waves about square to each other and of about one period, strongest first; at most six. */
function crossedPairs(waves: readonly WaveCandidate[]): [WaveCandidate, WaveCandidate][] {
  const pairs: [WaveCandidate, WaveCandidate][] = [];
  for (let i = 0; i < waves.length; i += 1) {
    for (let j = i + 1; j < waves.length; j += 1) {
      const a = waves[i];
      const b = waves[j];
      const cosine = (a.kx * b.kx + a.ky * b.ky) / (Math.hypot(a.kx, a.ky) * Math.hypot(b.kx, b.ky));
      const ratio = Math.hypot(a.kx, a.ky) / Math.hypot(b.kx, b.ky);
      if (Math.abs(cosine) < 0.5 && ratio > 0.6 && ratio < 1.7) pairs.push([a, b]);
    }
  }
  return pairs.slice(0, 6);
}

/** The lattice's steps from two wave vectors. A chessboard's strongest waves run along its diagonals. */
function stepsOf(
  kind: 'grid' | 'chessboard',
  p: WaveCandidate,
  q: WaveCandidate,
): [{ x: number; y: number }, { x: number; y: number }] {
  const [k1, k2] =
    kind === 'grid'
      ? [p, q]
      : [
          { kx: p.kx + q.kx, ky: p.ky + q.ky },
          { kx: p.kx - q.kx, ky: p.ky - q.ky },
        ];
  const d = k1.kx * k2.ky - k1.ky * k2.kx;
  return [
    { x: k2.ky / d, y: -k2.kx / d },
    { x: -k1.ky / d, y: k1.kx / d },
  ];
}

/** Fits the plane map (eight numbers) and, where it shows, radial distortion about the picture's middle. */
function fitMap(all: LatticePoint[], widthPx: number, heightPx: number): Geometry {
  let points = all;
  let fit = solveMap(points, widthPx, heightPx, false);
  for (let round = 0; round < 4; round += 1) {
    const limit = OUTLIER * Math.max(0.02, fit.scatter);
    const kept = points.filter((_, n) => fit.misfits[n] <= limit);
    if (kept.length === points.length || kept.length < 16) break;
    points = kept;
    fit = solveMap(points, widthPx, heightPx, false);
  }
  const bent = points.length >= 30 ? solveMap(points, widthPx, heightPx, true) : null;
  const distorted =
    bent !== null && bent.uDistortion > 0 && Math.abs(bent.distortion) > SIGNIFICANT * bent.uDistortion;
  if (bent && distorted) fit = bent;
  return {
    pitchPx: fit.pitchPx,
    uPitchPx: fit.uPitchPx,
    dof: 2 * points.length - (distorted ? 9 : 8),
    angleDeg: fit.angleDeg,
    points: points.map((p, n) => ({ xPx: p.xPx, yPx: p.yPx, misfitPx: fit.misfits[n] })),
    largestMisfitPx: Math.max(...fit.misfits),
    changeAcross: fit.changeAcross,
    viewAngleDeg: fit.viewAngleDeg,
    distortion: distorted ? fit.distortion : null,
  };
}

/** (i, j) -> px about the middle, in units of half the picture's width; the last parameter is the distortion. */
function mapPoint(p: ArrayLike<number>, i: number, j: number): [number, number] {
  const z = 1 + p[6] * i + p[7] * j;
  const x = (p[0] + p[1] * i + p[2] * j) / z;
  const y = (p[3] + p[4] * i + p[5] * j) / z;
  const bend = 1 + (p.length > 8 ? p[8] : 0) * (x * x + y * y);
  return [x * bend, y * bend];
}

function solveMap(points: LatticePoint[], widthPx: number, heightPx: number, withDistortion: boolean) {
  const unit = widthPx / 2;
  const data = points.map((p) => ({
    i: p.i,
    j: p.j,
    x: (p.xPx - widthPx / 2) / unit,
    y: (p.yPx - heightPx / 2) / unit,
  }));
  const count = withDistortion ? 9 : 8;
  const start = affineStart(data, count);
  const m = 2 * points.length;
  const result = leastSquares(
    {
      residuals: m,
      evaluate(p, r, jacobian) {
        data.forEach((d, n) => {
          const [x, y] = mapPoint(p, d.i, d.j);
          r[2 * n] = d.x - x;
          r[2 * n + 1] = d.y - y;
        });
        if (jacobian) fillJacobian(p, data, jacobian, m);
        return true;
      },
    },
    start,
  );
  const scatter = Math.sqrt(result.chiSquare / Math.max(1, result.dof)) * unit;
  const misfits = data.map((d) => {
    const [x, y] = mapPoint(result.parameters, d.i, d.j);
    return Math.hypot(d.x - x, d.y - y) * unit;
  });
  return { ...describeView(result, unit), misfits, scatter, ...distortionOf(result, withDistortion) };
}

function affineStart(data: { i: number; j: number; x: number; y: number }[], count: number): Float64Array {
  const origin = data.find((d) => d.i === 0 && d.j === 0) ?? data[0];
  const along = data.find((d) => d.i === origin.i + 1 && d.j === origin.j) ?? data[1];
  const across = data.find((d) => d.i === origin.i && d.j === origin.j + 1) ?? data[data.length - 1];
  const start = new Float64Array(count);
  start.set([
    origin.x,
    along.x - origin.x,
    across.x - origin.x,
    origin.y,
    along.y - origin.y,
    across.y - origin.y,
  ]);
  return start;
}

function fillJacobian(
  p: Float64Array,
  data: { i: number; j: number }[],
  jacobian: Float64Array,
  m: number,
): void {
  const moved = Float64Array.from(p);
  for (let k = 0; k < p.length; k += 1) {
    const h = 1e-6 * Math.max(1e-3, Math.abs(p[k]));
    for (let n = 0; n < data.length; n += 1) {
      moved[k] = p[k] + h;
      const [x1, y1] = mapPoint(moved, data[n].i, data[n].j);
      moved[k] = p[k] - h;
      const [x0, y0] = mapPoint(moved, data[n].i, data[n].j);
      jacobian[k * m + 2 * n] = (x1 - x0) / (2 * h);
      jacobian[k * m + 2 * n + 1] = (y1 - y0) / (2 * h);
    }
    moved[k] = p[k];
  }
}

function distortionOf(
  result: LeastSquaresResult,
  withDistortion: boolean,
): { distortion: number; uDistortion: number } {
  if (!withDistortion || !result.covariance) return { distortion: 0, uDistortion: 0 };
  const n = result.parameters.length;
  const variance = result.covariance[8 * n + 8] * (result.chiSquare / Math.max(1, result.dof));
  return { distortion: result.parameters[8], uDistortion: Math.sqrt(variance) };
}

/** Pitch along the picture's x at its middle, the grid's turn, the change of pitch across the picture, and the angle of view. */
function describeView(result: LeastSquaresResult, unit: number) {
  const at = (p: ArrayLike<number>, x: number) => localSteps(p, x, 0);
  const pitchAt = (p: ArrayLike<number>, x: number): number => {
    const { ax, ay, bx, by } = at(p, x);
    // px per lattice step along x: the inverse of the lattice steps per px in that direction.
    const d = ax * by - ay * bx;
    return (unit * Math.abs(d)) / Math.hypot(by, ay);
  };
  const p = result.parameters;
  const pitchPx = pitchAt(p, 0);
  let variance = 0;
  if (result.covariance) {
    const n = p.length;
    const gradient = Float64Array.from({ length: n }, (_, k) => {
      const h = 1e-5 * Math.max(1e-3, Math.abs(p[k]));
      const up = Float64Array.from(p);
      const down = Float64Array.from(p);
      up[k] += h;
      down[k] -= h;
      return (pitchAt(up, 0) - pitchAt(down, 0)) / (2 * h);
    });
    for (let a = 0; a < n; a += 1)
      for (let b = 0; b < n; b += 1) variance += gradient[a] * result.covariance[a * n + b] * gradient[b];
    variance *= result.chiSquare / Math.max(1, result.dof);
  }
  const { ax, ay, bx, by } = at(p, 0);
  const trace = ax * ax + ay * ay + bx * bx + by * by;
  const det = Math.abs(ax * by - ay * bx);
  const root = Math.sqrt(Math.max(0, trace * trace - 4 * det * det));
  const ratio = Math.sqrt((trace - root) / (trace + root));
  return {
    pitchPx,
    uPitchPx: Math.sqrt(variance),
    angleDeg: normalAngle((Math.atan2(ay, ax) * 180) / Math.PI, 90),
    changeAcross: pitchAt(p, 1) / pitchAt(p, -1) - 1,
    viewAngleDeg: (Math.acos(Math.min(1, ratio)) * 180) / Math.PI,
  };
}

/** Local lattice steps where the map reaches (x, y): found by Newton's method in (i, j). */
function localSteps(
  p: ArrayLike<number>,
  x: number,
  y: number,
): { ax: number; ay: number; bx: number; by: number } {
  let i = 0;
  let j = 0;
  const h = 1e-4;
  const steps = (): { ax: number; ay: number; bx: number; by: number } => {
    const [x1, y1] = mapPoint(p, i + h, j);
    const [x0, y0] = mapPoint(p, i - h, j);
    const [x3, y3] = mapPoint(p, i, j + h);
    const [x2, y2] = mapPoint(p, i, j - h);
    return {
      ax: (x1 - x0) / (2 * h),
      ay: (y1 - y0) / (2 * h),
      bx: (x3 - x2) / (2 * h),
      by: (y3 - y2) / (2 * h),
    };
  };
  for (let round = 0; round < 12; round += 1) {
    const [px, py] = mapPoint(p, i, j);
    const s = steps();
    const d = s.ax * s.by - s.ay * s.bx;
    i += ((x - px) * s.by - (y - py) * s.bx) / d;
    j += ((y - py) * s.ax - (x - px) * s.ay) / d;
  }
  return steps();
}

/** Into (−period/2, period/2]: a ruler looks the same after half a turn, a grid after a quarter. */
function normalAngle(deg: number, period: 90 | 180): number {
  const a = ((deg % period) + period) % period;
  return a > period / 2 ? a - period : a;
}
