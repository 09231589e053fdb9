import { Mark } from '@/components/figures/marks';
import type { SetupView } from '@/lib/domain/views';
import { CertificateName } from '@/components/setups/certificate-file';
import { cameraText, statedText } from '@/components/setups/stated-words';
import { dueOf } from '@/lib/domain/due';
import { SETUP_VALUES } from '@/lib/domain/setup';

function sentence(certificate: string): string {
  const text = certificate.trim();
  if (!text) return 'No certificate is named.';
  return /[.!?]$/.test(text) ? text : `${text}.`;
}

/** What stands behind each value: certificate, the uncertainty as stated, and until when. */
export function HowKnown({ setup }: { setup: SetupView }) {
  const today = new Date();
  return (
    <section aria-labelledby="known">
      <div className="cap">
        <h2 id="known">How each value is known</h2>
        <span>as stated</span>
      </div>
      <ul className="known">
        {SETUP_VALUES.map(({ key, name, symbol, unit }) => {
          const value = setup[key];
          const due = dueOf(value.due, today);
          return (
            <li key={key}>
              <Mark kind={`check-${due.word}`} />
              <div>
                <b>
                  {name} <span className="sym">{symbol}</span>
                </b>
                : {statedText(value, unit)}. {sentence(value.certificate)} {due.text}.
                {due.word === 'stop' ? ' Frames can be taken, not accepted.' : ''}
                {value.file ? (
                  <>
                    {' '}
                    <CertificateName file={value.file} />
                  </>
                ) : null}
              </div>
            </li>
          );
        })}
      </ul>
      <p className="mt-3 text-small text-ink-2">
        Plate {setup.plate}. {cameraText(setup.camera) ? `Camera ${cameraText(setup.camera)}. ` : ''}
        {setup.why}
      </p>
    </section>
  );
}
