import { SaidVerdict } from '@/components/figures/marks';
import { MEDIUM_SHORT, Quantity } from '@/components/figures/quantity';
import { ToleranceWhisker } from '@/components/figures/tolerance-whisker';
import { RULE_WORDS } from '@/lib/client/words';
import { spacingOf } from '@/lib/domain/placed-strip';
import type { FitResult } from '@/lib/domain/scan-result';
import type { Judgement, Medium, Specification } from '@/lib/domain/specification';
import { airFromVacuum, vacuumFromAir } from '@/lib/quantity/air-index';
import { formatNumber, formatQuantity, formatSigned, placesFor } from '@/lib/quantity/format';

export interface ResultProps {
  result: FitResult;
  /** In the specification's medium. */
  wavelengthNm: number | null;
  expandedNm: number | null;
  k: number | null;
  medium: Medium;
  judgement: Judgement | null;
  specification: Specification | null;
  /** Of a frame; a scan is in mm already. */
  scaleUmPerPx: number;
  /** Standard uncertainty of the scale, for the spacing in mm. */
  uScaleUmPerPx: number;
  /** For a reference source: its published wavelength in vacuum, nm. */
  publishedVacuumNm: number | null;
}

/** A value in air of the standard state in vacuum, and back. */
function inOther(nm: number, medium: Medium): number {
  return medium === 'air' ? vacuumFromAir(nm) : airFromVacuum(nm);
}

/** Verdict, value and where it stands; the largest thing on the page. */
export function Result(props: ResultProps) {
  const { result, wavelengthNm, expandedNm, medium, judgement, specification } = props;
  const spacing = spacingOf(result);
  return (
    <div>
      <div className="cap items-center" style={{ marginBottom: 0 }}>
        {judgement ? (
          <SaidVerdict verdict={judgement.verdict} />
        ) : (
          <span className="text-ink">Reference</span>
        )}
        {judgement && specification ? (
          <span className="text-right">
            {RULE_WORDS[specification.rule]}
            <span className="max-[1240px]:hidden">
              {judgement.guardNm > 0 ? ` = ${formatQuantity(0, judgement.guardNm).uncertainty} nm` : ''}
            </span>
          </span>
        ) : null}
      </div>
      <div className="mt-2">
        {wavelengthNm === null ? (
          <Quantity value={spacing.value} expanded={2 * spacing.u} unit={spacing.unit} size="result" />
        ) : (
          <Quantity value={wavelengthNm} expanded={expandedNm} medium={medium} size="result" />
        )}
        <Lines {...props} />
      </div>
      {judgement && specification && wavelengthNm !== null && expandedNm !== null ? (
        <>
          <div className="mt-1">
            <ToleranceWhisker
              named
              specification={specification}
              valueNm={wavelengthNm}
              expandedNm={expandedNm}
              judgement={judgement}
            />
          </div>
          {judgement.verdict === 'within' ? null : (
            <p className="mb-1 text-small text-ink-2">{judgement.because}</p>
          )}
        </>
      ) : null}
    </div>
  );
}

function Lines({
  result,
  wavelengthNm,
  k,
  medium,
  scaleUmPerPx,
  uScaleUmPerPx,
  publishedVacuumNm,
}: ResultProps) {
  const own = spacingOf(result);
  const inMm = own.unit === 'mm';
  const spacingMm = inMm ? own.value : (own.value * scaleUmPerPx) / 1000;
  const relative = Math.hypot(own.u / own.value, inMm ? 0 : uScaleUmPerPx / scaleUmPerPx);
  const spacing = formatQuantity(spacingMm, 2 * spacingMm * relative);
  const other =
    wavelengthNm === null || result.wavelengthVacuumNm === null ? null : inOther(wavelengthNm, medium);
  const places = placesFor(result.expandedNm ?? 0.5);
  return (
    <p className="res-k">
      {k === null ? '' : `k = ${formatNumber(k, 2)}`}
      {wavelengthNm !== null && other !== null
        ? ` · ${formatNumber(other, places)} nm (${MEDIUM_SHORT[medium === 'air' ? 'vacuum' : 'air']})`
        : ''}
      <br />
      Spacing <span className="sym">Λ</span>{' '}
      <b>
        {spacing.value} ± {spacing.uncertainty} mm
      </b>
      {publishedVacuumNm !== null && result.wavelengthVacuumNm !== null ? (
        <>
          <br />
          From the published value{' '}
          <b>{formatSigned(result.wavelengthVacuumNm - publishedVacuumNm, places)} nm</b>
        </>
      ) : null}
    </p>
  );
}
