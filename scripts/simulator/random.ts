/** Seeded random numbers, so that every simulated frame can be made again from its seed. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
  /** Poisson with the given mean; exact below 60, normal with continuity above (relative error < 1e-3). */
  poisson(mean: number): number;
  between(low: number, high: number): number;
  integer(low: number, high: number): number;
}

/** xoshiro128** (Blackman and Vigna, 2018), state filled by splitmix32. */
export function random(seed: number): Random {
  let mix = seed >>> 0;
  const next32 = (): number => {
    mix = (mix + 0x9e3779b9) | 0;
    let z = mix ^ (mix >>> 16);
    z = Math.imul(z, 0x21f0aaad);
    z ^= z >>> 15;
    z = Math.imul(z, 0x735a2d97);
    return (z ^ (z >>> 15)) >>> 0;
  };
  let a = next32();
  let b = next32();
  let c = next32();
  let d = next32();
  const bits = (): number => {
    const x = Math.imul(b, 5);
    const result = Math.imul((x << 7) | (x >>> 25), 9);
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = (d << 11) | (d >>> 21);
    return result >>> 0;
  };
  let spare: number | null = null;
  const uniform = (): number => bits() / 4294967296;
  const normal = (): number => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    let x = 0;
    let y = 0;
    let r = 0;
    do {
      x = 2 * uniform() - 1;
      y = 2 * uniform() - 1;
      r = x * x + y * y;
    } while (r >= 1 || r === 0);
    const f = Math.sqrt((-2 * Math.log(r)) / r);
    spare = y * f;
    return x * f;
  };
  const poisson = (mean: number): number => {
    if (mean <= 0) return 0;
    if (mean > 60) return Math.max(0, Math.round(mean + Math.sqrt(mean) * normal()));
    const limit = Math.exp(-mean);
    let product = uniform();
    let count = 0;
    while (product > limit) {
      product *= uniform();
      count += 1;
    }
    return count;
  };
  return {
    uniform,
    normal,
    poisson,
    between: (low, high) => low + (high - low) * uniform(),
    integer: (low, high) => low + Math.floor((high - low + 1) * uniform()),
  };
}
