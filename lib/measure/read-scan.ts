import { Refused } from '@/lib/imaging/refused';

/** Positions in mm, growing, and the intensity there; repeats of a position are averaged. */
export interface Scan {
  positionMm: Float64Array;
  intensity: Float64Array;
  repeats: Float64Array;
}

const FEWEST_POINTS = 24;
const MOST_POINTS = 200_000;

/** Reads two columns parted by comma, semicolon or white space; lines without two numbers at the top are a heading. */
export function readScan(text: string): Scan {
  const points: [number, number][] = [];
  let headings = 0;
  text.split(/\r?\n/).forEach((line, index) => {
    const trimmed = line.trim();
    if (trimmed === '' || trimmed.startsWith('#')) return;
    const cells = trimmed
      .split(/[;,\t ]+/)
      .slice(0, 2)
      .map(Number);
    if (cells.length === 2 && cells.every(Number.isFinite)) {
      points.push([cells[0], cells[1]]);
      return;
    }
    if (points.length > 0 || ++headings > 5)
      throw new Refused(
        'BROKEN_FILE',
        `Line ${index + 1} does not hold two numbers (position in mm, intensity). Correct it and send the scan again.`,
      );
  });
  if (points.length < FEWEST_POINTS)
    throw new Refused(
      'TOO_SMALL',
      `The scan has ${points.length} points; at least ${FEWEST_POINTS} are needed.`,
    );
  if (points.length > MOST_POINTS)
    throw new Refused('TOO_LARGE', `The scan has more than ${MOST_POINTS} points. Thin it out.`);
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
