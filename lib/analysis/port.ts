/** Is the loss of a band that of a port: around the tuning, local, or gone with the port blocked? */
import { groupRuns, lossOf, type LevelGroup } from "./compression";
import type { BandOnset } from "./onset/find-onsets";
import { sayDb, sayHz, sayRun } from "./say";
import type { MeasuredSeries } from "./types";

/** About an octave round the tuning: this far to either side, octaves. */
const HALF_WINDOW_OCTAVES = 0.6;
/** Bands from this far above the tuning, octaves, over this many, must lose less than half. */
const ABOVE_FROM_OCTAVES = 1.2;
const ABOVE_TO_OCTAVES = 2.6;
const LOCAL_SHARE = 0.5;
const SUSPECT_TOP_HZ = 160;
const BLOCKED_TOP_HZ = 250;
const BLOCKED = /port|block|plug|sealed/i;
const SMALLEST_DIFFERENCE_DB = 0.3;

export interface PortFinding {
  found: boolean;
  /** The figures; "" where not found. */
  reason: string;
  /** The loss is local to the bass, but neither tuning nor a blocked run can confirm a port. */
  suspected: boolean;
}

/** Finding for each band. @returns [bands] */
export function findPorts(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
  onsets: readonly BandOnset[],
): PortFinding[] {
  const losses = Float64Array.from(
    onsets,
    ({ detection }) => detection?.lossDb[detection.top] ?? Number.NaN,
  );
  const blocked = blockedDifferences(series, groups);
  return series.bands.map((band, b): PortFinding => {
    const lossDb = losses[b] ?? Number.NaN;
    const difference = blocked?.[b];
    if (
      difference &&
      band.exactHz <= BLOCKED_TOP_HZ &&
      difference.savedDb > Math.max(SMALLEST_DIFFERENCE_DB, lossDb / 2)
    ) {
      return {
        found: true,
        suspected: false,
        reason: `With "${difference.variant}" the ${sayRun(difference.levelDb)} run loses ${sayDb(difference.savedDb)} less here: the loss belongs to the port.`,
      };
    }
    const { tuningHz } = series;
    const centreHz = tuningHz ?? band.exactHz;
    const aboveDb = medianLoss(series, losses, centreHz, ABOVE_FROM_OCTAVES, ABOVE_TO_OCTAVES);
    const local = lossDb > 0 && aboveDb < LOCAL_SHARE * lossDb;
    if (tuningHz === undefined) {
      return { found: false, reason: "", suspected: local && band.exactHz <= SUSPECT_TOP_HZ };
    }
    const near = Math.abs(Math.log2(band.exactHz / tuningHz)) <= HALF_WINDOW_OCTAVES;
    return {
      found: near && local,
      suspected: false,
      reason:
        near && local
          ? `${sayDb(lossDb)} lost gradually within an octave round the tuning of ${sayHz(tuningHz)}, against ${sayDb(aboveDb)} an octave and more above it.`
          : "",
    };
  });
}

function medianLoss(
  series: MeasuredSeries,
  losses: Float64Array,
  centreHz: number,
  fromOctaves: number,
  toOctaves: number,
): number {
  const values = series.bands
    .flatMap(({ exactHz }, b) => {
      const away = Math.log2(exactHz / centreHz);
      const lossDb = losses[b] ?? Number.NaN;
      return away >= fromOctaves && away <= toOctaves && Number.isFinite(lossDb) ? [lossDb] : [];
    })
    .toSorted((a, b) => a - b);
  return values[Math.floor(values.length / 2)] ?? Number.NaN;
}

interface BlockedDifference {
  variant: string;
  levelDb: number;
  /** Loss of the plain runs minus loss of the variant's, dB. */
  savedDb: number;
}

/** Plain against blocked at the highest level that both have, each against its own run at their lowest common level. */
function blockedDifferences(
  series: MeasuredSeries,
  groups: readonly LevelGroup[],
): (BlockedDifference | undefined)[] | null {
  const variant = series.runs.find(
    (run) => run.variant !== undefined && BLOCKED.test(run.variant),
  )?.variant;
  if (variant === undefined) return null;
  const pairs = groupRuns(series, "short-term", variant).flatMap((group) => {
    const plain = groups.find(({ levelDb }) => Math.abs(levelDb - group.levelDb) < 1e-6);
    return plain ? [{ plain, group }] : [];
  });
  const low = pairs[0];
  const high = pairs.at(-1);
  if (!low || !high || low === high) return null;
  return series.bands.map((_, b) => {
    const plain = lossOf(high.plain, low.plain, b);
    const blocked = lossOf(high.group, low.group, b);
    const savedDb = plain.lossDb - blocked.lossDb;
    const sigmaDb = Math.hypot(plain.sigmaDb, blocked.sigmaDb);
    return savedDb > 3 * sigmaDb ? { variant, levelDb: high.group.levelDb, savedDb } : undefined;
  });
}
