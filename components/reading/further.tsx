import { CHECK_WORDS, Mark } from '@/components/figures/marks';
import type { BandwidthResult, FindingWord } from '@/lib/domain/reading-result';
import { isScanResult, type FitResult } from '@/lib/domain/scan-result';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';
import { coverageFactor } from '@/lib/quantity/student';

/** Below this a line is only called narrow. */
const NARROW_NM = 5;

/** Slit width, visibility and line width: given where the checks allow them, with the reason where not. */
export function Further({ result }: { result: FitResult }) {
  const { words, slit, bandwidth } = result;
  if (!words) return null;
  const k = coverageFactor(result.dofSpacing);
  const take = isScanResult(result) ? 'scan' : 'frame';
  const nothing = `not from this ${take}`;
  return (
    <div className="sec">
      <div className="cap" style={{ marginBottom: 5 }}>
        <h2>Also from this {take}</h2>
        <span>k = {formatNumber(k, 2)}</span>
      </div>
      <dl className="further">
        <Row name="Slit width w" word={words.width}>
          {slit ? widthText(slit.widthUm, slit.uWidthUm, slit.ratio, slit.uRatio, k) : nothing}
        </Row>
        {slit?.difference ? (
          <Row name="Slits differ by" word={words.width}>
            {quantityText(
              100 * slit.difference,
              slit.uDifference === null ? null : 100 * k * slit.uDifference,
              '%',
            )}
          </Row>
        ) : null}
        <Row name="Visibility V" word={words.visibility}>
          {words.visibility === 'stop'
            ? nothing
            : quantityText(
                result.visibility,
                result.uVisibility === null ? null : k * result.uVisibility,
                '',
              )}
        </Row>
        {bandwidth ? (
          <Row name="Line width" word="clear">
            {lineText(bandwidth, k)}
          </Row>
        ) : null}
      </dl>
    </div>
  );
}

function Row({ name, word, children }: { name: string; word: FindingWord; children: React.ReactNode }) {
  return (
    <>
      <dt>
        {name}
        {word === 'clear' ? null : (
          <>
            <Mark kind={`check-${word}`} />
            <span className="only-heard">{CHECK_WORDS[word]}</span>
          </>
        )}
      </dt>
      <dd>{children}</dd>
    </>
  );
}

function quantityText(value: number, expanded: number | null, unit: string): string {
  if (!expanded) return `${formatNumber(value, 2)} ${unit}`.trim();
  const text = formatQuantity(value, expanded);
  return `${text.value} ± ${text.uncertainty} ${unit}`.trim();
}

function widthText(um: number | null, uUm: number | null, ratio: number, uRatio: number, k: number): string {
  if (um === null) return `${quantityText(ratio, k * uRatio, '')} of d`;
  return quantityText(um, uUm === null ? null : k * uUm, 'µm');
}

function lineText({ fwhmNm, uFwhmNm, limitNm }: BandwidthResult, k: number): string {
  if (fwhmNm !== null && fwhmNm >= NARROW_NM)
    return quantityText(fwhmNm, uFwhmNm === null ? null : k * uFwhmNm, 'nm');
  return `narrower than ${formatNumber(Math.max(NARROW_NM, limitNm ?? 0), 0)} nm`;
}
