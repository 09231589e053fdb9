import sharp from 'sharp';

export interface Preview {
  webp: Uint8Array;
  widthPx: number;
  heightPx: number;
}

const PREVIEW_LONG_SIDE_PX = 1600;

/** An oriented 8-bit WebP of at most 1600 px; null where sharp cannot read the file. */
export async function renderPreview(bytes: Uint8Array): Promise<Preview | null> {
  try {
    const { data, info } = await sharp(bytes, { limitInputPixels: 100_000_000 })
      .rotate()
      .resize({ width: PREVIEW_LONG_SIDE_PX, height: PREVIEW_LONG_SIDE_PX, fit: 'inside', withoutEnlargement: true })
      .webp({ quality: 82 })
      .toBuffer({ resolveWithObject: true });
    return { webp: new Uint8Array(data), widthPx: info.width, heightPx: info.height };
  } catch {
    return null;
  }
}
