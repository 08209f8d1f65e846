/** Seeded random numbers, so that every simulated capture can be made again bit for bit. */
export interface Random {
  /** Even in [0, 1). */
  uniform(): number;
  between(low: number, high: number): number;
  /** Normal with mean 0 and deviation 1. */
  normal(): number;
  pick<T>(from: readonly T[]): T;
}

/** Mulberry32 (public domain generator) with Box–Muller for the normal deviates. */
export function seeded(seed: number): Random {
  let state = seed >>> 0;
  let spare: number | null = null;
  const uniform = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
  const normal = () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
  return {
    uniform,
    between: (low, high) => low + (high - low) * uniform(),
    normal,
    pick: (from) => from[Math.floor(uniform() * from.length)],
  };
}
