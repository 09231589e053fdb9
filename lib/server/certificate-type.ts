import 'server-only';
import { AppError } from '@/lib/domain/errors';

/**
 * The media type of a certificate by its first bytes, never by its name: PDF (ISO 32000), PNG (ISO/IEC 15948), JPEG
 * (ISO/IEC 10918). Throws NOT_A_PICTURE with what to do otherwise.
 */
export function certificateTypeOf(first: Uint8Array): string {
  const text = Buffer.from(first.subarray(0, 8)).toString('latin1');
  if (text.startsWith('%PDF-')) return 'application/pdf';
  if (text === '\x89PNG\r\n\x1a\n') return 'image/png';
  if (text.startsWith('\xff\xd8\xff')) return 'image/jpeg';
  throw new AppError(
    'NOT_A_PICTURE',
    'This file is not a PDF, PNG or JPEG. Scan the certificate, or save it as a PDF.',
  );
}
