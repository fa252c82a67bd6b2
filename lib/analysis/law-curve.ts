/** The median law of a band as a curve, for the input/output figure. */
import type { OnsetPosterior } from "./onset/posterior";

const STEP_DB = 1;
const LAW_STRIDE = 6;

/** Expected and measured level along the law, dB; both on the scale of `gainDb` plus drive. */
export interface LawCurve {
  expectedDb: number[];
  measuredDb: number[];
}

/**
 * @param posterior null draws the linear law.
 * @param gainDb linear gain of the band on the scale that is drawn, dB.
 */
export function drawLaw(
  posterior: OnsetPosterior | null,
  gainDb: number,
  fromDriveDb: number,
  toDriveDb: number,
): LawCurve {
  const steps = Math.max(1, Math.round((toDriveDb - fromDriveDb) / STEP_DB));
  const drives = Array.from(
    { length: steps + 1 },
    (_, i) => fromDriveDb + (i * (toDriveDb - fromDriveDb)) / steps,
  );
  const laws = posterior?.samples.filter((_, i) => i % LAW_STRIDE === 1) ?? [];
  return {
    expectedDb: drives.map((drive) => gainDb + drive),
    measuredDb: drives.map((drive) => {
      if (laws.length === 0) return gainDb + drive;
      const losses = Float64Array.from(laws, ({ shape, onsetDb }) =>
        shape.lossDb(drive - onsetDb),
      ).sort();
      return gainDb + drive - (losses[losses.length >> 1] ?? 0);
    }),
  };
}
