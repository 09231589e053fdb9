import type { Picture } from '@/lib/imaging/picture';
import { measureScale } from '@/lib/measure/measure-scale';
import { random } from '@/scripts/simulator/random';

/** A 16-bit picture of light(x, y), averaged over 4 × 4 points of each pixel, with noise of 0.4 % of full scale. */
function picture(
  widthPx: number,
  heightPx: number,
  light: (x: number, y: number) => number,
  seed = 1,
): Picture {
  const rnd = random(seed);
  const points = [-0.375, -0.125, 0.125, 0.375];
  const samples = new Uint16Array(widthPx * heightPx);
  for (let y = 0; y < heightPx; y += 1) {
    for (let x = 0; x < widthPx; x += 1) {
      let sum = 0;
      for (const dy of points) for (const dx of points) sum += light(x + 0.5 + dx, y + 0.5 + dy) / 16;
      samples[y * widthPx + x] = Math.min(65_535, Math.max(0, Math.round(50_000 * sum + 250 * rnd.normal())));
    }
  }
  const table = Float32Array.from({ length: 65_536 }, (_, code) => code / 65_535);
  return {
    widthPx,
    heightPx,
    samples,
    bits: 16,
    light: table,
    clipCode: 70_000,
    floorCode: -1,
    source: {
      format: 'test',
      channel: 'grey',
      tone: 'linear',
      toneBecause: '',
      colour: false,
      jpegQuality: null,
      chromaSubsampling: null,
      lossy: false,
    },
  };
}

const edge = (distance: number, half: number): number => 1 / (1 + Math.exp((distance - half) / 0.6));

/** Coordinates in pitches about the middle, turned by `deg` and seen obliquely: z = 1 − q·x. */
function plane(width: number, height: number, pitch: number, deg: number, q = 0) {
  const c = Math.cos((deg * Math.PI) / 180);
  const s = Math.sin((deg * Math.PI) / 180);
  return (x: number, y: number): [number, number] => {
    const X = x - width / 2;
    const Y = y - height / 2;
    const z = 1 - q * X;
    return [(X * c + Y * s) / z / pitch, (-X * s + Y * c) / z / pitch];
  };
}

/** Ticks of three lengths on a light ruler before a dark table. */
function ruler(width: number, height: number, pitch: number, deg: number): Picture {
  const at = plane(width, height, pitch, deg);
  return picture(width, height, (x, y) => {
    const [u, w] = at(x, y);
    const v = w * pitch;
    if (Math.abs(v) > 0.32 * height) return 0.3;
    const n = Math.round(u);
    const length = (n % 10 === 0 ? 0.25 : n % 5 === 0 ? 0.19 : 0.13) * height;
    const onTick = v < -0.32 * height + length;
    return onTick ? 0.75 - 0.6 * edge(Math.abs(u - n) * pitch, 1.3) : 0.75;
  });
}

function grid(width: number, height: number, pitch: number, deg: number, q: number): Picture {
  const at = plane(width, height, pitch, deg, q);
  return picture(width, height, (x, y) => {
    const [i, j] = at(x, y);
    return 0.8 - 0.65 * edge(Math.min(Math.abs(i - Math.round(i)), Math.abs(j - Math.round(j))) * pitch, 1.2);
  });
}

function chessboard(width: number, height: number, pitch: number, deg: number, q: number): Picture {
  const at = plane(width, height, pitch, deg, q);
  return picture(width, height, (x, y) => {
    const [i, j] = at(x, y);
    return 0.45 + 0.35 * Math.tanh(Math.sin(Math.PI * i) * Math.sin(Math.PI * j) * pitch * 0.9);
  });
}

// Simulated truth. Five standard uncertainties hold all but one in a million for a normal error; the floor of
// 2e-5 is the residue of the corner finder's symmetric window.
const close = (answer: { pitchPx: number; uPitchPx: number }, truth: number): number =>
  Math.abs(answer.pitchPx - truth) / Math.max(5 * answer.uPitchPx, 2e-5 * truth);

describe('pixel scale from a photographed scale', () => {
  test.each([
    [17.2156, 0],
    [17.2156, 7],
    [11.3, -3],
    [16.2, 33],
    [24.77, 88],
  ])('ruler with a pitch of %d px at %d°', (pitch, deg) => {
    const answer = measureScale(ruler(900, 700, pitch, deg), 'lines', 1, 1e-4);
    expect(close(answer, pitch)).toBeLessThan(1);
    expect(Math.abs(answer.angleDeg - deg)).toBeLessThan(0.15);
    expect(answer.scaleUmPerPx).toBeCloseTo(1000 / answer.pitchPx, 9);
    // The scale's own certificate is part of the uncertainty.
    expect(answer.uScaleUmPerPx / answer.scaleUmPerPx).toBeGreaterThanOrEqual(1e-4);
    expect(answer.largestMisfitPx).toBeLessThan(0.3);
  });

  test.each([
    ['grid', 40.3, 6, 0],
    ['grid', 25.7, -12, 8e-5],
    ['chessboard', 40.3, 6, 0],
    ['chessboard', 33.2, 3, 1.2e-4],
  ] as const)('%s of %d px at %d° seen with q = %d', (kind, pitch, deg, q) => {
    const make = kind === 'grid' ? grid : chessboard;
    const answer = measureScale(make(760, 520, pitch, deg, q), kind, 2, 0);
    expect(close(answer, pitch)).toBeLessThan(1);
    expect(answer.angleDeg).toBeCloseTo(deg, 1);
    // Seen with z = 1 − q·x the pitch changes by 1/(1 + q·X)² over the picture's width.
    const half = 380;
    const expected = ((1 - q * half) / (1 + q * half)) ** 2 - 1;
    expect(answer.changeAcross ?? 0).toBeCloseTo(expected, 2);
    expect(answer.distortion).toBeNull();
    expect(answer.scaleUmPerPx).toBeCloseTo(2000 / pitch, 1);
  });

  test('a picture without a scale is refused with a sentence', () => {
    const rnd = random(5);
    const noise = picture(400, 300, () => 0.5 + 0.1 * rnd.normal());
    for (const kind of ['lines', 'grid', 'chessboard'] as const) {
      expect(() => measureScale(noise, kind, 1, 0)).toThrow(/was found in this picture/);
    }
  });
});
