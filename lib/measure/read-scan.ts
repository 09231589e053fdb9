import type { ScanDrawing, ScanFacts, ScanRegion } from '@/lib/domain/scan-result';
import { Refused } from '@/lib/imaging/refused';

/** Positions in mm, growing, and the intensity there; repeats of a position are averaged. */
export interface Scan {
  positionMm: Float64Array;
  intensity: Float64Array;
  repeats: Float64Array;
}

export const FEWEST_POINTS = 24;
const MOST_POINTS = 50_000;
const MOST_BYTES = 20 * 1024 * 1024;
const MOST_HEADINGS = 30;
const MOST_DRAWN = 1200;

const NUMBER = /^[-+]?(\d+\.?\d*|\.\d+)([eE][-+]?\d+)?$/;

/** How the two columns of a file are parted; only a comma that parts nothing may be a decimal comma. */
type Parting = ';' | ',' | ' ';

/** The two numbers of a line, or null. */
function twoNumbers(line: string, parting: Parting): [number, number] | null {
  const cells = line
    .split(parting === ' ' ? /[ \t]+/ : parting)
    .map((cell) => cell.trim().replace(/^"(.*)"$/, '$1'));
  // A separator at the end of every line is common; a further column is not taken for one of the two.
  if (cells.length === 3 && cells[2] === '') cells.pop();
  if (cells.length !== 2) return null;
  const plain = parting === ',' ? cells : cells.map((cell) => cell.replace(',', '.'));
  return plain.every((cell) => NUMBER.test(cell)) ? [Number(plain[0]), Number(plain[1])] : null;
}

function partingOf(line: string): Parting | null {
  return ([';', ',', ' '] as const).find((parting) => twoNumbers(line, parting) !== null) ?? null;
}

const isData = (line: string) => line !== '' && !line.startsWith('#');

/** Does a text begin like a scan: two numbers on one of its first lines? The last line may be cut off. */
export function looksLikeScan(text: string): boolean {
  return text
    .split(/\r\n|\r|\n/)
    .map((line) => line.trim())
    .filter(isData)
    .slice(0, MOST_HEADINGS + 1)
    .some((line) => partingOf(line) !== null);
}

/**
 * Bytes as text: UTF-8 and its relatives, or UTF-16 by its mark. Letters outside ASCII may come out wrong; they stand in
 * headings only. Null for bytes that are no text.
 */
export function textOf(bytes: Uint8Array): string | null {
  if (bytes.length > MOST_BYTES) throw tooLarge();
  const [a, b, c] = bytes;
  const wide = a === 0xff && b === 0xfe ? 0 : a === 0xfe && b === 0xff ? 1 : null;
  const start = wide !== null ? 2 : a === 0xef && b === 0xbb && c === 0xbf ? 3 : 0;
  const step = wide === null ? 1 : 2;
  const parts: string[] = [];
  const codes: number[] = [];
  for (let i = start; i + step <= bytes.length; i += step) {
    const code =
      wide === null ? bytes[i] : wide === 0 ? bytes[i] | (bytes[i + 1] << 8) : (bytes[i] << 8) | bytes[i + 1];
    if (code < 32 && code !== 9 && code !== 10 && code !== 12 && code !== 13) return null;
    codes.push(code);
    if (codes.length === 8192) parts.push(String.fromCharCode(...codes.splice(0)));
  }
  return parts.join('') + String.fromCharCode(...codes);
}

/**
 * Reads two columns, position in mm and intensity, parted by comma, semicolon, tab or blanks; lines without two numbers
 * at the top are a heading, lines that begin with # are notes. Throws the refusal of a text that is no scan.
 */
export function readScan(text: string): Scan {
  const points: [number, number][] = [];
  let parting: Parting | null = null;
  let headings = 0;
  text.split(/\r\n|\r|\n/).forEach((raw, index) => {
    const line = raw.trim();
    if (!isData(line)) return;
    parting ??= partingOf(line);
    const pair = parting === null ? null : twoNumbers(line, parting);
    if (pair) points.push(pair);
    else if (points.length > 0 || ++headings > MOST_HEADINGS) throw noPair(index + 1, line);
  });
  if (points.length === 0)
    throw new Refused(
      'BROKEN_FILE',
      'No line of this file holds two numbers. A scan has two columns, position in mm and intensity: save it so and send it again.',
    );
  const scan = merged(points);
  if (scan.positionMm.length < FEWEST_POINTS)
    throw new Refused(
      'TOO_SMALL',
      `The scan has ${scan.positionMm.length} positions; at least ${FEWEST_POINTS} are needed. Scan with finer steps or further.`,
    );
  if (scan.positionMm.length > MOST_POINTS) throw tooLarge();
  return scan;
}

