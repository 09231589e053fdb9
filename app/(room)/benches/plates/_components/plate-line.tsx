import { SaidCheck } from '@/components/figures/marks';
import { Quantity } from '@/components/figures/quantity';
import { When } from '@/components/figures/when';
import { CertificateName } from '@/components/setups/certificate-file';
import { statedText } from '@/components/setups/stated-words';
import { dueOf } from '@/lib/domain/due';
import type { PlateCertificateView, PlateView } from '@/lib/domain/views';
import { formatCalendarDate } from '@/lib/quantity/format';

/** One plate: what its newest certificate states, where it is, and what came before. */
export function PlateLine({ plate }: { plate: PlateView }) {
  const [newest, ...older] = plate.certificates;
  const due = dueOf(newest.due, new Date());
  const past = plate.mounts.filter(({ to }) => to !== null);
  return (
    <>
      <div className="list-row plate-row">
        <div>
          <div className="name">{plate.name}</div>
          <div className="sub">
            {plate.mountedOn ? (
              <>
                on {plate.mountedOn.bench.name} since <When at={plate.mountedOn.since} dayOnly />
              </>
            ) : (
              'on no bench'
            )}
            {plate.missedBy.length
              ? `, named by the setup of ${plate.missedBy.map(({ name }) => name).join(' and ')}`
              : ''}
            {plate.note ? `. ${plate.note}` : ''}
          </div>
        </div>
        <div>
          <span className="sub">
            Slit separation <span className="sym">d</span>
          </span>
          <div>
            <Quantity
              value={newest.separationUm.value}
              expanded={2 * newest.separationUm.u}
              unit="µm"
              size="cell"
            />
          </div>
        </div>
        <div>
          <span className="sub">
            Slit width <span className="sym">w</span>
          </span>
          <div>
            <Quantity value={newest.widthUm.value} expanded={2 * newest.widthUm.u} unit="µm" size="cell" />
          </div>
        </div>
        <div className="sub">
          <CertificateWords certificate={newest} />
        </div>
        <SaidCheck word={due.word}>{due.text}</SaidCheck>
      </div>
      {older.length || past.length ? (
        <details className="pb-3">
          <summary className="link inline-flex min-h-[44px] items-center text-small">
            What came before
          </summary>
          <ul className="grid gap-1.5 text-small text-ink-2">
            {older.map((certificate) => (
              <li key={certificate.id}>
                Certificate {certificate.number}, entered <When at={certificate.enteredAt} /> by{' '}
                {certificate.enteredBy.name}: d {certificate.separationUm.value} µm,{' '}
                {statedText(certificate.separationUm, 'µm')}; w {certificate.widthUm.value} µm,{' '}
                {statedText(certificate.widthUm, 'µm')}. <CertificateWords certificate={certificate} />
                {certificate.due ? ` Due ${formatCalendarDate(certificate.due)}.` : ''}
              </li>
            ))}
            {past.map(({ bench, from, to }) => (
              <li key={from}>
                On {bench.name} from <When at={from} /> to <When at={to ?? from} />.
              </li>
            ))}
          </ul>
        </details>
      ) : null}
    </>
  );
}

function CertificateWords({ certificate }: { certificate: PlateCertificateView }) {
  return (
    <>
      {certificate.certificate || 'No certificate is named'}.{' '}
      {certificate.file ? <CertificateName file={certificate.file} /> : null}
      {certificate.confirmed.map(({ key, seen, reason }) => (
        <span key={key} className="block">
          {seen} {certificate.enteredBy.name} says: {reason}
        </span>
      ))}
    </>
  );
}
