/**
 * One channel turned upright after the orientation tag (1 to 8, TIFF 6.0 tag 274, Exif 2.32 4.6.4): 2 mirrored, 3 upside
 * down, 4 both, 5 to 8 lying on their side. Codes 1 to 4 are turned in place.
 */
export function turnUpright<T extends Uint8Array | Uint16Array>(
  samples: T,
  widthPx: number,
  heightPx: number,
  orientation: number,
): T {
  if (orientation === 3 || orientation === 4) samples.reverse();
  if (orientation === 2 || orientation === 4)
    for (let y = 0; y < heightPx; y++) samples.subarray(y * widthPx, (y + 1) * widthPx).reverse();
  if (orientation < 5 || orientation > 8) return samples;
  // Column x of the stored picture becomes row x, or row width - 1 - x, read down or up.
  const out = (
    samples instanceof Uint8Array ? new Uint8Array(samples.length) : new Uint16Array(samples.length)
  ) as T;
  const fromRight = orientation === 7 || orientation === 8;
  const upwards = orientation === 6 || orientation === 7;
  for (let x0 = 0; x0 < widthPx; x0 += BLOCK) {
    const x1 = Math.min(widthPx, x0 + BLOCK);
    for (let y0 = 0; y0 < heightPx; y0 += BLOCK) {
      const y1 = Math.min(heightPx, y0 + BLOCK);
      for (let x = x0; x < x1; x++) {
        const row = (fromRight ? widthPx - 1 - x : x) * heightPx;
        if (upwards) for (let y = y0; y < y1; y++) out[row + heightPx - 1 - y] = samples[y * widthPx + x];
        else for (let y = y0; y < y1; y++) out[row + y] = samples[y * widthPx + x];
      }
    }
  }
  return out;
}

/** Side of the squares a picture is turned in, so that both sides stay in the cache. */
const BLOCK = 32;