function noPair(number: number, line: string): Refused {
  const columns = line.split(/[;,\t ]+/).filter(Boolean);
  const said =
    columns.length > 2 && columns.every((cell) => NUMBER.test(cell))
      ? `Line ${number} holds ${columns.length} columns instead of two. Keep the position in mm and the intensity`
      : `Line ${number} does not hold two numbers (position in mm, intensity). Correct it`;
  return new Refused('BROKEN_FILE', `${said} and send the scan again.`);
}

function tooLarge(): Refused {
  return new Refused(
    'TOO_LARGE',
    `The scan is larger than ${MOST_BYTES / 1024 / 1024} MB or has more than ${MOST_POINTS} positions. Thin it out and send it again.`,
  );
}

function merged(points: [number, number][]): Scan {
  points.sort((a, b) => a[0] - b[0]);
  const x: number[] = [];
  const sum: number[] = [];
  const n: number[] = [];
  for (const [position, value] of points) {
    const last = x.length - 1;
    if (last >= 0 && x[last] === position) {
      sum[last] += value;
      n[last]++;
    } else {
      x.push(position);
      sum.push(value);
      n.push(1);
    }
  }
  return {
    positionMm: Float64Array.from(x),
    intensity: Float64Array.from(sum, (s, i) => s / n[i]),
    repeats: Float64Array.from(n),
  };
}

/** The part of a scan inside a region. */
export function scanWithin(scan: Scan, region: ScanRegion): Scan {
  const inside = (_: number, i: number) =>
    scan.positionMm[i] >= region.fromMm && scan.positionMm[i] <= region.toMm;
  const part: Scan = {
    positionMm: scan.positionMm.filter(inside),
    intensity: scan.intensity.filter(inside),
    repeats: scan.repeats.filter(inside),
  };
  if (part.positionMm.length < FEWEST_POINTS)
    throw new Refused(
      'TOO_SMALL',
      `The region holds ${part.positionMm.length} positions of the scan; at least ${FEWEST_POINTS} are needed. Widen it.`,
    );
  return part;
}

export function scanFacts(scan: Scan): ScanFacts {
  const { positionMm } = scan;
  const n = positionMm.length;
  const steps = positionMm
    .subarray(1)
    .map((x, i) => x - positionMm[i])
    .sort();
  return { points: n, fromMm: positionMm[0], toMm: positionMm[n - 1], stepMm: steps[steps.length >> 1] };
}

/** The whole scan for a drawing, or null where the file gives none. */
export function drawScan(bytes: Uint8Array): ScanDrawing | null {
  try {
    const text = textOf(bytes);
    return text === null ? null : drawingOf(readScan(text));
  } catch (problem) {
    if (problem instanceof Refused) return null;
    throw problem;
  }
}

/** Of each group of neighbours the lowest and the highest, so that no fringe is lost. */
function drawingOf(scan: Scan): ScanDrawing {
  const { positionMm, intensity } = scan;
  const n = positionMm.length;
  const group = Math.max(1, Math.ceil((2 * n) / MOST_DRAWN));
  const kept: number[] = [];
  if (group <= 2) for (let i = 0; i < n; i++) kept.push(i);
  else
    for (let from = 0; from < n; from += group) {
      let low = from;
      let high = from;
      for (let i = from; i < Math.min(n, from + group); i++) {
        if (intensity[i] < intensity[low]) low = i;
        if (intensity[i] > intensity[high]) high = i;
      }
      kept.push(...(low === high ? [low] : [Math.min(low, high), Math.max(low, high)]));
    }
  return {
    fromMm: positionMm[0],
    toMm: positionMm[n - 1],
    xMm: kept.map((i) => positionMm[i]),
    light: kept.map((i) => intensity[i]),
  };
}
