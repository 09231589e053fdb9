import type { Plane } from '../picture';

/** One tick of a photographed scale: where its middle crosses strip after strip, in px of the frame. */
export interface Tick {
  /** Count along the scale from the first tick found. */
  index: number;
  /** One point a strip: coordinate along the scale's normal direction (u) and across it (v), about the plane's middle. */
  points: { u: number; v: number }[];
}

export interface TickSeries {
  ticks: Tick[];
  /** Angle of the direction along the scale, degrees, positive clockwise on screen. */
  angleDeg: number;
  pitchPx: number;
  dark: boolean;
}

const STRIPS = 24;
/** Share of the best strip's regularity a strip must have to be used. */
const STRIP_SHARE = 0.6;
/** Share of the strongest lines' contrast a peak needs to be a line. */
const LINE_SHARE = 0.3;

/**
 * Finds the ticks of a ruler or line scale that runs at about `angleDeg`. The picture is cut into strips along the
 * scale; in each the finest regular series of lines is followed, so that long fifth and tenth ticks do not pass
 * for the pitch where the short ones are in the strip. Null where no strip holds at least six evenly spaced lines.
 */
export function findTicks(plane: Plane, angleDeg: number): TickSeries | null {
  const strips = sampleStrips(plane, angleDeg);
  // Strips beside the scale hold only noise; what counts as a line is decided by the strongest ones of the picture.
  const floor = LINE_SHARE * strongest(strips.flatMap((strip) => contrasts(strip.profile)));
  const seen = [true, false].map((dark) => {
    const found = strips.map((strip) => ({ strip, series: followLines(strip.profile, floor, dark) }));
    const usable = found.filter((f) => f.series !== null);
    return { dark, usable, strength: usable.reduce((sum, f) => sum + f.series!.strength, 0) };
  });
  // One and the same polarity in every strip: the gaps between dark lines are as regular as the lines. Dark is
  // taken unless light lines are clearly stronger.
  const { usable, dark } = seen[1].strength > 1.1 * seen[0].strength ? seen[1] : seen[0];
  if (usable.length === 0) return null;
  // The finest pitch that several strips agree on is the scale's own.
  const pitches = usable.map((f) => f.series!.pitch).sort((a, b) => a - b);
  const pitch = pitches.find(
    (p) => pitches.filter((q) => Math.abs(q / p - 1) < 0.04).length >= Math.min(2, pitches.length),
  );
  if (pitch === undefined) return null;
  const agreeing = usable.filter((f) => Math.abs(f.series!.pitch / pitch - 1) < 0.04);
  const most = Math.max(...agreeing.map((f) => f.series!.positions.length));
  const chosen = agreeing.filter((f) => f.series!.positions.length >= STRIP_SHARE * most);
  return join(
    chosen.map((f) => ({ v: f.strip.v, positions: f.series!.positions })),
    pitch,
    angleDeg,
    plane.factor,
    dark,
  );
}

interface Strip {
  /** Middle of the strip across the scale, in the plane's px about its middle. */
  v: number;
  /** Mean light along u, one sample a px, NaN outside the picture; sample i stands at u = i - length/2 + 0.5. */
  profile: Float64Array;
}

function sampleStrips(plane: Plane, angleDeg: number): Strip[] {
  const angle = (angleDeg * Math.PI) / 180;
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  const { widthPx: w, heightPx: h, data } = plane;
  const reachU = Math.ceil((Math.abs(w * cos) + Math.abs(h * sin)) / 2);
  const reachV = Math.floor((Math.abs(w * sin) + Math.abs(h * cos)) / 2);
  const rows = Math.max(2, Math.floor((2 * reachV) / STRIPS));
  const strips: Strip[] = [];
  for (let first = -reachV; first + rows <= reachV; first += rows) {
    const profile = new Float64Array(2 * reachU).fill(Number.NaN);
    for (let i = 0; i < profile.length; i += 1) {
      const u = i - reachU + 0.5;
      let sum = 0;
      let count = 0;
      for (let k = 0; k < rows; k += 1) {
        const v = first + k + 0.5;
        const x = w / 2 + u * cos - v * sin - 0.5;
        const y = h / 2 + u * sin + v * cos - 0.5;
        const c = Math.floor(x);
        const r = Math.floor(y);
        if (c < 0 || r < 0 || c + 1 >= w || r + 1 >= h) continue;
        const fx = x - c;
        const fy = y - r;
        const at = r * w + c;
        sum +=
          (1 - fy) * ((1 - fx) * data[at] + fx * data[at + 1]) +
          fy * ((1 - fx) * data[at + w] + fx * data[at + w + 1]);
        count += 1;
      }
      if (count >= 0.9 * rows) profile[i] = sum / count;
    }
    strips.push({ v: first + rows / 2, profile });
  }
  return strips;
}

interface Lines {
  positions: number[];
  pitch: number;
  /** Sum of the lines' contrasts. */
  strength: number;
}

/** The part of a profile inside the picture and where it begins; null when it is too short. */
function inPicture(profile: Float64Array): { values: Float64Array; from: number } | null {
  const from = profile.findIndex((v) => !Number.isNaN(v));
  const to = profile.findLastIndex((v) => !Number.isNaN(v)) + 1;
  return from < 0 || to - from < 40 ? null : { values: profile.slice(from, to), from };
}

