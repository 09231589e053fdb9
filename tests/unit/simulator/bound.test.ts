import { cramerRao } from '@/scripts/simulator/bound';
import { countsPerElectron, noiseVariance, PLAIN_CAMERA } from '@/scripts/simulator/camera';
import { random } from '@/scripts/simulator/random';
import { lightAt, PLAIN_SCENE, trueOrderPx, trueSpacingPx } from '@/scripts/simulator/scene';

/**
 * Monte Carlo check of the bound on a case with a closed form: many fringes under a flat envelope.
 * D. C. Rife and R. R. Boorstyn, IEEE Trans. Inf. Theory 20, 591 (1974), for a real tone in white noise:
 * var ω ≥ 24σ²/(A²N(N²−1)) with amplitude A, so u(Λ) = Λ²/(2π)·√var ω.
 */
describe('Cramér–Rao bound of the simulator', () => {
  test('tends to the bound of a tone when the envelope is flat and the noise white', () => {
    const scene = {
      ...PLAIN_SCENE,
      widthPx: 1000,
      heightPx: 4,
      zeroXPx: 500,
      zeroYPx: 2,
      widthUm: 0.5,
      visibility: 0.5,
      distanceMm: 5e5,
      scaleUmPerPx: 15.875e3,
    };
    // Read noise far above shot noise makes the noise white; the prior on s/L is tight.
    const camera = { ...PLAIN_CAMERA, peakElectrons: 1000, readElectrons: 500, peakShare: 0.5 };
    const bound = cramerRao(scene, camera, 1e-6);
    const sigma = Math.sqrt(noiseVariance(camera, 0));
    const amplitude = countsPerElectron(camera) * camera.peakElectrons * 0.5 * scene.visibility;
    const samples = scene.widthPx;
    const varOmega =
      (24 * sigma * sigma) / (amplitude * amplitude * samples * (samples * samples - 1) * scene.heightPx);
    const spacing = trueSpacingPx(scene);
    const expected = (spacing * spacing * Math.sqrt(varOmega)) / (2 * Math.PI);
    // Background slope, envelope and row brightness are unknown as well, which costs a few per cent.
    expect(bound.uSpacingPx / expected).toBeGreaterThan(0.99);
    expect(bound.uSpacingPx / expected).toBeLessThan(1.15);
  });

  test('a one-step estimator from the truth scatters by the bound, never by less', () => {
    // Spacing, zero order, brightness, background of a 1-D profile with known envelope; 2000 noisy copies.
    const scene = { ...PLAIN_SCENE, heightPx: 1, zeroYPx: 0.5 };
    const spacing = trueSpacingPx(scene);
    const f = (u: number, k: number, zero: number): number =>
      lightAt({ ...scene, wavelengthNm: scene.wavelengthNm * k }, u - zero);
    const rows = Array.from({ length: 512 }, (_, c) => {
      const u = 2 * c + 0.5 - scene.zeroXPx;
      return [
        (f(u, 1 + 1e-6, 0) - f(u, 1 - 1e-6, 0)) / (2e-6 * spacing),
        (f(u, 1, 1e-3) - f(u, 1, -1e-3)) / 2e-3,
        f(u, 1, 0),
        1,
      ];
    });
    const sigma = 0.02;
    const normal = rows[0].map((_, i) =>
      rows[0].map((_v, j) => rows.reduce((s, g) => s + g[i] * g[j], 0) / (sigma * sigma)),
    );
    const solve = (b: number[]): number[] => {
      const a = normal.map((line, i) => [...line, b[i]]);
      for (let p = 0; p < a.length; p += 1) {
        for (let i = 0; i < a.length; i += 1) {
          if (i === p) continue;
          const factor = a[i][p] / a[p][p];
          for (let j = 0; j < a[i].length; j += 1) a[i][j] -= factor * a[p][j];
        }
      }
      return a.map((line, i) => line[a.length] / line[i]);
    };
    const bound = Math.sqrt(solve([1, 0, 0, 0])[0]);
    const rnd = random(77);
    const trials = 2000;
    let sum = 0;
    for (let t = 0; t < trials; t += 1) {
      const noise = rows.map(() => sigma * rnd.normal());
      const b = rows[0].map((_, i) => rows.reduce((s, g, n) => s + g[i] * noise[n], 0) / (sigma * sigma));
      sum += solve(b)[0] ** 2;
    }
    const ratio = sum / trials / (bound * bound);
    // var/bound² of M normal values lies within 4·√(2/M) of 1 all but once in 16 000 runs.
    expect(Math.abs(ratio - 1)).toBeLessThan(4 * Math.sqrt(2 / trials));
  });

  test('geometry: orders stand where d·sinθ = mλ puts them', () => {
    // tan(asin t) = t·(1 + t²/2 + …) with t = λ/d, so X₁ − X₀ is wider than the spacing by ½(λ/d)²: 8e-5 here.
    const scene = { ...PLAIN_SCENE, separationUm: 50 };
    const excess = trueOrderPx(scene, 1) / trueSpacingPx(scene) - 1;
    expect(excess).toBeCloseTo(0.5 * (0.635 / 50) ** 2, 7);
  });
});
