import type { Metadata } from 'next';
import { Empty } from '@/components/states/empty';
import { count, nominalText, RULE_WORDS, METHOD_WORDS } from '@/lib/client/words';
import { can } from '@/lib/domain/permissions';
import type { ReferenceTemperature } from '@/lib/domain/specification';
import { formatNumber, formatQuantity } from '@/lib/quantity/format';
import { listSpecifications } from '@/lib/server/queries/lots';
import { requireMe } from '@/lib/server/session';
import { addSpecification, retireSpecification } from '../lots/actions';
import { AddSpecification } from './_components/add-specification';
import { Retire } from './_components/retire';

export const metadata: Metadata = { title: 'Specifications' };

function temperatureText({ nmPerK, uNmPerK }: ReferenceTemperature): string {
  const step = uNmPerK > 0 ? formatQuantity(nmPerK, uNmPerK) : null;
  return step ? `${step.value} ± ${step.uncertainty} nm per K, k = 1` : `${formatNumber(nmPerK, 3)} nm per K`;
}

export default async function Specifications() {
  const me = await requireMe('lots.see');
  const may = can(me, 'specifications.add');
  const list = await listSpecifications();
  return (
    <div className="page pb-12">
      <div className="headline">
        <div className="l">
          <h1>Specifications</h1>
          <span className="text-ink-2">by name, retired ones last</span>
        </div>
      </div>
      <p className="lead mb-4">
        A specification says what the wavelength should be and how a verdict is reached. It is never changed:
        a new one is added and the old one retired, so that verdicts already given keep their meaning.
      </p>
      {may ? <AddSpecification addSpecification={addSpecification} /> : null}
      {list.length ? (
        <div className="plain-list" role="list">
          {list.map((spec) => (
            <div key={spec.id} className="list-row spec-row" role="listitem">
              <div className="name">{spec.name}</div>
              <div>
                <div>{nominalText(spec)}</div>
                <div className="sub">
                  {RULE_WORDS[spec.rule]}
                  {spec.ownGuardNm === null ? '' : ` of ${formatNumber(spec.ownGuardNm, 2)} nm`}; no verdict
                  when U is above {formatNumber(spec.ratio, 2)} of half the tolerance
                  {spec.method ? `; ${METHOD_WORDS[spec.method].toLowerCase()}` : ''}
                  {spec.atTemperature ? `; ${temperatureText(spec.atTemperature)}` : ''}
                </div>
              </div>
              <div className="sub">{spec.lots ? count(spec.lots, 'lot') : 'no lot yet'}</div>
              <div>
                {spec.retired ? (
                  <span className="text-ink-3">retired</span>
                ) : may ? (
                  <Retire id={spec.id} name={spec.name} retireSpecification={retireSpecification} />
                ) : null}
              </div>
            </div>
          ))}
        </div>
      ) : (
        <Empty title="No specification yet">The first one added can be chosen when a lot is opened.</Empty>
      )}
    </div>
  );
}
