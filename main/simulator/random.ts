/** Seeded random numbers, so that a simulated run can be had again. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Standard normal (Box & Muller). */
  normal(): number;
}

/** A 32-bit generator with an additive state and a multiply-xorshift output. */
export const createRandom = (seed: number): Random => {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  };
  return {
    uniform,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
};
