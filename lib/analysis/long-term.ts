/** Long-term loss of a band and the part of it that came with time (docs/domain.md sections 5 and 6). */
import type { LongTermCause } from "../series/vocabulary";
import { lossOf, type LevelGroup } from "./compression";
import type { MeasuredSeries } from "./types";
import { COVERAGE_FACTOR } from "./uncertainty";

/** A thermal part counts from this, dB, and from three standard uncertainties. */
const THERMAL_DB = 0.1;
const THERMAL_SIGMAS = 3;
/** A tweeter's coil cools within about a second: above this frequency and after this time the loss is a lower bound. */
const QUICK_COIL_HZ = 1000;
const QUICK_COIL_S = 1;

export interface LongTermLoss {
  levelDb: number;
  /** Long-term run against the short-term reference, dB. */
  totalDb: number;
  /** Long-term run against the short-term run of the same level, dB; NaN where there is none. */
  thermalDb: number;
  /** Expanded (k = 2) uncertainty of the thermal part, or of the total where there is no thermal part, dB. */
  uncertaintyDb: number;
  lowerBound: boolean;
  cause: LongTermCause;
}

/**
 * @param longTerm plain long-term levels.
 * @param shortTerm plain short-term levels, ascending; the first is the reference.
 * @param b index of the band.
 */
export function findLongTermLosses(
  series: MeasuredSeries,
  longTerm: readonly LevelGroup[],
  shortTerm: readonly LevelGroup[],
  b: number,
): LongTermLoss[] {
  const reference = shortTerm[0];
  const hz = series.bands[b]?.exactHz ?? Number.NaN;
  if (!reference) return [];
  return longTerm.map((group) => {
    const total = lossOf(group, reference, b);
    const cold = shortTerm.find(({ levelDb }) => Math.abs(levelDb - group.levelDb) < 1e-6);
    const thermal = cold ? lossOf(group, cold, b) : { lossDb: Number.NaN, sigmaDb: Number.NaN };
    const known = Number.isFinite(thermal.lossDb);
    let cause: LongTermCause = "unresolved";
    if (known)
      cause =
        thermal.lossDb > Math.max(THERMAL_DB, THERMAL_SIGMAS * thermal.sigmaDb)
          ? "thermal"
          : "none";
    return {
      levelDb: group.levelDb,
      totalDb: total.lossDb,
      thermalDb: thermal.lossDb,
      uncertaintyDb: COVERAGE_FACTOR * (known ? thermal.sigmaDb : total.sigmaDb),
      lowerBound: hz > QUICK_COIL_HZ && timeAfterConditioningS(series, group, hz) > QUICK_COIL_S,
      cause,
    };
  });
}

/** When a long-term sweep passes a frequency, s after the end of the conditioning: gap + R ln(f/f1). */
export function timeAfterConditioningS(
  series: MeasuredSeries,
  group: LevelGroup,
  hz: number,
): number {
  const gaps = group.runs.map(({ conditioning }) => conditioning?.gap_s ?? 0);
  const { startHz, rateConstantS } = series.sweep;
  return Math.max(...gaps) + rateConstantS * Math.log(hz / startHz);
}
