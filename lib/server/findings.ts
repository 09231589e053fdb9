import 'server-only';
import type { Finding, FindingWord, ReadingResult, SetupValues } from '@/lib/domain/reading-result';
import { isScanResult, type FitResult } from '@/lib/domain/scan-result';
import type { Verdict } from '@/lib/domain/specification';

const GRAVITY: Record<FindingWord, number> = { clear: 0, look: 1, stop: 2 };

/** The gravest word for the wavelength and its message, or the calm sentence. */
export function gravest(findings: readonly Finding[]): { word: FindingWord; text: string } {
  let worst: Finding | null = null;
  for (const finding of findings) {
    if (GRAVITY[finding.word] > (worst ? GRAVITY[worst.word] : 0)) worst = finding;
  }
  return worst
    ? { word: worst.word, text: worst.message }
    : { word: 'clear', text: 'Nothing stands against it.' };
}

const VERDICT_RISK: Record<Verdict, number> = { within: 0, undecided: 2, 'no-verdict': 2, outside: 3 };

/** Order of the review queue: what may do harm comes first. A stop or an outside outweighs any look. */
export function riskOf(word: FindingWord, verdict: Verdict | null): number {
  return 10 * GRAVITY[word] + 7 * (verdict ? VERDICT_RISK[verdict] : 0);
}

/** Spacing and zero order as the columns of a reading: px of a frame with its scale, mm of a scan. */
export function lengthColumns(result: FitResult, setup: SetupValues) {
  if (isScanResult(result)) {
    const { spacingMm, uSpacingMm, zeroOrder } = result;
    return { spacingMm, uSpacingMm, zeroMm: zeroOrder.xMm };
  }
  return {
    spacingPx: result.spacingPx,
    uSpacingPx: result.uSpacingPx,
    scaleUmPerPx: setup.scaleUmPerPx?.value ?? 0,
    zeroAlongPx: zeroAlongPx(result),
  };
}

/** Where the zero order lies on the region's long axis, px from its centre. */
function zeroAlongPx({ orders, zeroOrder, region }: ReadingResult): number {
  const centre = orders.find((order) => order.m === 0);
  if (centre) return centre.alongPx;
  const angle = (region.angleDeg * Math.PI) / 180;
  return (zeroOrder.xPx - region.cxPx) * Math.cos(angle) + (zeroOrder.yPx - region.cyPx) * Math.sin(angle);
}
