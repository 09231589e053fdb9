import { Mark } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { When } from '@/components/figures/when';
import { CertificateName } from '@/components/setups/certificate-file';
import { cameraText, statedText } from '@/components/setups/stated-words';
import { SETUP_VALUES } from '@/lib/domain/setup';
import type { SetupProposal, SetupView } from '@/lib/domain/views';
import { formatCalendarDate } from '@/lib/quantity/format';
import { DecideSetup, TakeBackSetup, type Decide, type TakeBack } from './decide-setup';

interface Props {
  setup: SetupProposal;
  inForce: SetupView | null;
  /** What this person may do about it, settled on the server. */
  may: { decide: boolean; takeBack: boolean };
  decideSetup: Decide;
  takeBackSetup: TakeBack;
}

const MUCH_SAME = 1e-12;

/** A setup that waits for QA: who asks for what, why, value beside value, and the decision. */
export function WaitingSetup({ setup, inForce, may, decideSetup, takeBackSetup }: Props) {
  const camera = cameraText(setup.camera);
  const heads = { was: inForce ? `setup ${inForce.number}` : 'in force', now: `setup ${setup.number}` };
  return (
    <section className="waiting-setup" aria-labelledby="waiting">
      <div className="cap">
        <h2 id="waiting" className="flex items-center gap-2.5">
          <Mark kind="check-look" />
          Setup {setup.number} waits for QA
        </h2>
        <span>
          entered by {setup.enteredBy.name}, <When at={setup.enteredAt} />
        </span>
      </div>
      <p className="max-w-[80ch]">
        {setup.why} It comes into force{' '}
        {setup.wantedFrom ? (
          <>
            <When at={setup.wantedFrom} />, or with the approval where that is later.
          </>
        ) : (
          'as soon as it is approved.'
        )}{' '}
        {setup.changeIsLook ? 'A value moves by more than both ± together.' : ''}
      </p>
      <table className="figures vals mt-3">
        <thead>
          <tr>
            <th scope="col">k = 2</th>
            <th scope="col" className="num">
              {inForce ? `setup ${inForce.number}, in force` : 'in force'}
            </th>
            <th scope="col" className="num">
              setup {setup.number}
            </th>
            <th scope="col">How it is known</th>
          </tr>
        </thead>
        <tbody>
          <tr>
            <td>Slit plate</td>
            <td className="num" data-head={heads.was}>
              {inForce?.plate ?? 'none'}
            </td>
            <td className={inForce?.plate === setup.plate ? 'num' : 'num moved'} data-head={heads.now}>
              {setup.plate}
            </td>
            <td />
          </tr>
          {SETUP_VALUES.map(({ key, name, symbol, unit }) => {
            const now = setup[key];
            const was = inForce?.[key] ?? null;
            const moved = !was || was.value !== now.value || Math.abs(was.u - now.u) > MUCH_SAME;
            const confirmed = setup.confirmed.find((value) => value.key === key);
            return (
              <tr key={key}>
                <td>
                  {name} <span className="sym">{symbol}</span>
                </td>
                <td className="num" data-head={heads.was}>
                  {was ? <Quantity value={was.value} expanded={2 * was.u} unit={unit} size="cell" /> : 'none'}
                </td>
                <td className={moved ? 'num moved' : 'num'} data-head={heads.now}>
                  <Quantity value={now.value} expanded={2 * now.u} unit={unit} size="cell" />
                </td>
                <td className="due">
                  {statedText(now, unit)}. {now.certificate || 'No certificate is named'}
                  {now.due ? `, due ${formatCalendarDate(now.due)}` : ''}.{' '}
                  {now.file ? <CertificateName file={now.file} /> : null}
                  {confirmed ? (
                    <span className="block text-ink">
                      {confirmed.seen} {setup.enteredBy.name} says: {confirmed.reason}
                    </span>
                  ) : null}
                </td>
              </tr>
            );
          })}
          {camera ? (
            <tr>
              <td>Camera</td>
              <td className="num" data-head={heads.was}>
                {inForce ? cameraText(inForce.camera) || 'not stated' : 'none'}
              </td>
              <td className="num" data-head={heads.now}>
                {camera}
              </td>
              <td />
            </tr>
          ) : null}
        </tbody>
      </table>
      {may.decide ? <DecideSetup setupId={setup.id} number={setup.number} decideSetup={decideSetup} /> : null}
      {may.takeBack ? (
        <TakeBackSetup setupId={setup.id} number={setup.number} takeBackSetup={takeBackSetup} />
      ) : null}
      {may.decide || may.takeBack ? null : (
        <p className="help">Somebody with the role QA decides on it, never whoever entered it.</p>
      )}
    </section>
  );
}
