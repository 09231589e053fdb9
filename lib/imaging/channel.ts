/** Which colour channel carries the light of the fringes and is not clipped. */

export const CHANNEL_NAMES = ['red', 'green', 'blue'] as const;

export interface ChannelChoice {
  index: 0 | 1 | 2;
  name: string;
  /** True where the channels differ, so that the file is a colour picture and not grey stored three times. */
  colour: boolean;
  /** Clipped share of the light-bearing area per channel. */
  clippedShare: number[];
}

const CLIPPED_FROM = 0.985;

/**
 * Chooses by expected signal-to-noise: the strength of local contrast (photon noise grows with its root) times the
 * square of the share of the bright area that is not clipped.
 * `rgb` is interleaved, three codes a pixel, already reduced to a small picture; `lightOf` maps codes to light.
 */
export function chooseChannel(
  rgb: Uint8Array | Uint16Array,
  widthPx: number,
  heightPx: number,
  lightOf: Float32Array,
): ChannelChoice {
  const fullScale = lightOf.length - 1;
  const n = widthPx * heightPx;
  let differ = 0;
  for (let i = 0; i < n; i++) {
    const spread = Math.max(Math.abs(rgb[3 * i] - rgb[3 * i + 1]), Math.abs(rgb[3 * i] - rgb[3 * i + 2]));
    if (spread > 0.02 * fullScale) differ++;
  }
  const colour = differ > 0.001 * n;
  const scores: number[] = [];
  const clippedShare: number[] = [];
  for (let c = 0; c < 3; c++) {
    const light = new Float32Array(n);
    for (let i = 0; i < n; i++) light[i] = lightOf[rgb[3 * i + c]];
    const contrast = localContrast(light, widthPx, heightPx);
    const high = quantile(light, 0.995);
    let bright = 0;
    let clipped = 0;
    for (let i = 0; i < n; i++) {
      if (light[i] < 0.25 * high) continue;
      bright++;
      if (rgb[3 * i + c] >= CLIPPED_FROM * fullScale) clipped++;
    }
    const share = bright > 0 ? clipped / bright : 0;
    clippedShare.push(share);
    scores.push(Math.sqrt(contrast) * (1 - share) ** 2);
  }
  let index: 0 | 1 | 2 = 0;
  for (const c of [1, 2] as const) if (scores[c] > scores[index]) index = c;
  if (!colour) return { index: 1, name: 'grey', colour, clippedShare };
  return { index, name: CHANNEL_NAMES[index], colour, clippedShare };
}

/** 98th percentile of the difference between a pixel and the mean of the four pixels a little away. */
function localContrast(light: Float32Array, widthPx: number, heightPx: number): number {
  const reach = Math.max(1, Math.round(Math.min(widthPx, heightPx) / 100));
  const out = new Float32Array(Math.max(0, (widthPx - 2 * reach) * (heightPx - 2 * reach)));
  let k = 0;
  for (let y = reach; y < heightPx - reach; y++) {
    for (let x = reach; x < widthPx - reach; x++) {
      const i = y * widthPx + x;
      const around =
        (light[i - reach] + light[i + reach] + light[i - reach * widthPx] + light[i + reach * widthPx]) / 4;
      out[k++] = Math.abs(light[i] - around);
    }
  }
  return k === 0 ? 0 : quantile(out, 0.98);
}

/** Quantile of at most 20 000 evenly picked values. */
export function quantile(values: Float32Array, q: number): number {
  const step = Math.max(1, Math.floor(values.length / 20000));
  const picked = new Float32Array(Math.ceil(values.length / step));
  for (let i = 0, k = 0; i < values.length; i += step) picked[k++] = values[i];
  picked.sort();
  return picked.length === 0 ? 0 : picked[Math.min(picked.length - 1, Math.floor(q * picked.length))];
}
