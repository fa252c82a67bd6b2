/** Seeded chance: the demo lab sounds the same on every machine. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
}

/** @param seed any text; the same text gives the same sequence. */
export function createRandom(seed: string): Random {
  let state = hash(seed);
  const uniform = (): number => {
    // A Weyl sequence through a multiplicative mixer, 32 bits.
    state = (state + 0x9e3779b9) | 0;
    let mixed = state ^ (state >>> 16);
    mixed = Math.imul(mixed, 0x21f0aaad);
    mixed ^= mixed >>> 15;
    mixed = Math.imul(mixed, 0x735a2d97);
    mixed ^= mixed >>> 15;
    return (mixed >>> 0) / 2 ** 32;
  };
  let spare: number | null = null;
  const normal = (): number => {
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
  return { uniform, normal };
}

function hash(text: string): number {
  let value = 0x811c9dc5;
  for (const character of text)
    value = Math.imul(value ^ (character.codePointAt(0) ?? 0), 0x01000193);
  return value;
}
