/** Linear parts of a virtual loudspeaker: second-order sections at one fixed rate. */

/** Something that sound goes through, block by block; keeps its state between blocks. */
export interface Stage {
  /** Changes the block in place. */
  process(block: Float64Array): void;
}

interface Section {
  b0: number;
  b1: number;
  b2: number;
  a1: number;
  a2: number;
}

/** One section, transposed direct form II. */
export class Biquad implements Stage {
  private z1 = 0;
  private z2 = 0;

  constructor(private readonly section: Section) {}

  process(block: Float64Array): void {
    const { b0, b1, b2, a1, a2 } = this.section;
    let { z1, z2 } = this;
    for (let n = 0; n < block.length; n += 1) {
      const x = block[n] ?? 0;
      const y = b0 * x + z1;
      z1 = b1 * x - a1 * y + z2;
      z2 = b2 * x - a2 * y;
      block[n] = y;
    }
    this.z1 = z1;
    this.z2 = z2;
  }
}

/** Bilinear transform of a second-order prototype, pre-warped at its own frequency. */
function toSection(
  kind: "low-pass" | "high-pass" | "peak",
  frequencyHz: number,
  q: number,
  rateHz: number,
  gainDb = 0,
): Section {
  const w = (2 * Math.PI * frequencyHz) / rateHz;
  const cos = Math.cos(w);
  const alpha = Math.sin(w) / (2 * q);
  const root = 10 ** (gainDb / 40);
  const a0 = kind === "peak" ? 1 + alpha / root : 1 + alpha;
  const a2 = kind === "peak" ? 1 - alpha / root : 1 - alpha;
  const prototypes: Record<typeof kind, [number, number, number]> = {
    "low-pass": [(1 - cos) / 2, 1 - cos, (1 - cos) / 2],
    "high-pass": [(1 + cos) / 2, -1 - cos, (1 + cos) / 2],
    peak: [1 + alpha * root, -2 * cos, 1 - alpha * root],
  };
  const [b0, b1, b2] = prototypes[kind];
  return { b0: b0 / a0, b1: b1 / a0, b2: b2 / a0, a1: (-2 * cos) / a0, a2: a2 / a0 };
}

/** A bump or dip of the response. */
export interface Peak {
  frequencyHz: number;
  q: number;
  gainDb: number;
}

export const createPeak = (peak: Peak, rateHz: number): Stage =>
  new Biquad(toSection("peak", peak.frequencyHz, peak.q, rateHz, peak.gainDb));

/** A crossover half of fourth order: two Butterworth sections; low and high add up to an all-pass. */
export function createCrossoverHalf(
  kind: "low-pass" | "high-pass",
  frequencyHz: number,
  rateHz: number,
): Stage {
  const section = toSection(kind, frequencyHz, Math.SQRT1_2, rateHz);
  return new Chain([new Biquad(section), new Biquad(section)]);
}

/** One stage after the other. */
export class Chain implements Stage {
  constructor(private readonly stages: readonly Stage[]) {}

  process(block: Float64Array): void {
    for (const stage of this.stages) stage.process(block);
  }
}

/** Several paths from one input, added up. */
export class Parallel implements Stage {
  private input = new Float64Array(0);
  private path = new Float64Array(0);

  constructor(private readonly paths: readonly Stage[]) {}

  process(block: Float64Array): void {
    if (this.input.length !== block.length) {
      this.input = new Float64Array(block.length);
      this.path = new Float64Array(block.length);
    }
    this.input.set(block);
    block.fill(0);
    for (const stage of this.paths) {
      this.path.set(this.input);
      stage.process(this.path);
      for (let n = 0; n < block.length; n += 1) block[n] = (block[n] ?? 0) + (this.path[n] ?? 0);
    }
  }
}
