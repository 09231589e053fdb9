import { SaidVerdict } from '@/components/figures/marks';
import { MEDIUM_SHORT } from '@/components/figures/quantity';
import { spacingOf } from '@/lib/domain/placed-strip';
import type { ReadingView } from '@/lib/domain/views';
import { formatNumber, placesFor } from '@/lib/quantity/format';
import { moveFrom } from '@/lib/domain/move';
import type { PreviewState } from '@/lib/client/use-preview-fit';
import { moveText } from './move-text';
import { valueText } from './readings-of-frame';

interface Props {
  before: ReadingView | null;
  preview: PreviewState;
}

/** The kept reading and the one the change would give, side by side, before anything is kept. */
export function BeforeAfter({ before, preview }: Props) {
  const { fit } = preview;
  const used = fit ? fit.result.orders.filter((order) => order.used).length : null;
  const change =
    fit && before?.wavelengthNm != null
      ? moveFrom({ valueNm: before.wavelengthNm, uNm: before.uNm }, fit.wavelengthNm)
      : null;
  const places = placesFor(fit?.expandedNm ?? before?.expandedNm ?? 0.5);
  return (
    <section className="ask mb-3" aria-label="Before and after the change" aria-busy={preview.working}>
      {preview.problem ? (
        <p className="text-small">
          <b>No fit with this region.</b> <span className="text-ink-2">{preview.problem}</span>
        </p>
      ) : (
        <table className="compare">
          <thead>
            <tr>
              <th scope="col">
                <span className="only-heard">What</span>
              </th>
              <th scope="col">{before ? `Reading ${before.number}` : 'Before'}</th>
              <th scope="col">
                {preview.home === 'making' ? 'New bands…' : preview.working ? 'Fitting…' : 'With the change'}
              </th>
            </tr>
          </thead>
          <tbody>
            <tr>
              <th scope="row">nm ({MEDIUM_SHORT[fit?.medium ?? before?.medium ?? 'air']})</th>
              <td>{before ? valueText(before) : 'none'}</td>
              <td>
                <b>{fit ? valueText({ ...fit, spacing: spacingOf(fit.result) }) : '…'}</b>
              </td>
            </tr>
            <tr>
              <th scope="row">centres</th>
              <td>{before ? formatNumber(before.orderCentres, 0) : '0'}</td>
              <td>{used === null ? '…' : formatNumber(used, 0)}</td>
            </tr>
            {before?.judgement || fit?.judgement ? (
              <tr>
                <th scope="row">verdict</th>
                <td>{before?.judgement ? <SaidVerdict verdict={before.judgement.verdict} /> : null}</td>
                <td>{fit?.judgement ? <SaidVerdict verdict={fit.judgement.verdict} /> : null}</td>
              </tr>
            ) : null}
            {change === null ? null : (
              <tr>
                <th scope="row">change</th>
                <td />
                <td>
                  <b>{moveText(change, places)}</b>
                </td>
              </tr>
            )}
          </tbody>
        </table>
      )}
    </section>
  );
}
