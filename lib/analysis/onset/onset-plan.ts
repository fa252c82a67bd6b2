/** Tables of the onset's posterior: they depend on the levels of a series alone and serve all its bands. */
import { AnalysisError } from "../../errors/app-error";
import { buildShapes, type Family, type Shape } from "./shapes";

/** Grid step of the onset, dB. */
export const ONSET_STEP_DB = 0.1;
const BELOW_TOP_DB = 34;
const BELOW_LOWEST_DB = 10;
const ABOVE_TOP_DB = 1;

export interface LossProfile {
  /** [shapes * profileLength] */
  lossDb: Float64Array;
  /** [shapes] first index of a row that is not zero. */
  start: Int32Array;
}

export interface OnsetPlan {
  /** [levels] drives, dB, ascending. */
  drivesDb: Float64Array;
  shapes: Shape[];
  /** Onset of grid column i: firstOnsetDb + i * ONSET_STEP_DB. */
  firstOnsetDb: number;
  columns: number;
  /**
   * [levels] a loss curve per shape on the grid's step, and where a level stands in it: the loss of shape j with its
   * onset in column i is `profile.lossDb[j * profileLength + at - i]`. Levels a whole number of steps apart share a profile.
   */
  levels: { profile: LossProfile; at: number }[];
  profileLength: number;
  /** Index of the first shape of each family, and one past its last. */
  range: Record<Family, readonly [number, number]>;
}

/**
 * Builds the tables for a set of levels.
 *
 * @param drivesDb [levels] drives of the runs, dB, ascending, at least two, each finite.
 * @throws AnalysisError "analysis.argument"
 */
export function planOnset(drivesDb: readonly number[]): OnsetPlan {
  const lowest = drivesDb[0];
  const top = drivesDb.at(-1);
  const ascending = drivesDb.every(
    (drive, i) => Number.isFinite(drive) && (i === 0 || drive > (drivesDb[i - 1] ?? 0)),
  );
  if (lowest === undefined || top === undefined || drivesDb.length < 2 || !ascending) {
    throw new AnalysisError(
      "analysis.argument",
      "an onset needs two or more drives in ascending order",
      {
        details: { drivesDb: [...drivesDb] },
      },
    );
  }
  const shapes = buildShapes();
  const firstOnsetDb = Math.min(top - BELOW_TOP_DB, lowest - BELOW_LOWEST_DB);
  const columns = Math.round((top + ABOVE_TOP_DB - firstOnsetDb) / ONSET_STEP_DB) + 1;
  // Index m of a profile is a drive m - (columns - 1) steps above the onset, less the phase of the level on the grid.
  const span = Math.ceil((top - firstOnsetDb) / ONSET_STEP_DB) + 1;
  const profileLength = span + columns;
  const profiles = new Map<number, LossProfile>();
  const levels = drivesDb.map((drive) => {
    const steps = (drive - firstOnsetDb) / ONSET_STEP_DB;
    const whole = Math.floor(steps + 1e-6);
    const phase = Math.max(0, Math.round((steps - whole) * 1e6) / 1e6);
    const known = profiles.get(phase);
    const profile = known ?? profileOf(shapes, profileLength, columns, phase);
    profiles.set(phase, profile);
    return { profile, at: whole + columns - 1 };
  });
  const rangeOf = (family: Family): readonly [number, number] => {
    const from = shapes.findIndex((shape) => shape.family === family);
    return [from, from + shapes.filter((shape) => shape.family === family).length];
  };
  return {
    drivesDb: Float64Array.from(drivesDb),
    shapes,
    firstOnsetDb,
    columns,
    levels,
    profileLength,
    range: {
      "gain riding": rangeOf("gain riding"),
      "two paths": rangeOf("two paths"),
      overload: rangeOf("overload"),
    },
  };
}

function profileOf(
  shapes: readonly Shape[],
  length: number,
  columns: number,
  phase: number,
): LossProfile {
  const table = new Float64Array(shapes.length * length);
  const start = new Int32Array(shapes.length);
  shapes.forEach((shape, j) => {
    // From the top down: below its first zero a loss curve stays zero.
    for (let m = length - 1; m >= 0; m--) {
      const lossDb = shape.lossDb((m - (columns - 1) + phase) * ONSET_STEP_DB);
      if (lossDb === 0) {
        start[j] = m + 1;
        break;
      }
      table[j * length + m] = lossDb;
    }
  });
  return { lossDb: table, start };
}
