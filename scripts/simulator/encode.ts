import sharp from 'sharp';
import type { Picture } from './camera';

export type FileKind = 'png' | 'tiff' | 'jpeg' | 'webp';

/** Writes a picture as a real file. 16-bit pictures go to PNG or TIFF at full depth; JPEG and WebP are 8-bit. */
export async function encodeFile(
  picture: Picture,
  kind: FileKind,
  options: { quality?: number; orientation?: number } = {},
): Promise<Buffer> {
  const deep = picture.bits === 16 && (kind === 'png' || kind === 'tiff');
  const shift = picture.bits === 16 && !deep ? 8 : 0;
  const data = deep ? picture.samples : Uint8Array.from(picture.samples, (v) => v >> shift);
  let image = sharp(data, {
    raw: { width: picture.widthPx, height: picture.heightPx, channels: picture.channels },
  });
  if (deep) image = image.toColourspace(picture.channels === 1 ? 'grey16' : 'rgb16');
  else if (picture.channels === 1) image = image.toColourspace('b-w');
  if (options.orientation) image = image.withMetadata({ orientation: options.orientation });
  switch (kind) {
    case 'png':
      return image.png({ compressionLevel: 3 }).toBuffer();
    case 'tiff':
      return image.tiff({ compression: 'none' }).toBuffer();
    case 'jpeg':
      return image.jpeg({ quality: options.quality ?? 92, chromaSubsampling: '4:2:0' }).toBuffer();
    case 'webp':
      return image.webp({ quality: options.quality ?? 92 }).toBuffer();
  }
}
