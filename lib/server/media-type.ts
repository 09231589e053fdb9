import 'server-only';
import { AppError } from '@/lib/domain/errors';
import { SCAN_MEDIA_TYPE } from '@/lib/domain/scan-result';
import { looksLikeScan, textOf } from '@/lib/measure/read-scan';

/** As many bytes as it takes to tell the kinds of file apart: a scan may begin with a long heading. */
export const FIRST_BYTES = 8192;

const HEIC_BRANDS = ['heic', 'heix', 'hevc', 'hevx', 'heim', 'heis', 'mif1', 'msf1'];

/**
 * The media type by a file's first bytes, never by its name. PNG (ISO/IEC 15948), JPEG (ISO/IEC 10918), TIFF 6.0
 * in both byte orders, WebP (RFC 9649); a text that begins with two columns of numbers is a line scan (RFC 4180's type).
 * Throws NOT_A_PICTURE with what to do otherwise.
 */
export function mediaTypeOf(first: Uint8Array): string {
  const text = Buffer.from(first.subarray(0, 16)).toString('latin1');
  if (text.startsWith('\x89PNG\r\n\x1a\n')) return 'image/png';
  if (text.startsWith('\xff\xd8\xff')) return 'image/jpeg';
  if (text.startsWith('II*\0') || text.startsWith('MM\0*')) return 'image/tiff';
  if (text.startsWith('RIFF') && text.slice(8, 12) === 'WEBP') return 'image/webp';
  if (text.slice(4, 8) === 'ftyp' && HEIC_BRANDS.includes(text.slice(8, 12))) {
    throw new AppError(
      'NOT_A_PICTURE',
      'This is a HEIC picture, which cannot be measured. Set the camera to JPEG (on a phone: Settings, Camera, Formats, Most Compatible) and take it again.',
    );
  }
  if (first.length === 0)
    throw new AppError('NOT_A_PICTURE', 'This file is empty. Copy it from the camera again.');
  const words = textOf(first);
  if (words !== null && looksLikeScan(words)) return SCAN_MEDIA_TYPE;
  if (words !== null)
    throw new AppError(
      'NOT_A_PICTURE',
      'This file is neither a picture nor a line scan: it is a text without a line of two numbers. Save a scan as two columns, position in mm and intensity, or a frame as PNG, JPEG, TIFF or WebP.',
    );
  throw new AppError(
    'NOT_A_PICTURE',
    'This file is not a PNG, JPEG, TIFF or WebP picture. Save the frame as one of these, best as TIFF or PNG with 16 bits.',
  );
}
