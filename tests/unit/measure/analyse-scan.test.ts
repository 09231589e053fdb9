/**
 * Line scans. Invented counts of two slits seen through a wide detector, made here from the physics (exact far field,
 * detector by fine quadrature) and not by the fit.
 */
import type { SetupValues } from '@/lib/domain/reading-result';
import type { ScanOptions, ScanResult } from '@/lib/domain/scan-result';
import { analyseScan } from '@/lib/measure/analyse-scan';
import { PLAIN_SCENE, type Scene } from '@/scripts/simulator/scene';
import { scanText } from '@/scripts/simulator/scan';
import { uniform } from './helpers/frames';

const sinc = (t: number) => (Math.abs(t) < 1e-9 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t));

interface Wish {
  spacing?: number;
  detector?: number;
  seed?: number;
  heading?: string;
  slits?: 1 | 2;
  /** 0: no noise, no rounding. */
  noise?: 0 | 1;
  step?: number;
  jitter?: number;
  visibility?: number;
  span?: number;
}

const ZERO_MM = 0.3;
const RATIO = 1 / 3.3;

function points({
  spacing = 1.915,
  detector = 0,
  seed = 1,
  slits = 2,
  noise = 1,
  step = 0.1,
  jitter = 0.02,
  visibility = 0.9,
  span = 10,
}: Wish): [number, number][] {
  const random = uniform(seed);
  const normal = () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
  const light = (x: number) =>
    sinc((x / spacing) * RATIO) ** 2 *
    (slits === 1 ? 1 : 0.5 * (1 + visibility * Math.cos((2 * Math.PI * x) / spacing)));
  const list: [number, number][] = [];
  const parts = detector > 0 ? 200 : 1;
  for (let x = -span; x <= span + 1e-9; x += step + jitter * random()) {
    let mean = 0;
    for (let k = 0; k < parts; k++) mean += light(x - ZERO_MM + ((k + 0.5) / parts - 0.5) * detector) / parts;
    const counts = 4000 + 9000 * mean;
    list.push([x, noise === 0 ? counts : Math.round(counts + Math.sqrt(counts) * normal())]);
  }
  return list;
}

const text = (list: [number, number][], parting = ', ', heading = '') =>
  [...(heading ? [heading] : []), ...list.map(([x, y]) => `${x.toFixed(5)}${parting}${y}`)].join('\n');

const bytes = (content: string) => new TextEncoder().encode(content);

/** Far enough that positions and sines are alike to 1e-9. */
const FAR: SetupValues = { separationUm: { value: 500, u: 5 }, distanceMm: { value: 1e6, u: 0 } };

const analyse = (content: string, options: Partial<ScanOptions> = {}, setup: SetupValues = FAR) =>
  analyseScan(bytes(content), setup, { detectorMm: null, ...options });

function measured(content: string, options: Partial<ScanOptions> = {}, setup?: SetupValues): ScanResult {
  const answer = analyse(content, options, setup);
  if (!answer.ok) throw new Error(`${answer.code}: ${answer.message}`);
  return answer;
}

describe('the spacing of a scan', () => {
  // Rounding to 5 places of a mm and the nodes of the detector leave less than this.
  const IDEAL_RELATIVE = 2e-6;
  it.each([0, 0.2, 0.5, 1, 1.5])('is exact without noise through a detector %d mm wide', (detector) => {
    const r = measured(text(points({ detector, noise: 0 })), { detectorMm: detector || null });
    expect(Math.abs(r.spacingMm / 1.915 - 1)).toBeLessThan(IDEAL_RELATIVE);
    expect(Math.abs(r.zeroOrder.xMm - ZERO_MM)).toBeLessThan(1e-4);
    expect(Math.abs(r.visibility - 0.9)).toBeLessThan(1e-4);
    expect(Math.abs((r.envelopeZeroOrder ?? 0) - 3.3)).toBeLessThan(1e-3);
  });
  it('holds the truth in its uncertainty, the detector half a fringe wide', () => {
    const SEEDS = 20;
    let sum = 0;
    for (let seed = 1; seed <= SEEDS; seed++) {
      const r = measured(text(points({ detector: 1, seed }), ', ', 'position mm, counts'), {
        detectorMm: 1,
      });
      sum += ((r.spacingMm - 1.915) / r.uSpacingMm) ** 2;
    }
    // Chi-square with 20 degrees of freedom: mean square within 0.30 to 2.27 with probability 0.998.
    expect(sum / SEEDS).toBeGreaterThan(0.3);
    expect(sum / SEEDS).toBeLessThan(2.27);
  });
  it('gives the wavelength of separation and distance alone, the scale of pixels has no part', () => {
    const setup: SetupValues = {
      separationUm: { value: 500, u: 1 },
      distanceMm: { value: 1800, u: 1 },
      widthUm: { value: 150, u: 1 },
      scaleUmPerPx: { value: 7, u: 1 },
    };
    const r = measured(text(points({ spacing: 1.9152 })), {}, setup);
    // lambda = d spacing / L = 500 um x 1.9152 mm / 1800 mm = 532.0 nm; the scan has no curvature (3e-5 at 10 mm).
    expect(Math.abs((r.wavelengthNm ?? 0) - 532)).toBeLessThan(0.5);
    expect(r.budget.map((row) => row.key)).toEqual(['separation', 'distance', 'fit', 'near-field']);
    expect(r.budget.find((row) => row.key === 'fit')).toMatchObject({ unit: 'mm', value: r.spacingMm });
  });
  it('averages repeats of a position', () => {
    const once = points({ seed: 9 });
    const r = measured(text(once));
    const twice = measured(text([...once, ...once]));
    expect(Math.abs(r.spacingMm - twice.spacingMm)).toBeLessThan(0.2 * r.uSpacingMm);
  });
  it('gives the same digits for the same bytes', () => {
    const content = text(points({ seed: 3, detector: 0.5 }));
    const again = measured(content, { detectorMm: 0.5 });
    expect({ ...measured(content, { detectorMm: 0.5 }), ms: null }).toEqual({ ...again, ms: null });
  });
});

