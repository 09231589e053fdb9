/**
 * The bytes of a band stack: the letters "bands1", the length of a heading (32-bit, little-endian) at byte 8, the heading
 * as JSON in ASCII filled up with spaces to a multiple of 8, then bandV as doubles and light, pixels, offset, varU, dv as
 * 32-bit floats, all little-endian.
 */
import type { BandStack } from '@/lib/imaging/straighten';
import type { FrameStack } from './band-stack';

const MARK = 'bands1';
const FIXED = 12;
const CELLS = ['light', 'pixels', 'offset', 'varU', 'dv'] as const;

/** What the heading holds; limits that do not occur are null, since JSON has no infinity. */
interface Heading {
  engine: string;
  plan: FrameStack['plan'];
  picture: FrameStack['picture'];
  limits: { clip: number | null; floor: number | null; leastVariance: number };
  grid: Pick<BandStack, 'bins' | 'bands' | 'pitchPx' | 'fromPx'>;
}

export function encodeStack(stack: FrameStack): Uint8Array<ArrayBuffer> {
  const { bands, limits, engine, plan, picture } = stack;
  const heading: Heading = {
    engine,
    plan,
    picture,
    limits: { clip: orNull(limits.clip), floor: orNull(limits.floor), leastVariance: limits.leastVariance },
    grid: { bins: bands.bins, bands: bands.bands, pitchPx: bands.pitchPx, fromPx: bands.fromPx },
  };
  const text = asciiJson(heading);
  const start = Math.ceil((FIXED + text.length) / 8) * 8;
  const cells = bands.bins * bands.bands;
  const bytes = new Uint8Array(start + 8 * bands.bands + 4 * cells * CELLS.length);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < MARK.length; i++) bytes[i] = MARK.charCodeAt(i);
  view.setUint32(8, start - FIXED, true);
  for (let i = FIXED; i < start; i++) bytes[i] = i - FIXED < text.length ? text.charCodeAt(i - FIXED) : 32;
  new Float64Array(bytes.buffer, start, bands.bands).set(bands.bandV);
  let at = start + 8 * bands.bands;
  for (const name of CELLS) {
    new Float32Array(bytes.buffer, at, cells).set(bands[name]);
    at += 4 * cells;
  }
  return bytes;
}

/** Reads what `encodeStack` wrote. Throws a RangeError for bytes that are no stack. */
export function decodeStack(source: Uint8Array): FrameStack {
  // The numbers must stand at multiples of their size, which a part of a larger buffer does not promise.
  const bytes = source.byteOffset % 8 === 0 ? source : Uint8Array.from(source);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (let i = 0; i < MARK.length; i++)
    if (bytes[i] !== MARK.charCodeAt(i)) throw new RangeError('These bytes are not a band stack.');
  const start = FIXED + view.getUint32(8, true);
  if (start > bytes.length) throw new RangeError('This band stack is cut off.');
  let text = '';
  for (let i = FIXED; i < start; i++) text += String.fromCharCode(bytes[i]);
  const { engine, plan, picture, limits, grid } = JSON.parse(text) as Heading;
  const cells = grid.bins * grid.bands;
  if (bytes.length !== start + 8 * grid.bands + 4 * cells * CELLS.length)
    throw new RangeError('This band stack is cut off.');
  const from = bytes.byteOffset + start;
  const part = (k: number) => new Float32Array(bytes.buffer, from + 8 * grid.bands + 4 * cells * k, cells);
  return {
    engine,
    plan,
    picture,
    limits: {
      clip: limits.clip ?? Infinity,
      floor: limits.floor ?? -Infinity,
      leastVariance: limits.leastVariance,
    },
    bands: {
      rect: plan.rect,
      ...grid,
      bandV: new Float64Array(bytes.buffer, from, grid.bands),
      light: part(0),
      pixels: part(1),
      offset: part(2),
      varU: part(3),
      dv: part(4),
    },
  };
}

const orNull = (v: number) => (Number.isFinite(v) ? v : null);

function asciiJson(value: unknown): string {
  return JSON.stringify(value).replace(
    /[\u0080-\uffff]/g,
    (c) => `\\u${c.charCodeAt(0).toString(16).padStart(4, '0')}`,
  );
}
