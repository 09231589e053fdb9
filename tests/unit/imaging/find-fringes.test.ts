import { findFringes } from '@/lib/imaging/find-fringes';
import { planeAt, fineLevels, readTile } from '@/lib/imaging/fine-level';
import type { Picture } from '@/lib/imaging/picture';
import { reducePicture, withoutOutline } from '@/lib/imaging/pyramid';
import { histogram } from '@/lib/imaging/levels';

/** A picture of cos² fringes of a given spacing and angle under a Gaussian band, 8 bit, with seeded noise. */
function fringes(
  widthPx: number,
  heightPx: number,
  spacingPx: number,
  tiltDeg: number,
  band = { x: 0.5, y: 0.5, length: 1, height: 1 },
): Picture {
  const samples = new Uint8Array(widthPx * heightPx);
  const c = Math.cos((tiltDeg * Math.PI) / 180);
  const s = Math.sin((tiltDeg * Math.PI) / 180);
  let state = 12345;
  for (let y = 0; y < heightPx; y++) {
    for (let x = 0; x < widthPx; x++) {
      const dx = x + 0.5 - band.x * widthPx;
      const dy = y + 0.5 - band.y * heightPx;
      const u = dx * c + dy * s;
      const v = -dx * s + dy * c;
      const lit = Math.exp(-((u / (band.length * widthPx)) ** 2) - (v / (band.height * heightPx)) ** 2);
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      const noise = (state / 4294967296 - 0.5) * 6;
      samples[y * widthPx + x] = Math.round(
        10 + 100 * lit * (1 + 0.9 * Math.cos((2 * Math.PI * u) / spacingPx)) + noise,
      );
    }
  }
  return {
    widthPx,
    heightPx,
    samples,
    bits: 8,
    light: Float32Array.from({ length: 256 }, (_, i) => i / 255),
    clipCode: 256,
    floorCode: -1,
    source: {
      format: 'TIFF, 8 bit',
      channel: 'grey',
      tone: 'linear',
      toneBecause: 'test',
      colour: false,
      jpegQuality: null,
      chromaSubsampling: null,
      lossy: false,
    },
  };
}

describe('finding fringes', () => {
  // Pixels of the place found are enough for a fit when the spacing is right to 3 % (its basin is ±30 %).
  test.each([
    [1024, 768, 2.7, 4],
    [1024, 768, 9, -38],
    [1024, 768, 40, 88],
    [1800, 1000, 3.1, 12],
    [1800, 1000, 14, -3],
    [1800, 1000, 300, 0.5],
  ])('in %i × %i px with a spacing of %d px at %d°', (widthPx, heightPx, spacingPx, tiltDeg) => {
    const [first] = findFringes(fringes(widthPx, heightPx, spacingPx, tiltDeg), null);
    expect(Math.abs(first.spacingPx / spacingPx - 1)).toBeLessThan(0.03);
    expect(Math.abs(first.rect.angleDeg - tiltDeg)).toBeLessThan(1);
  });

  test('a small fine pattern in a large dark picture, in the place where it is', () => {
    const band = { x: 0.72, y: 0.3, length: 0.08, height: 0.03 };
    const [first] = findFringes(fringes(2000, 1100, 6.5, 1, band), null);
    expect(Math.abs(first.spacingPx / 6.5 - 1)).toBeLessThan(0.03);
    expect(Math.abs(first.rect.cxPx - 0.72 * 2000)).toBeLessThan(120);
    expect(Math.abs(first.rect.cyPx - 0.3 * 1100)).toBeLessThan(30);
  });
});

describe('levels of the pyramid', () => {
  const picture = fringes(301, 203, 23, 10);
  const mean = (x: number, y: number, factor: number): number => {
    let sum = 0;
    for (let j = 0; j < factor; j++)
      for (let i = 0; i < factor; i++)
        sum += picture.light[picture.samples[(y * factor + j) * picture.widthPx + x * factor + i]];
    return sum / factor ** 2;
  };

  test.each([1, 2, 3, 4, 8])('block averages by %i', (factor) => {
    const plane = reducePicture(picture, factor);
    expect([plane.widthPx, plane.heightPx]).toEqual([Math.floor(301 / factor), Math.floor(203 / factor)]);
    for (const [x, y] of [
      [0, 0],
      [7, 11],
      [plane.widthPx - 1, plane.heightPx - 1],
    ])
      expect(plane.data[y * plane.widthPx + x]).toBeCloseTo(mean(x, y, factor), 6);
  });

  test('an even width, whose samples are looked up in pairs, gives the same averages', () => {
    const even = { ...picture, widthPx: 300, samples: new Uint8Array(300 * 203) };
    for (let y = 0; y < 203; y++) even.samples.set(picture.samples.subarray(y * 301, y * 301 + 300), y * 300);
    const [a, b] = [reducePicture(even, 4), reducePicture(picture, 4)];
    expect(a.widthPx).toBe(b.widthPx);
    for (let i = 0; i < a.data.length; i += 13) expect(a.data[i]).toBeCloseTo(b.data[i], 6);
  });

  test('tiles and windows of a fine level hold the light of their place', () => {
    const [, level] = fineLevels(picture, 4);
    expect(level.factor).toBe(2);
    const tile = new Float32Array(8 * 8);
    readTile(level, 20, 30, 8, 8, tile, 8);
    expect(tile[8 * 3 + 5]).toBeCloseTo(mean(25, 33, 2), 6);
    expect(planeAt(level, 0, 0).data[33 * 150 + 25]).toBeCloseTo(mean(25, 33, 2), 6);

    const [large] = fineLevels(fringes(1800, 1000, 14, 0), 8);
    const window = planeAt(large, 1700, 100);
    expect(window.widthPx * window.heightPx).toBeLessThanOrEqual(1_400_000);
    expect(window.x0Px + window.widthPx).toBe(1800);
    expect(window.y0Px).toBe(0);
  });

  test('without its outline a pixel has lost the mean of the square about it, cut at the edges', () => {
    const plane = reducePicture(picture, 2);
    const r = 9;
    const clean = withoutOutline(plane, r);
    const { widthPx: w, heightPx: h } = plane;
    for (const [x, y] of [
      [0, 0],
      [w - 1, h - 1],
      [r, r],
      [w >> 1, h >> 1],
      [3, h - 2],
    ]) {
      let sum = 0;
      let n = 0;
      for (let j = Math.max(0, y - r); j <= Math.min(h - 1, y + r); j++)
        for (let i = Math.max(0, x - r); i <= Math.min(w - 1, x + r); i++, n++) sum += plane.data[j * w + i];
      expect(clean.data[y * w + x]).toBeCloseTo(plane.data[y * w + x] - sum / n, 5);
    }
  });

  test('a large picture is counted in part, every column having its turn', () => {
    const widthPx = 4000;
    const samples = new Uint8Array(widthPx * 2000);
    // One column in 4 is at code 9: its share must be seen although only part of the pixels is counted.
    for (let i = 0; i < samples.length; i++) samples[i] = i % 4 === 3 ? 9 : 1;
    const counts = histogram(samples, 8, widthPx);
    expect(counts[9] / (counts[9] + counts[1])).toBeCloseTo(0.25, 3);
    expect(counts[9] + counts[1]).toBeLessThan(samples.length / 2);
  });
});
