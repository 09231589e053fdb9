import { Mark } from '@/components/figures/marks';
import type { SetupView, StatedValue } from '@/lib/domain/views';
import type { FindingWord } from '@/lib/domain/reading-result';
import { CertificateName } from '@/components/setups/certificate-file';
import { cameraText, statedText } from '@/components/setups/stated-words';
import { SETUP_VALUES } from '@/lib/domain/setup';
import { formatCalendarDate } from '@/lib/quantity/format';
import { daysUntil, dueWord } from './due';

function dueText(value: StatedValue, today: Date): { word: FindingWord; text: string } {
  if (!value.due) return { word: 'clear', text: 'No due date is stated.' };
  const days = daysUntil(value.due, today);
  const date = formatCalendarDate(value.due);
  if (days < 0) return { word: 'stop', text: `Overdue since ${date}: frames can be taken, not accepted.` };
  return {
    word: dueWord(days),
    text: days === 0 ? 'Due today.' : `Due ${date}, in ${days} ${days === 1 ? 'day' : 'days'}.`,
  };
}

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
          const due = dueText(value, today);
          return (
            <li key={key}>
              <Mark kind={`check-${due.word}`} />
              <div>
                <b>
                  {name} <span className="sym">{symbol}</span>
                </b>
                : {statedText(value, unit)}. {sentence(value.certificate)} {due.text}
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
