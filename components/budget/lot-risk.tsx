import { FEWEST_UNITS, type LotRisk as Risk } from '@/lib/quantity/lot-risk';
import { formatNumber, formatPercent, placesFor } from '@/lib/quantity/format';

/** A risk so small that its figures mean nothing. */
const LEAST = 0.0005;
const share = (risk: number) => (risk < LEAST ? 'below 0.1 %' : formatPercent(risk));

/** What the decision rule lets pass and turns away among units like these; or how many more are needed to say it. */
export function LotRisk({ risk, medium }: { risk: Risk | null; medium: string }) {
  if (!risk) {
    return (
      <p className="pb-3 text-small text-ink-2">
        Risks of the decision rule are shown once {FEWEST_UNITS} units have a value.
      </p>
    );
  }
  const places = placesFor(risk.uNm);
  return (
    <section className="lot-risk" aria-label="Risks of the decision rule">
      <p>
        Consumer’s risk <b>{share(risk.consumer)}</b>
        <small>passed, though outside its limits</small>
      </p>
      <p>
        Producer’s risk <b>{share(risk.producer)}</b>
        <small>not passed, though inside</small>
      </p>
      <p className="how">
        For units like the {formatNumber(risk.units, 0)} with a value: mean{' '}
        {formatNumber(risk.meanNm, places)} nm ({medium}), scatter {formatNumber(risk.sdNm, places)} nm, each
        known to u = {formatNumber(risk.uNm, places)} nm
        {risk.guardNm > 0 ? `, guard band ${formatNumber(risk.guardNm, places)} nm` : ', no guard band'}.
      </p>
    </section>
  );
}
