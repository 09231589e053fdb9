/**
 * Random numbers that are an argument: a generator is made from a text of hexadecimal digits (a digest or a frame's
 * hash), so that whoever has the reading draws the same numbers again.
 */
export interface Random {
  /** Uniform in (0, 1), 2⁻³³ away from both ends at least. */
  uniform(): number;
  /** Normal with mean 0 and standard deviation 1. */
  normal(): number;
}

/**
 * xoshiro128** seeded with the first 32 hexadecimal digits of a hash.
 * Source: D. Blackman, S. Vigna, "Scrambled linear pseudorandom number generators", ACM TOMS 47 (2021), 36.
 * Normal numbers by the polar method: G. Marsaglia, T. A. Bray, SIAM Review 6 (1964), 260.
 * Throws RangeError for fewer than 32 hexadecimal digits.
 */
export function randomFrom(hex: string): Random {
  if (!/^[0-9a-f]{32}/i.test(hex)) throw new RangeError('A seed needs 32 hexadecimal digits.');
  const state = new Uint32Array(4);
  for (let i = 0; i < 4; i += 1) state[i] = parseInt(hex.slice(8 * i, 8 * i + 8), 16);
  // The one state this generator cannot leave.
  if (state.every((word) => word === 0)) state[0] = 1;
  const next = (): number => {
    const five = Math.imul(state[1], 5);
    const result = Math.imul((five << 7) | (five >>> 25), 9) >>> 0;
    const t = state[1] << 9;
    state[2] ^= state[0];
    state[3] ^= state[1];
    state[1] ^= state[2];
    state[0] ^= state[3];
    state[2] ^= t;
    state[3] = (state[3] << 11) | (state[3] >>> 21);
    return result;
  };
  const uniform = () => (next() + 0.5) / 4294967296;
  let spare: number | null = null;
  const normal = (): number => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    for (;;) {
      const x = 2 * uniform() - 1;
      const y = 2 * uniform() - 1;
      const s = x * x + y * y;
      if (s >= 1 || s === 0) continue;
      const factor = Math.sqrt((-2 * Math.log(s)) / s);
      spare = y * factor;
      return x * factor;
    }
  };
  // A hash's words differ little where its owner wants them to; a few rounds spread them.
  for (let i = 0; i < 16; i += 1) next();
  return { uniform, normal };
}

/**
 * Gamma with shape a > 0 and scale 1. Source: G. Marsaglia, W. W. Tsang, ACM TOMS 26 (2000), 363; below 1 by
 * Γ(a) = Γ(a + 1)·U^(1/a).
 */
export function drawGamma(random: Random, a: number): number {
  if (a < 1) return drawGamma(random, a + 1) * Math.pow(random.uniform(), 1 / a);
  const d = a - 1 / 3;
  const c = 1 / Math.sqrt(9 * d);
  for (;;) {
    const x = random.normal();
    const v = (1 + c * x) ** 3;
    if (v <= 0) continue;
    if (Math.log(random.uniform()) < 0.5 * x * x + d - d * v + d * Math.log(v)) return d * v;
  }
}

/** Student's t with ν > 0 degrees of freedom, also fractional: Z / √(χ²(ν)/ν). */
export function drawStudent(random: Random, dof: number): number {
  return random.normal() / Math.sqrt((2 * drawGamma(random, dof / 2)) / dof);
}
