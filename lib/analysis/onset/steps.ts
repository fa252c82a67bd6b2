/**
 * The step of the player between two runs, read on the bands that are free of loss.
 *
 * A step error is common to all bands of a run, and so is a broadband loss: they can be told apart only
 * where some bands are free and others limited (docs/onset-notes.md section 4).
 */
import { lossOf, type LevelGroup } from "../compression";

/** Nominal steps are good to this, dB, unless the bands say better. */
export const NOMINAL_STEP_SIGMA_DB = 0.05;
/** What a step read on free bands is good to at best, dB. */
const READ_STEP_SIGMA_DB = 0.012;
/** A common offset from here is said. */
const TOLD_OFFSET_DB = 0.05;
/** Beyond this an offset common to all bands is a finding of its own, no step. */
const LARGEST_STEP_ERROR_DB = 0.5;
/** Beyond this a free cluster is not taken as the step error. */
const LARGEST_TAKEN_DB = 0.2;
const CLUSTER_WIDTH_DB = 0.06;
const QUIET_SIGMA_DB = 0.05;
const LIMITED_OVER_CLUSTER_DB = 0.5;
const FEWEST_BANDS = 4;
const SMALLEST_SHARE = 0.3;
const ALL_SHARE = 0.9;
/** So many bands at zero at once are no coincidence of a step error with a loss. */
const MOST_SHARE = 0.5;

export interface StepReading {
  group: LevelGroup;
  /** Loss common to the least compressed tight cluster of bands, dB; NaN where there is none. */
  offsetDb: number;
  /** Share of the readable bands in the cluster. */
  share: number;
  /** Other bands are limited in this run, so the cluster shows the step itself. */
  separable: boolean;
  /** dB taken as error of the step by the onset; 0 where nothing is. Levels and losses are never changed. */
  takenDb: number;
  sigmaDb: number;
  /** The offset is to be said. */
  told: boolean;
}

/** Reads the step of each group against the reference; the reference's own reading is zero. */
export function readSteps(
  groups: readonly LevelGroup[],
  reference: LevelGroup,
  bands: number,
): StepReading[] {
  return groups.map((group) =>
    group === reference ? ownStep(group) : readStep(group, reference, bands),
  );
}

const ownStep = (group: LevelGroup): StepReading => ({
  group,
  offsetDb: 0,
  share: 1,
  separable: false,
  takenDb: 0,
  sigmaDb: READ_STEP_SIGMA_DB,
  told: false,
});

function readStep(group: LevelGroup, reference: LevelGroup, bands: number): StepReading {
  const losses = Array.from({ length: bands }, (_, b) => lossOf(group, reference, b));
  const quiet = losses
    .filter(({ lossDb, sigmaDb }) => Number.isFinite(lossDb) && sigmaDb <= QUIET_SIGMA_DB)
    .toSorted((a, b) => a.lossDb - b.lossDb);
  const cluster = leastCompressedCluster(quiet.map(({ lossDb }) => lossDb));
  if (!cluster) {
    return { ...ownStep(group), offsetDb: Number.NaN, share: 0, sigmaDb: NOMINAL_STEP_SIGMA_DB };
  }
  const offsetDb = cluster[Math.floor(cluster.length / 2)] ?? 0;
  const share = cluster.length / quiet.length;
  const limited = losses.filter(
    ({ lossDb, sigmaDb }) => lossDb - offsetDb > Math.max(LIMITED_OVER_CLUSTER_DB, 4 * sigmaDb),
  ).length;
  const separable = limited >= 2;
  const size = Math.abs(offsetDb);
  const told =
    size >= TOLD_OFFSET_DB && size <= LARGEST_STEP_ERROR_DB && (separable || share >= ALL_SHARE);
  const exact = size < TOLD_OFFSET_DB && (separable || share >= MOST_SHARE);
  const taken = separable && size >= TOLD_OFFSET_DB && size <= LARGEST_TAKEN_DB;
  let sigmaDb = NOMINAL_STEP_SIGMA_DB;
  if (taken) sigmaDb = 2 * READ_STEP_SIGMA_DB;
  else if (exact)
    sigmaDb = Math.min(Math.hypot(READ_STEP_SIGMA_DB, offsetDb), NOMINAL_STEP_SIGMA_DB);
  return { group, offsetDb, share, separable, takenDb: taken ? offsetDb : 0, sigmaDb, told };
}

/**
 * The lowest window of CLUSTER_WIDTH_DB that holds enough of the bands.
 *
 * @param sorted losses, ascending.
 */
function leastCompressedCluster(sorted: number[]): number[] | null {
  const needed = Math.max(FEWEST_BANDS, Math.ceil(SMALLEST_SHARE * sorted.length));
  for (let from = 0; from + needed <= sorted.length; from++) {
    const start = sorted[from] ?? 0;
    if ((sorted[from + needed - 1] ?? Infinity) - start > CLUSTER_WIDTH_DB) continue;
    // Grow to the fullest window that starts close by: the first one to qualify may begin with a stray band.
    const windows = sorted
      .slice(from)
      .filter((value) => value - start <= CLUSTER_WIDTH_DB)
      .map((low) => sorted.filter((value) => value >= low && value - low <= CLUSTER_WIDTH_DB));
    return windows.reduce((best, window) => (window.length > best.length ? window : best));
  }
  return null;
}