// Worked examples of OpenStax, University Physics vol. 3 (UP), chapters 3 and 4, and College Physics 2e (CP), chapter 27, as
// simulated scans with a million counts: what is printed comes back within half a unit of its last digit.
describe('published worked examples', () => {
  const example = (scene: Partial<Scene>, reachMm: number): ScanResult => {
    const plan = {
      scene: { ...PLAIN_SCENE, visibility: 0.98, ...scene },
      fromMm: -reachMm,
      toMm: reachMm,
      stepMm: reachMm / 150,
      zeroMm: 0,
      detectorMm: 0,
      peakCounts: 1e6,
      dark: 1000,
      seed: 11,
    };
    const { separationUm, distanceMm } = plan.scene;
    return measured(
      scanText(plan),
      {},
      {
        separationUm: { value: separationUm, u: 0 },
        distanceMm: { value: distanceMm, u: 0 },
      },
    );
  };
  it('UP, CP: fringes 7.50 mm apart at 2.00 m, d 0.120 mm -> 450 nm', () => {
    const r = example({ wavelengthNm: 450, separationUm: 120, widthUm: 30, distanceMm: 2000 }, 28);
    expect(Math.abs(r.spacingMm - 7.5)).toBeLessThan(0.005);
    expect(Math.abs((r.wavelengthNm ?? 0) - 450)).toBeLessThan(0.5);
  });
  it('UP: 633 nm, d 0.0800 mm, 3.00 m -> fringes 2.37 cm apart', () => {
    const r = example({ wavelengthNm: 633, separationUm: 80, widthUm: 20, distanceMm: 3000 }, 90);
    expect(Math.abs(r.spacingMm - 23.738)).toBeLessThan(0.01);
  });
  it('UP check of ex. 3.1: d 0.0100 mm, 633 nm: orders 1 and 2 at 3.63° and 7.27°, by exact angles', () => {
    const r = example({ wavelengthNm: 633, separationUm: 10, widthUm: 2, distanceMm: 100 }, 26);
    const angleDeg = (m: number) => {
      const order = r.orders.find((o) => o.m === m);
      return (Math.atan(((order?.xMm ?? NaN) - r.zeroOrder.xMm) / 100) * 180) / Math.PI;
    };
    expect(Math.abs(angleDeg(1) - 3.629)).toBeLessThan(0.005);
    expect(Math.abs(angleDeg(2) - 7.273)).toBeLessThan(0.005);
  });
  it('UP ex. 4.4: a 0.020 mm, d 0.20 mm, 500 nm: order 10 is missing and named', () => {
    const r = example({ wavelengthNm: 500, separationUm: 200, widthUm: 20, distanceMm: 1000 }, 32);
    expect(Math.abs((r.envelopeZeroOrder ?? 0) - 10)).toBeLessThan(0.05);
    expect(r.findings.find((f) => f.check === 'missing-order')?.seen).toMatch(/^Order 10 is dark by design/);
  });
});

describe('what a person may choose', () => {
  const content = text(points({ seed: 5 }));
  const whole = measured(content);
  it('a region: only that part is fitted and drawn', () => {
    const part = measured(content, { region: { fromMm: -6, toMm: 5 } });
    expect(part.region).toEqual({ fromMm: -6, toMm: 5 });
    expect(part.curves.xMm.every((x) => x >= -6 && x <= 5)).toBe(true);
    expect(part.scan).toMatchObject({ fromMm: whole.scan.fromMm, points: whole.scan.points });
    expect(part.uSpacingMm).toBeGreaterThan(whole.uSpacingMm);
    expect(Math.abs(part.spacingMm - 1.915)).toBeLessThan(4 * part.uSpacingMm);
    expect(analyse(content, { region: { fromMm: 0, toMm: 1 } })).toMatchObject({
      ok: false,
      code: 'TOO_SMALL',
      fileAtFault: false,
    });
  });
  it('orders left out have no part in the fit and stay in sight', () => {
    const r = measured(content, { leaveOut: [1, -2] });
    expect(r.orders.filter((o) => !o.used).map((o) => o.m)).toEqual([-2, 1]);
    const out = r.curves.xMm.filter((_, i) => r.curves.left[i] === 1);
    const near = (m: number) => out.some((x) => Math.abs(x - ZERO_MM - m * 1.915) < 0.1);
    expect([near(1), near(-2), near(0)]).toEqual([true, true, false]);
    expect(r.uSpacingMm).toBeGreaterThan(whole.uSpacingMm);
  });
  it('the zero order: every number moves by as many', () => {
    const r = measured(content, { zeroShift: 1 });
    expect(Math.abs(r.zeroOrder.xMm - (ZERO_MM - 1.915))).toBeLessThan(0.02);
    expect(Math.abs(whole.zeroOrder.xMm - ZERO_MM)).toBeLessThan(0.02);
  });
});

