/**
 * General cautions as laser safety courses give them; the standard's text was not consulted. What the label, the laser
 * safety officer and the local rules say comes before anything here.
 */
const CAUTIONS = [
  'Read the class off the label, never from the measured wavelength.',
  'Do not look into the beam, or at a mirror-like reflection of it: slits, mounts and sensor windows reflect. Use no eyepiece or telescope on it.',
  'Block the beam before touching the bench, and attenuate it before the camera.',
  'Infrared and ultraviolet light give no warning by blinking. A green module can let infrared out as well.',
];
const CLASSES: readonly [name: string, words: string][] = [
  ['1', 'safe in foreseeable use'],
  ['1M', 'safe for the bare eye, not with viewing optics'],
  ['2', 'visible, up to 1 mW; blinking protects'],
  ['2M', 'as 2, but not with viewing optics'],
  ['3R', 'looking into it is a small but real risk'],
  ['3B', 'the beam hurts eyes; a scattered one usually does not'],
  ['4', 'beam and scattered light hurt eyes and skin, and can set fire'],
];

/** The cautions and what the classes mean. */
export function CautionWords() {
  return (
    <>
      <div className="caution-cols">
        <ul>
          {CAUTIONS.map((line) => (
            <li key={line}>{line}</li>
          ))}
        </ul>
        <dl>
          {CLASSES.map(([name, words]) => (
            <div key={name}>
              <dt>Class {name}</dt>
              <dd>{words}</dd>
            </div>
          ))}
        </dl>
      </div>
      <p>
        A class 3B or 4 laser belongs under a laser safety officer. The label, the officer and the local rules
        have the last word; in doubt, ask before switching on.
      </p>
    </>
  );
}

/** Where a bench is set up: one sentence always in sight, the rest to be opened. */
export function LaserCautions() {
  return (
    <section className="cautions" aria-label="Cautions for lasers">
      <p>
        Laser light can hurt eyes. Block the beam before touching the bench; the label, the laser safety
        officer and the local rules have the last word.
      </p>
      <details>
        <summary className="link inline-flex min-h-[44px] items-center">Cautions</summary>
        <CautionWords />
      </details>
    </section>
  );
}