/** Heights of the ten strongest peaks, dark or bright. */
function contrasts(profile: Float64Array): number[] {
  const inside = inPicture(profile);
  if (!inside) return [];
  const heights = [true, false].flatMap((dark) => peaksOf(signed(inside.values, dark)).map((p) => p.height));
  return heights.sort((a, b) => b - a).slice(0, 10);
}

/** A value only the strongest few exceed, so that one scratch does not set it. */
function strongest(heights: number[]): number {
  const sorted = heights.sort((a, b) => b - a);
  return sorted[Math.min(sorted.length - 1, 12)] ?? 0;
}

function signed(values: Float64Array, dark: boolean): Float64Array {
  return values.map((v) => (dark ? -v : v));
}

/** The longest chain of at least six evenly spaced lines in one profile; positions in u. Null when there is none. */
function followLines(profile: Float64Array, floor: number, dark: boolean): Lines | null {
  const inside = inPicture(profile);
  if (!inside) return null;
  const signal = signed(inside.values, dark);
  const peaks = peaksOf(signal)
    .filter((p) => p.height > floor)
    .map((p) => ({ at: centroid(signal, p.at, p.height), height: p.height }));
  if (peaks.length < 6) return null;
  const gaps = peaks
    .slice(1)
    .map((p, i) => p.at - peaks[i].at)
    .sort((a, b) => a - b);
  const pitch = gaps[Math.floor(gaps.length / 2)];
  let chain: typeof peaks = [];
  let longest: typeof peaks = [];
  for (const peak of peaks) {
    const last = chain.at(-1);
    if (last && Math.abs((peak.at - last.at) / pitch - 1) > 0.18) chain = [];
    chain.push(peak);
    if (chain.length > longest.length) longest = [...chain];
  }
  if (longest.length < 6) return null;
  const shift = inside.from - profile.length / 2 + 0.5;
  return {
    positions: longest.map((p) => p.at + shift),
    pitch: (longest[longest.length - 1].at - longest[0].at) / (longest.length - 1),
    strength: longest.reduce((sum, p) => sum + p.height, 0),
  };
}

/** Local maxima with how far they stand out of the lower of their two sides. */
function peaksOf(signal: Float64Array): { at: number; height: number }[] {
  const n = signal.length;
  const peaks: { at: number; height: number }[] = [];
  for (let i = 2; i < n - 2; i += 1) {
    if (!(signal[i] >= signal[i - 1] && signal[i] > signal[i + 1])) continue;
    let lowLeft = signal[i];
    for (let k = i - 1; k >= 0 && signal[k] <= signal[i]; k -= 1) lowLeft = Math.min(lowLeft, signal[k]);
    let lowRight = signal[i];
    for (let k = i + 1; k < n && signal[k] <= signal[i]; k += 1) lowRight = Math.min(lowRight, signal[k]);
    peaks.push({ at: i, height: signal[i] - Math.max(lowLeft, lowRight) });
  }
  return peaks;
}

/** Centroid of the part above half the peak's height, with the crossing points interpolated. */
function centroid(signal: Float64Array, i: number, height: number): number {
  const level = signal[i] - height / 2;
  let a = i;
  while (a > 0 && signal[a - 1] > level) a -= 1;
  let b = i;
  while (b < signal.length - 1 && signal[b + 1] > level) b += 1;
  let sum = 0;
  let weight = 0;
  for (let k = Math.max(0, a - 1); k <= Math.min(signal.length - 1, b + 1); k += 1) {
    const g = Math.max(0, signal[k] - level);
    sum += g * k;
    weight += g;
  }
  return weight > 0 ? sum / weight : i;
}

/** Gives every line of every strip its count along the scale; strips may begin at different lines. */
function join(
  strips: { v: number; positions: number[] }[],
  pitch: number,
  angleDeg: number,
  factor: number,
  dark: boolean,
): TickSeries | null {
  const middle = strips[Math.floor(strips.length / 2)];
  const origin = middle.positions[0];
  const byIndex = new Map<number, { u: number; v: number }[]>();
  let lean = 0;
  for (const strip of [...strips].sort((a, b) => Math.abs(a.v - middle.v) - Math.abs(b.v - middle.v))) {
    let off = 0;
    const placed = strip.positions.map((u) => {
      const exact = (u - lean * (strip.v - middle.v) - origin) / pitch;
      off += exact - Math.round(exact);
      return { u, index: Math.round(exact) };
    });
    // The mean remainder says how the lines lean from strip to strip; it is followed outwards from the middle.
    const dv = strip.v - middle.v;
    if (Math.abs(dv) > 0) lean += ((off / strip.positions.length) * pitch) / dv;
    for (const { u, index } of placed) {
      const list = byIndex.get(index) ?? [];
      list.push({ u: u * factor, v: strip.v * factor });
      byIndex.set(index, list);
    }
  }
  const ticks = [...byIndex.entries()]
    .sort((a, b) => a[0] - b[0])
    .map(([index, points]) => ({ index, points }));
  return ticks.length < 6 ? null : { ticks, angleDeg, pitchPx: pitch * factor, dark };
}
