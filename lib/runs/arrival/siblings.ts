/** What the other recordings of a series are good for in a check. */
import { thirdOctaves } from "../../analysis/bands";
import type { LevelGroup } from "../../analysis/compression";
import type { Plan } from "../../series/plan-schema";
import type { PlannedRun } from "../../series/planned-runs";
import { USABLE_RUN_STATES, type ArrivalReport, type SweepSummary } from "../arrival-schema";
import type { ArrivalRequest, ArrivalSibling } from "./arrival-request";

export interface SweepSibling {
  file: string;
  place: PlannedRun;
  levelDb: number;
  summary: SweepSummary;
}

/** Usable plain short runs other than the run's own place, quietest first. */
export function listShortSiblings({ run, plan, siblings }: ArrivalRequest): SweepSibling[] {
  const bands = thirdOctaves(plan.sweep.start_Hz, plan.sweep.stop_Hz).length;
  return siblings
    .flatMap(({ file, place, state, report }): SweepSibling[] =>
      place?.role === "short-term" &&
      place.levelDb !== null &&
      place.slot !== run.place?.slot &&
      USABLE_RUN_STATES.includes(state) &&
      report?.sweep?.band_dBFS.length === bands
        ? [{ file, place, levelDb: place.levelDb, summary: report.sweep }]
        : [],
    )
    .sort((a, b) => a.levelDb - b.levelDb || a.place.repeat - b.place.repeat);
}

/** A run as the engine compares levels: one take, gain by its planned level. */
export function toGroup({ band_dBFS, sigma_dB }: SweepSummary, levelDb: number): LevelGroup {
  return {
    levelDb,
    driveDb: levelDb,
    runs: [],
    gainDb: Float64Array.from(band_dBFS, (level) => (level ?? Number.NaN) - levelDb),
    sigmaDb: Float64Array.from(sigma_dB, (sigma) => sigma ?? Number.NaN),
    splDb: Float64Array.from(band_dBFS, (level) => level ?? Number.NaN),
  };
}

/** The calibrator recordings that count, each where it is usable. */
export function findTones(siblings: readonly Pick<ArrivalSibling, "place" | "state" | "report">[]) {
  const find = (role: PlannedRun["role"]): NonNullable<ArrivalReport["tone"]> | null =>
    siblings.find(
      ({ place, state, report }) =>
        place?.role === role && USABLE_RUN_STATES.includes(state) && report?.tone !== undefined,
    )?.report?.tone ?? null;
  return { before: find("calibrator-before"), after: find("calibrator-after") };
}

/**
 * SPL at the microphone of a sine that just reaches full scale: by the known sensitivity, else by the
 * calibrator before, else by the one after.
 * @returns null where no calibrator recording is usable.
 */
export function findFullScaleDb(
  { calibration }: Pick<Plan, "calibration">,
  siblings: readonly Pick<ArrivalSibling, "place" | "state" | "report">[],
): number | null {
  if (calibration.by === "sensitivity") return calibration.full_scale_dB;
  const { before, after } = findTones(siblings);
  const tone = before ?? after;
  return tone === null ? null : calibration.level_dB - tone.level_dBFS;
}
