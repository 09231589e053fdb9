import { SaidCheck } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { When } from '@/components/figures/when';
import { count } from '@/lib/client/words';
import type { OverTimeView } from '@/lib/domain/views';
import { studentQuantile } from '@/lib/quantity/student';

/** d2 for moving ranges of two (NIST/SEMATECH e-Handbook, 6.3.2.2): the mean range over it estimates the spread. */
const D2_OF_TWO = 1.128;

/** Mean, distance from the reference and spread of the stretch in force. */
export function Headlines({ view }: { view: OverTimeView }) {
  const stretch = view.stretches[view.stretches.length - 1];
  if (!stretch) return null;
  const spread = stretch.meanRangeNm === null ? null : stretch.meanRangeNm / D2_OF_TWO;
  const scatter =
    spread === null || stretch.points < 3
      ? null
      : (studentQuantile(0.97725, stretch.points - 1) * spread) / Math.sqrt(stretch.points);
  const difference = view.referenceNm === null ? null : stretch.meanNm - view.referenceNm;
  return (
    <div className="headlines">
      <div>
        <span className="label">
          Mean since <When at={stretch.from} dayOnly />
        </span>
        <Quantity value={stretch.meanNm} expanded={null} places={2} medium={view.medium} size="head" />
      </div>
      {difference === null ? null : (
        <div>
          <span className="label">From the {view.referenceIsNominal ? 'nominal' : 'reference value'}</span>
          <Quantity value={difference} expanded={scatter} unit="nm" places={2} signed size="head" />
          {scatter === null ? null : <small>scatter only, without the setup</small>}
        </div>
      )}
      {spread === null ? null : (
        <div>
          <span className="label">Run-to-run spread</span>
          <Quantity value={spread} expanded={null} unit="nm" places={2} size="head" />
        </div>
      )}
      {view.findings.length ? (
        <div className="end max-[1240px]:hidden">
          <SaidCheck word="look">{count(view.findings.length, 'finding')} to look at</SaidCheck>
        </div>
      ) : null}
    </div>
  );
}
