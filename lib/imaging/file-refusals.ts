import { Refused, type PictureBrief } from './refused';

/** Sentences of files that cannot be measured. */

export interface PixelLimit {
  filePixels: number;
}

export function paletteRefusal(brief: PictureBrief | null): Refused {
  return new Refused(
    'PALETTE',
    'The file holds picked colours from a palette, not measured light. Save the frame as 8 or 16 bit grey or colour.',
    brief,
  );
}

export function samplesRefusal(floating: boolean, brief: PictureBrief | null): Refused {
  return new Refused(
    'FLOAT_SAMPLES',
    `The file stores ${floating ? 'floating-point' : '32 bit'} samples, which cannot be read safely. Save it as 16 bit PNG or TIFF.`,
    brief,
  );
}

export function tooManyPixels(limits: PixelLimit, brief: PictureBrief | null): Refused {
  return new Refused(
    'TOO_MANY_PIXELS',
    `The picture has more than ${limits.filePixels / 1e6} megapixels. Crop it to the fringes or bin it in the camera.`,
    brief,
  );
}

export function truncated(brief: PictureBrief | null): Refused {
  return new Refused(
    'TRUNCATED_FILE',
    'The file breaks off before its end. Copy it again, then replace it.',
    brief,
  );
}

/** Turns what sharp says into a refusal; anything else goes on as it is. */
export function asRefused(error: unknown, brief: PictureBrief | null, limits?: PixelLimit): unknown {
  if (error instanceof Refused || !(error instanceof Error)) return error;
  const said = error.message;
  if (/pixel limit/i.test(said) && limits) return tooManyPixels(limits, brief);
  if (
    /premature|truncat|end of|unexpected end|not enough|short read|read error|out of (data|bounds)/i.test(
      said,
    )
  )
    return truncated(brief);
  if (/unsupported|Input|Vips|png|jpeg|tiff|webp|libspng|bad|corrupt|invalid|unable/i.test(said)) {
    return new Refused(
      'BROKEN_FILE',
      'The file is damaged and cannot be read. Copy it again or save the frame again.',
      brief,
    );
  }
  return error;
}
