/** Broadband loss of a run and its largest local excess: an even loss is benign, a local one changes the timbre. */
import { lossOf, type LevelGroup } from "./compression";
import type { ThirdOctave } from "./types";

export interface LossShape {
  /** Mean loss over the valid bands, dB; NaN where none is. */
  broadbandDb: number;
  /** Largest loss over that mean, dB, and the band of it. */
  excessDb: number;
  excessHz: number;
}

/** Shape of the loss of `group` against `reference` (docs/domain.md section 5). */
export function shapeOf(
  group: LevelGroup,
  reference: LevelGroup,
  bands: readonly ThirdOctave[],
): LossShape {
  const losses = bands.flatMap(({ nominalHz }, b) => {
    const { lossDb } = lossOf(group, reference, b);
    return Number.isFinite(lossDb) ? [{ nominalHz, lossDb }] : [];
  });
  const first = losses[0];
  if (!first) return { broadbandDb: Number.NaN, excessDb: Number.NaN, excessHz: Number.NaN };
  const broadbandDb = losses.reduce((sum, { lossDb }) => sum + lossDb, 0) / losses.length;
  const most = losses.reduce((a, b) => (b.lossDb > a.lossDb ? b : a), first);
  return { broadbandDb, excessDb: most.lossDb - broadbandDb, excessHz: most.nominalHz };
}
