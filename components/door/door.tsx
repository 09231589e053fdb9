import type { ReactNode } from 'react';
import { LookSwitches } from '@/components/bar/look-switches';
import { LightBand } from '@/components/figures/fringe-strip';
import { Logo } from '@/components/figures/logo';
import { twoSlitLight } from '@/lib/client/two-slit-light';

const DRAWN = { wavelengthNm: 632.82, separationUm: 250, widthUm: 30, distanceMm: 1850.2, visibility: 0.94 };
const LIGHT = twoSlitLight(DRAWN, 120, 960);

/** The pages before signing in: mark, a band of fringes drawn from the formula, and a form on the middle. */
export function Door({ heading, children }: { heading: string; children: ReactNode }) {
  return (
    <div className="door">
      <div className="line" aria-hidden="true" />
      <div className="look-switches">
        <LookSwitches icons={false} />
      </div>
      <header className="contents">
        <div className="head">
          <Logo label="" />
          <p className="name">Midfringe</p>
        </div>
        <div className="band">
          <LightBand
            light={LIGHT}
            nm={DRAWN.wavelengthNm}
            label="Two-slit fringes drawn at 632.82 nm in air"
          />
        </div>
      </header>
      <main className="form">
        <h1 className="only-heard">{heading}</h1>
        {children}
      </main>
      <footer className="foot">
        <span>Fringe spacing and wavelength from camera frames</span>
        <span>
          Drawn from the two-slit formula: 632.82 nm (air), d 250 µm, w 30 µm, L 1 850.2 mm, ±60 mm; dark at
          order 8.3
        </span>
      </footer>
    </div>
  );
}
