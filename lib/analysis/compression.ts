/** Runs of a series grouped by level, their gains, and the level lost at each (docs/domain.md section 5). */
import { AnalysisError } from "../errors/app-error";
import type { RunKind } from "../series/vocabulary";
import { meanSigmaDb, repeatSigmaDb } from "./uncertainty";
import type { MeasuredRun, MeasuredSeries } from "./types";

/** Runs of the same level, kind and variant. */
export interface LevelGroup {
  levelDb: number;
  /** Mean drive of the runs, dB on the scale of levelDb. */
  driveDb: number;
  runs: MeasuredRun[];
  /** [bands] mean of level minus drive, dB; NaN where no take has a value. */
  gainDb: Float64Array;
  /** [bands] standard uncertainty of gainDb from noise and repeats, dB. */
  sigmaDb: Float64Array;
  /** [bands] mean of SPL at 1 m, dB; NaN where not valid. */
  splDb: Float64Array;
}

const sameLevel = (a: MeasuredRun, b: MeasuredRun): boolean =>
  Math.abs(a.levelDb - b.levelDb) < 1e-6;

/**
 * Groups the runs of one kind and variant by level, quietest first.
 *
 * @param variant undefined for the plain runs.
 */
export function groupRuns(
  series: MeasuredSeries,
  kind: RunKind,
  variant: string | undefined,
): LevelGroup[] {
  const runs = series.runs.filter((run) => run.kind === kind && run.variant === variant);
  const levels: MeasuredRun[][] = [];
  for (const run of runs) {
    const group = levels.find((members) => members[0] !== undefined && sameLevel(members[0], run));
    if (group) group.push(run);
    else levels.push([run]);
  }
  const bands = series.bands.length;
  const repeatDb = repeatSigmaDb(
    levels.map((members) => ({ gainDb: members.map(gainsOf) })),
    bands,
  );
  return levels
    .map((members) => toGroup(members, bands, repeatDb))
    .toSorted((a, b) => a.driveDb - b.driveDb);
}

/** The plain short-term groups; the first is the reference. @throws AnalysisError "series.reference-missing" */
export function groupShortTerm(series: MeasuredSeries): [LevelGroup, ...LevelGroup[]] {
  const [reference, ...rest] = groupRuns(series, "short-term", undefined);
  if (!reference) {
    throw new AnalysisError(
      "series.reference-missing",
      "no plain short-term run: compression needs one as its reference; add a short run at the lowest level",
    );
  }
  return [reference, ...rest];
}

/** [bands] level minus drive, dB. */
export function gainsOf(run: MeasuredRun): Float64Array {
  return Float64Array.from(run.bands, (band) => band.levelDb - run.driveDb);
}

const meanOf = (values: number[]): number =>
  values.length === 0 ? Number.NaN : values.reduce((sum, value) => sum + value, 0) / values.length;

function toGroup(runs: MeasuredRun[], bands: number, repeatDb: Float64Array | null): LevelGroup {
  const gainDb = new Float64Array(bands).fill(Number.NaN);
  const sigmaDb = new Float64Array(bands).fill(Number.NaN);
  const splDb = new Float64Array(bands).fill(Number.NaN);
  for (let b = 0; b < bands; b++) {
    const valid = runs.filter((run) => Number.isFinite(run.bands[b]?.levelDb));
    if (valid.length === 0) continue;
    gainDb[b] = meanOf(valid.map((run) => (run.bands[b]?.levelDb ?? Number.NaN) - run.driveDb));
    sigmaDb[b] = meanSigmaDb(
      valid.map((run) => run.bands[b]?.sigmaDb ?? Number.NaN),
      repeatDb?.[b] ?? null,
    );
    splDb[b] = meanOf(
      valid.map((run) => run.bands[b]?.splDb ?? Number.NaN).filter((spl) => Number.isFinite(spl)),
    );
  }
  return {
    levelDb: runs[0]?.levelDb ?? Number.NaN,
    driveDb: meanOf(runs.map((run) => run.driveDb)),
    runs,
    gainDb,
    sigmaDb,
    splDb,
  };
}

/** Level lost in one band. */
export interface Loss {
  /** Positive decibels lost; NaN where either run has no value. */
  lossDb: number;
  /** Standard uncertainty from noise and repeats of both runs, dB; the step is not in it. */
  sigmaDb: number;
}

/** Loss of a group against a reference in band `b`: C = [L(ref) + u - u_ref] - L. */
export function lossOf(group: LevelGroup, reference: LevelGroup, b: number): Loss {
  const valueOf = (values: Float64Array): number => values[b] ?? Number.NaN;
  return {
    lossDb: valueOf(reference.gainDb) - valueOf(group.gainDb),
    sigmaDb:
      group === reference ? 0 : Math.hypot(valueOf(reference.sigmaDb), valueOf(group.sigmaDb)),
  };
}

/** Mean harmonics of a group's repeats in one band, power re the fundamental. */
export interface MeanHarmonic {
  order: number;
  /** NaN where the order does not exist. */
  ratio: number;
  floorRatio: number;
  inputRatio: number;
  quality: "measured" | "uncertain" | "noise" | null;
}

/** Over the floor by this, dB: measured; by that: uncertain (docs/domain.md section 4). */
const MEASURED_OVER_FLOOR_DB = 14;
const UNCERTAIN_OVER_FLOOR_DB = 6;

export function harmonicsOf(group: LevelGroup, b: number): MeanHarmonic[] {
  const takes = group.runs.map((run) => run.bands[b]).filter((band) => band !== undefined);
  const first = takes[0];
  if (!first) return [];
  return first.harmonics.map((only): MeanHarmonic => {
    const { order } = only;
    if (takes.length === 1) return only;
    const same = takes.flatMap((take) =>
      take.harmonics.filter((harmonic) => harmonic.order === order),
    );
    const ratio = meanOf(same.map((harmonic) => harmonic.ratio));
    const floorRatio = meanOf(same.map((harmonic) => harmonic.floorRatio));
    const overDb = 10 * Math.log10(ratio / floorRatio);
    let quality: MeanHarmonic["quality"] = "noise";
    if (same.some((harmonic) => harmonic.quality === null)) quality = null;
    else if (overDb >= MEASURED_OVER_FLOOR_DB) quality = "measured";
    else if (overDb >= UNCERTAIN_OVER_FLOOR_DB) quality = "uncertain";
    return {
      order,
      ratio,
      floorRatio,
      quality,
      inputRatio: meanOf(same.map((harmonic) => harmonic.inputRatio)),
    };
  });
}