describe('what is said about a scan', () => {
  const findings = (r: ScanResult) => Object.fromEntries(r.findings.map((f) => [f.check, f]));
  it('all four parts, nothing about a camera', () => {
    const r = measured(text(points({ detector: 1 })), { detectorMm: 1 });
    for (const f of r.findings)
      for (const part of [f.seen, f.size, f.done, f.remedy]) {
        expect(part).toMatch(/[.]$/);
        expect(part).not.toMatch(/frame|camera|pixel|px|\{/);
      }
    expect(Object.keys(findings(r))).toEqual(
      expect.arrayContaining(['sampling', 'detector', 'zero-order', 'region', 'pull', 'contrast', 'misfit']),
    );
    // sinc(1 / 1.915) = 0.608
    expect(findings(r).detector.seen).toContain('61 % of the contrast');
  });
  it('few points for a fringe is a look; enough of them is clear', () => {
    const few = measured(text(points({ step: 0.42, jitter: 0, span: 14 })));
    expect(findings(few).sampling.word).toBe('look');
    expect(findings(measured(text(points({})))).sampling.word).toBe('clear');
  });
  it('a detector stated wider than it is, is a look', () => {
    const content = text(points({ detector: 0.3, visibility: 0.95 }));
    expect(findings(measured(content, { detectorMm: 0.3 })).detector.word).toBe('clear');
    const wide = findings(measured(content, { detectorMm: 1.1 })).detector;
    expect([wide.word, wide.seen]).toEqual(['look', expect.stringMatching(/narrower than stated/)]);
  });
  it('a lopsided region is a look', () => {
    const r = measured(text(points({})), { region: { fromMm: -3, toMm: 10 } });
    expect(findings(r).region.word).toBe('look');
  });
  it('a misfit is seen although the noise is taken from the scan itself', () => {
    const bent = points({ seed: 4 }).map(([x, y]): [number, number] => [
      x,
      Math.round(4000 + 9000 * Math.max(0, (y - 4000) / 9000) ** 0.6),
    ]);
    expect(findings(measured(text(bent))).misfit.word).not.toBe('clear');
    expect(findings(measured(text(points({ seed: 4 })))).misfit.word).toBe('clear');
  });
});

describe('refusals with the scan’s own sentences', () => {
  const code = (content: string, options?: Partial<ScanOptions>) => analyse(content, options).code;
  it('one slit, no fringes, too few of them, too coarse', () => {
    expect(code(text(points({ slits: 1, spacing: 1.2 })))).toBe('ONE_SLIT');
    const random = uniform(7);
    const noise = Array.from({ length: 200 }, (_, i): [number, number] => [i / 10, 1000 + 60 * random()]);
    expect(code(text(noise))).toBe('NO_FRINGES');
    expect(code(text(points({ step: 0.03, jitter: 0 })), { region: { fromMm: -1.2, toMm: 2 } })).toBe(
      'TOO_FEW_FRINGES',
    );
    const answer = analyse(text(noise));
    expect(answer).toMatchObject({ ok: false, fileAtFault: false, picture: null });
    expect(answer.message).not.toMatch(/frame|camera/);
    expect(answer).toHaveProperty('scan.points', 200);
  });
  it('files that are no scan are at fault themselves', () => {
    const at = (content: string) => {
      const answer = analyse(content);
      return answer.ok ? 'measured' : `${answer.code} ${answer.fileAtFault} ${answer.message}`;
    };
    expect(at('1 2\n2 3\n')).toMatch(/^TOO_SMALL true .*2 positions.*at least 24/);
    expect(at('a\nb\nc\nd\n')).toMatch(/^BROKEN_FILE true No line/);
    expect(at('')).toMatch(/^BROKEN_FILE true No line/);
    const broken = text(points({})).split('\n');
    broken[50] = '0.5';
    expect(at(broken.join('\n'))).toMatch(/^BROKEN_FILE true Line 51 does not hold two numbers/);
    const three = points({}).map(([x, y], i) => `${i},${x.toFixed(2)},${y}`);
    expect(at(three.join('\n'))).toMatch(/holds 3 columns instead of two/);
    expect(analyseScan(new Uint8Array([1, 0, 2, 0, 200]), FAR, { detectorMm: null })).toMatchObject({
      code: 'BROKEN_FILE',
      fileAtFault: true,
    });
  });
});
