import type {
  Finding,
  FindingWord,
  OrderCentre,
  ReadingResult,
  SetupValues,
} from '@/lib/domain/reading-result';
import type { ProfileFit } from '@/lib/fit/fit-profile';
import type { PictureFacts } from './band-stack';
import type { Measured } from './measured';

/** What a check of the pattern itself may look at: of a frame, or of a scan, whose lengths are then mm in place of px. */
export interface PatternContext {
  take: 'frame' | 'scan';
  result: Pick<
    ReadingResult,
    'wavelengthNm' | 'spacingPx' | 'uSpacingPx' | 'visibility' | 'envelopeZeroOrder' | 'clippedShare'
  > &
    Pick<Partial<ReadingResult>, 'bandwidth'> & {
      chiSquareReduced: number;
      orders: Pick<OrderCentre, 'm' | 'kind' | 'pullPx'>[];
    };
  measured: {
    place: { band: { fit: ProfileFit } };
    spread: Pick<Measured['spread'], 'covariance'>;
    evidence: Measured['evidence'];
    zero: Pick<Measured['zero'], 'probability' | 'next'>;
    plainSpacing: number;
    second: Measured['second'];
  };
  setup: SetupValues;
  picture?: PictureFacts;
}

/** What a check of a frame may look at. */
export interface FindingContext extends PatternContext {
  result: ReadingResult;
  measured: Measured;
  picture: PictureFacts;
  setup: SetupValues;
}

export interface FindingParts {
  check: string;
  word: FindingWord;
  seen: string;
  /** Effect on this reading's wavelength relative to it; null where it has none that can be stated. */
  relative: number | null;
  /** How the size is put; {size} becomes the number with its unit. */
  size: string;
  done: string;
  remedy: string;
  width?: FindingWord;
  visibility?: FindingWord;
}

/** A finding with its size in nm where the wavelength is known, else as a share of the spacing. */
export function finding(context: Pick<PatternContext, 'result'>, parts: FindingParts): Finding {
  const { wavelengthNm } = context.result;
  const sizeNm = parts.relative === null || wavelengthNm === null ? null : parts.relative * wavelengthNm;
  const size = parts.size.replace('{size}', sizeText(parts.relative, sizeNm));
  const answer: Finding = {
    check: parts.check,
    word: parts.word,
    message: `${parts.seen} ${size}`,
    seen: parts.seen,
    size,
    done: parts.done,
    remedy: parts.remedy,
    sizeNm: sizeNm === null ? null : Math.abs(sizeNm),
  };
  if (parts.width) answer.width = parts.width;
  if (parts.visibility) answer.visibility = parts.visibility;
  return answer;
}

function sizeText(relative: number | null, sizeNm: number | null): string {
  if (sizeNm !== null) return `${numberText(sizeNm)} nm`;
  if (relative === null) return 'no known size';
  return `${numberText(100 * relative)} % of the spacing`;
}

/** Two figures, never more than four places, the minus as a minus sign. */
export function numberText(value: number): string {
  const size = Math.abs(value);
  if (size < 5e-5) return '0';
  const places = size >= 10 ? 0 : size >= 1 ? 1 : size >= 0.095 ? 2 : size >= 0.0095 ? 3 : 4;
  return value.toFixed(places).replace('-', '−');
}

export const percent = (share: number) => `${numberText(100 * share)} %`;

/** How far the optional terms moved the spacing, relative. */
export function movedBy(c: Pick<PatternContext, 'measured'>): number {
  const { fit } = c.measured.place.band;
  return (fit.result.parameters[0] * fit.unitPx) / c.measured.plainSpacing - 1;
}
