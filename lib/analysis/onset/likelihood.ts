/** How well each law of a plan explains one band's gains, the common gain profiled out. */
import { ONSET_STEP_DB, type OnsetPlan } from "./onset-plan";

/** One band over the levels of a plan. */
export interface BandGains {
  /** [levels] level minus drive, dB; NaN where the band has no value at that level. */
  gainDb: Float64Array;
  /** [levels] standard uncertainty of noise and repeats, dB. */
  sigmaDb: Float64Array;
  /** [levels] standard uncertainty of the step to this level, dB; common to all bands. */
  stepSigmaDb: Float64Array;
}

/** Laws are followed to this much, dB, and this share of the loss. */
const LAW_ERROR_DB = 0.02;
const LAW_ERROR_SHARE = 0.02;
/** The lowest run is chosen to be free: onsets below it grow unlikely by e per so many dB. Runs that say otherwise win. */
const BELOW_LOWEST_DECAY_DB = 8;
/** Likelihoods this far below the best do not count: a millionth. */
export const NEGLIGIBLE_LOG = -14;

export interface OnsetLikelihood {
  plan: OnsetPlan;
  /** First column looked at, and how many. */
  firstColumn: number;
  columns: number;
  /** [shapes * columns] -chi^2/2, and less below the lowest run. */
  logLikelihood: Float64Array;
  /** [shapes] largest of its row. */
  shapeBest: Float64Array;
  /** [levels] weights 1/sigma^2; 0 where there is no value. */
  weights: Float64Array;
  gainDb: Float64Array;
  /** Uncertainty of the profiled gain, dB. */
  gainSigmaDb: number;
}

/**
 * Likelihood of every shape at every onset from `lowDb` to `highDb`.
 *
 * @param gains one band, on the levels of the plan; not modified. At least two finite gains.
 * @param lossDb [levels] measured loss, dB, that scales the tolerance of a law; NaN as in the gains.
 * @see docs/onset-notes.md section 3
 */
export function computeLikelihood(
  plan: OnsetPlan,
  gains: BandGains,
  lossDb: Float64Array,
  lowDb: number,
  highDb: number,
): OnsetLikelihood {
  const levels = plan.drivesDb.length;
  const weights = new Float64Array(levels);
  const gainDb = new Float64Array(levels);
  const base = gains.gainDb.find((gain) => Number.isFinite(gain)) ?? 0;
  let weightSum = 0;
  let first = 0;
  let second = 0;
  for (let k = 0; k < levels; k++) {
    const gain = gains.gainDb[k] ?? Number.NaN;
    if (!Number.isFinite(gain)) continue;
    const law = LAW_ERROR_DB + LAW_ERROR_SHARE * Math.max(lossDb[k] ?? 0, 0);
    const weight = 1 / ((gains.sigmaDb[k] ?? 0) ** 2 + (gains.stepSigmaDb[k] ?? 0) ** 2 + law ** 2);
    weights[k] = weight;
    gainDb[k] = gain - base;
    weightSum += weight;
    first += weight * (gain - base);
    second += weight * (gain - base) ** 2;
  }
  const clampColumn = (db: number): number =>
    Math.min(Math.max(Math.round((db - plan.firstOnsetDb) / ONSET_STEP_DB), 0), plan.columns - 1);
  const firstColumn = clampColumn(lowDb);
  const columns = clampColumn(highDb) - firstColumn + 1;
  const lowestDb = plan.drivesDb[weights.findIndex((weight) => weight > 0)] ?? 0;
  const { kernel } = plan.workspace;
  const { sums, squares, places, logs } = plan.rows;
  const count = columns + (columns % 2);
  // Rows are even; what is over never counts.
  places.fill(-Infinity, columns);
  for (let i = 0; i < columns; i++) {
    const onsetDb = plan.firstOnsetDb + (firstColumn + i) * ONSET_STEP_DB;
    places[i] = -Math.max(0, lowestDb - onsetDb) / BELOW_LOWEST_DECAY_DB;
  }
  const weigh = (j: number): number => {
    kernel.startSums(sums.byteOffset, squares.byteOffset, count, first, second);
    for (let k = 0; k < levels; k++) {
      const { profile, at } = plan.levels[k]!;
      // Later columns hold onsets so far above this level that nothing is lost there.
      const end = Math.min(columns, profile.count[j]! - at - firstColumn);
      if (weights[k] === 0 || end <= 0) continue;
      kernel.addLosses(
        profile.lossDb.byteOffset + 8 * (j * plan.profileLength + at + firstColumn),
        sums.byteOffset,
        squares.byteOffset,
        end + (end % 2),
        weights[k]!,
        2 * gainDb[k]!,
      );
    }
    return kernel.closeSums(
      sums.byteOffset,
      squares.byteOffset,
      places.byteOffset,
      logs.byteOffset,
      count,
      weightSum,
    );
  };
  const logLikelihood = new Float64Array(plan.shapes.length * columns);
  const shapeBest = new Float64Array(plan.shapes.length);
  const row = logs.subarray(0, columns);
  for (let j = 0; j < plan.shapes.length; j++) {
    shapeBest[j] = weigh(j);
    logLikelihood.set(row, j * columns);
  }
  return {
    plan,
    firstColumn,
    columns,
    logLikelihood,
    shapeBest,
    weights,
    gainDb: gains.gainDb,
    gainSigmaDb: Math.sqrt(1 / weightSum),
  };
}
