import { LINEAR, exponentCurve, type ToneCurve } from './tone';

/**
 * The tone curve of an embedded colour profile: tag kTRC (grey) or rTRC, gTRC, bTRC, types 'curv' and 'para'.
 * Source: ICC.1:2022, 10.6 and 10.18. Null where the profile has no such curve.
 */
export function iccToneCurve(icc: Uint8Array, channel: 'grey' | 'red' | 'green' | 'blue'): ToneCurve | null {
  const view = new DataView(icc.buffer, icc.byteOffset, icc.byteLength);
  if (icc.length < 132) return null;
  const wanted = { grey: ['kTRC', 'gTRC'], red: ['rTRC'], green: ['gTRC'], blue: ['bTRC'] }[channel];
  const count = Math.min(view.getUint32(128), 100);
  for (let i = 0; i < count; i++) {
    const at = 132 + 12 * i;
    if (at + 12 > icc.length) return null;
    if (!wanted.includes(ascii(icc, at))) continue;
    const offset = view.getUint32(at + 4);
    if (offset + 12 > icc.length) return null;
    return curveAt(view, icc, offset);
  }
  return null;
}

const BECAUSE = 'colour profile in the file';

function curveAt(view: DataView, icc: Uint8Array, at: number): ToneCurve | null {
  const type = ascii(icc, at);
  if (type === 'curv') {
    const n = view.getUint32(at + 8);
    if (n === 0) return LINEAR(BECAUSE);
    if (n === 1) return exponentCurve(view.getUint16(at + 12) / 256, BECAUSE);
    if (at + 12 + 2 * n > icc.length) return null;
    const table = Float64Array.from({ length: n }, (_, i) => view.getUint16(at + 12 + 2 * i) / 65535);
    return { kind: 'srgb', because: BECAUSE, toLinear: (c) => interpolate(table, c) };
  }
  if (type !== 'para') return null;
  const kind = view.getUint16(at + 8);
  const parameters = [1, 3, 4, 5, 7][kind];
  if (parameters === undefined || at + 12 + 4 * parameters > icc.length) return null;
  const [g, a, b, c, d, e, f] = Array.from({ length: 7 }, (_, i) =>
    i < parameters ? view.getInt32(at + 12 + 4 * i) / 65536 : 0,
  );
  if (kind === 0) return exponentCurve(g, BECAUSE);
  const straight = (x: number) => (kind === 1 ? 0 : kind === 2 ? c : kind === 3 ? c * x : c * x + f);
  const knee = kind <= 2 ? -b / a : d;
  const lift = kind === 2 ? c : kind === 4 ? e : 0;
  return {
    kind: 'srgb',
    because: BECAUSE,
    toLinear: (x) => (x >= knee ? (a * x + b) ** g + lift : straight(x)),
  };
}

function interpolate(table: Float64Array, c: number): number {
  const x = Math.min(1, Math.max(0, c)) * (table.length - 1);
  const i = Math.min(table.length - 2, Math.floor(x));
  return table[i] + (x - i) * (table[i + 1] - table[i]);
}

function ascii(bytes: Uint8Array, at: number): string {
  return String.fromCharCode(bytes[at], bytes[at + 1], bytes[at + 2], bytes[at + 3]);
}
