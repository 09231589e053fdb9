/** Line scans: invented counts of two slits seen through a wide detector. */
import { analyseScan } from '@/lib/measure/analyse-scan';
import { uniform } from './helpers/frames';

const sinc = (t: number) => (Math.abs(t) < 1e-9 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t));

function scanText(wish: {
  spacing: number;
  detector: number;
  seed: number;
  heading?: string;
  slits?: 1 | 2;
}): string {
  const random = uniform(wish.seed);
  const normal = () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
  const light = (x: number) =>
    sinc(x / wish.spacing / 3.3) ** 2 *
    (wish.slits === 1 ? 1 : 0.5 * (1 + 0.9 * Math.cos((2 * Math.PI * x) / wish.spacing)));
  const lines: string[] = wish.heading ? [wish.heading] : [];
  for (let x = -10; x <= 10; x += 0.1 + 0.02 * random()) {
    let mean = 0;
    for (let k = 0; k < 50; k++) mean += light(x - 0.3 + ((k + 0.5) / 50 - 0.5) * wish.detector) / 50;
    const counts = 4000 + 9000 * mean;
    lines.push(`${x.toFixed(4)}, ${Math.round(counts + Math.sqrt(counts) * normal())}`);
  }
  return lines.join('\n');
}

describe('line scans', () => {
  it('spacing through a detector half a fringe wide, within its uncertainty', () => {
    for (const seed of [1, 2, 3, 4]) {
      const r = analyseScan(
        scanText({ spacing: 1.915, detector: 1, seed, heading: 'position mm, counts' }),
        1,
        { separationUm: { value: 500, u: 5 }, distanceMm: { value: 1800, u: 18 } },
      );
      if (!r.ok) throw new Error(r.message);
      // The scan is made without wide-angle curvature: at 10 mm on 1800 mm that is below 2e-5.
      expect(Math.abs(r.spacingMm - 1.915)).toBeLessThan(4 * r.uSpacingMm + 1e-4);
      expect(r.uSpacingMm).toBeLessThan(0.01);
      expect(Math.abs(r.visibility - 0.9)).toBeLessThan(0.05);
      expect(r.wavelengthNm).not.toBeNull();
    }
  });
  it('refuses one slit, too few points and a file that is none', () => {
    const code = (text: string) => analyseScan(text, 0, {}).code;
    expect(['ONE_SLIT', 'NO_FRINGES']).toContain(
      code(scanText({ spacing: 1.9, detector: 0, seed: 1, slits: 1 })),
    );
    expect(code('1 2\n2 3\n')).toBe('TOO_SMALL');
    expect(code('a\nb\nc\nd\ne\nf\ng\nh\n')).toBe('BROKEN_FILE');
  });
  it('averages repeats of a position', () => {
    const text = scanText({ spacing: 1.915, detector: 0, seed: 9 });
    const once = analyseScan(text, 0, {});
    const twice = analyseScan(`${text}\n${text}`, 0, {});
    if (!once.ok || !twice.ok) throw new Error('not measured');
    expect(Math.abs(once.spacingMm - twice.spacingMm)).toBeLessThan(0.2 * once.uSpacingMm);
  });
});
