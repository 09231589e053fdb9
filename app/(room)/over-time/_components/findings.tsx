import type { OverTimeView } from '@/lib/domain/views';
import { When } from '@/components/figures/when';

/** Each finding with its letter, run, reading and date; and the rules that are watched. */
export function Findings({ view }: { view: OverTimeView }) {
  return (
    <>
      <section className="found" aria-labelledby="findings">
        <h2 id="findings">Findings</h2>
        {view.findings.length ? (
          view.findings.map((finding) => {
            const first = view.points[finding.first];
            const last = view.points[finding.last];
            const many = finding.last > finding.first;
            return (
              <div className="found-item" key={finding.letter}>
                <span className="tag">{finding.letter}</span>
                <div>
                  <b>{finding.title}</b>
                  <p>
                    {many
                      ? `Runs ${finding.first + 1} to ${finding.last + 1}, readings ${first.readingId} to ${last.readingId}, `
                      : `Run ${finding.first + 1}, reading ${first.readingId}, `}
                    <When at={first.takenAt} dayOnly />
                    {many ? (
                      <>
                        {' '}
                        to <When at={last.takenAt} dayOnly />
                      </>
                    ) : null}
                    . {finding.text}
                  </p>
                </div>
              </div>
            );
          })
        ) : (
          <p className="border-t border-edge pt-3 text-small text-ink-2">None in the runs shown.</p>
        )}
      </section>
      <section className="found" aria-labelledby="rules">
        <h2 id="rules">Rules watched</h2>
        <p className="text-small text-ink-2">
          One run outside the limits · a step above the limit of the moving range · nine in a row on one side
          of the mean. A stretch with fewer than 30 runs has provisional limits.
        </p>
      </section>
    </>
  );
}
