/** Tables of the onset's posterior: they depend on the levels of a series alone and serve all its bands. */
import { AnalysisError } from "../../errors/app-error";
import { createWorkspace, type Workspace } from "../kernel/kernel";
import { buildShapes, type Family, type Shape } from "./shapes";

/** Grid step of the onset, dB. */
export const ONSET_STEP_DB = 0.1;
const BELOW_TOP_DB = 34;
const BELOW_LOWEST_DB = 10;
const ABOVE_TOP_DB = 1;

export interface LossProfile {
  /** [shapes * profileLength] loss, from the highest drive over the onset down. */
  lossDb: Float64Array;
  /** [shapes] so many entries of a row are not zero: the first ones. */
  count: Int32Array;
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
   * onset in column i is `profile.lossDb[j * profileLength + at + i]`. Levels a whole number of steps apart share a profile.
   */
  levels: { profile: LossProfile; at: number }[];
  profileLength: number;
  /** Where the kernel works: the profiles lie there, and rows of columns, rounded up to an even number. */
  workspace: Workspace;
  rows: Record<"sums" | "squares" | "places" | "logs", Float64Array>;
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
  const phases = new Set(drivesDb.map((drive) => toPhase(drive, firstOnsetDb).phase));
  const rowLength = columns + (columns % 2);
  // One entry over, which the last row of columns may read and does not use.
  const workspace = createWorkspace(
    phases.size * (shapes.length * profileLength + 2) + 4 * rowLength,
  );
  const profiles = new Map<number, LossProfile>();
  const levels = drivesDb.map((drive) => {
    const { whole, phase } = toPhase(drive, firstOnsetDb);
    const known = profiles.get(phase);
    const profile =
      known ??
      profileOf(
        shapes,
        workspace.take(shapes.length * profileLength + 1),
        profileLength,
        columns,
        phase,
      );
    profiles.set(phase, profile);
    return { profile, at: profileLength - columns - whole };
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
    workspace,
    rows: {
      sums: workspace.take(rowLength),
      squares: workspace.take(rowLength),
      places: workspace.take(rowLength),
      logs: workspace.take(rowLength),
    },
    range: {
      "gain riding": rangeOf("gain riding"),
      "two paths": rangeOf("two paths"),
      overload: rangeOf("overload"),
    },
  };
}

/** Whole steps of a drive over the first onset, and what is left of a step. */
function toPhase(drive: number, firstOnsetDb: number): { whole: number; phase: number } {
  const steps = (drive - firstOnsetDb) / ONSET_STEP_DB;
  const whole = Math.floor(steps + 1e-6);
  return { whole, phase: Math.max(0, Math.round((steps - whole) * 1e6) / 1e6) };
}

/** @param table zeros, receives the rows. */
function profileOf(
  shapes: readonly Shape[],
  table: Float64Array,
  length: number,
  columns: number,
  phase: number,
): LossProfile {
  const count = new Int32Array(shapes.length).fill(length);
  shapes.forEach((shape, j) => {
    // From the top down: below its first zero a loss curve stays zero.
    for (let m = 0; m < length; m++) {
      const lossDb = shape.lossDb((length - columns - m + phase) * ONSET_STEP_DB);
      if (lossDb === 0) {
        count[j] = m;
        break;
      }
      table[j * length + m] = lossDb;
    }
  });
  return { lossDb: table, count };
}
