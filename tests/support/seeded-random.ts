/** Repeatable random numbers for tests. */
export interface SeededRandom {
  /** Uniform in [low, high). */
  uniform: (low: number, high: number) => number;
  /** Normal with mean 0. */
  normal: (sigma: number) => number;
}

export function seededRandom(seed: number): SeededRandom {
  let state = seed >>> 0;
  const next = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), 1 | state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return {
    uniform: (low, high) => low + (high - low) * next(),
    normal: (sigma) =>
      sigma * Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
  };
}
