/** Every run's figures in one band, as the result lists them. */
import type { BandLevel } from "../result/result-schema";
import { groupRuns, type LevelGroup } from "./compression";
import type { StepReading } from "./onset/steps";
import type { BandMeasure, MeasuredRun, MeasuredSeries } from "./types";
import { COVERAGE_FACTOR } from "./uncertainty";

/** A number, or null where there is no value. */
export const orNull = (value: number | undefined): number | null =>
  value !== undefined && Number.isFinite(value) ? value : null;

/** What a run is held against: the reference of its own variant, its group, and how well its step is known. */
export interface RunReference {
  run: MeasuredRun;
  group: LevelGroup;
  reference: LevelGroup;
  stepSigmaDb: number;
}

/**
 * The reference of every run, in the order of the series: plain runs of any kind against the quietest plain
 * short-term level, a variant against its own quietest one.
 */
export function referRuns(
  series: MeasuredSeries,
  shortTerm: readonly LevelGroup[],
  steps: readonly StepReading[],
): RunReference[] {
  const plainReference = shortTerm[0];
  const variants = [...new Set(series.runs.map(({ variant }) => variant))];
  const kinds = [...new Set(series.runs.map(({ kind }) => kind))];
  const groups = variants.flatMap((variant) => {
    const own = groupRuns(series, "short-term", variant);
    const reference = variant === undefined ? plainReference : own[0];
    return kinds.flatMap((kind) =>
      (kind === "short-term" && variant === undefined
        ? shortTerm
        : groupRuns(series, kind, variant)
      ).map((group) => ({
        group,
        reference: reference ?? group,
      })),
    );
  });
  const nominal = Math.max(...steps.map(({ sigmaDb }) => sigmaDb));
  return series.runs.flatMap((run) => {
    const found = groups.find(({ group }) => group.runs.includes(run));
    if (!found) return [];
    const read = steps.find(({ group }) => Math.abs(group.driveDb - found.group.driveDb) < 1e-6);
    const sameDrive = Math.abs(found.group.driveDb - found.reference.driveDb) < 1e-6;
    return [{ run, ...found, stepSigmaDb: sameDrive ? 0 : (read?.sigmaDb ?? nominal) }];
  });
}

/** One row per run in band `b`. */
export function listBandLevels(references: readonly RunReference[], b: number): BandLevel[] {
  return references.flatMap(({ run, group, reference, stepSigmaDb }) => {
    const band = run.bands[b];
    return band ? [toBandLevel(run, band, group, reference, stepSigmaDb, b)] : [];
  });
}

function toBandLevel(
  run: MeasuredRun,
  band: BandMeasure,
  group: LevelGroup,
  reference: LevelGroup,
  stepSigmaDb: number,
  b: number,
): BandLevel {
  const referenceGainDb = reference.gainDb[b] ?? Number.NaN;
  const singleSigmaDb = Math.max(
    (group.sigmaDb[b] ?? Number.NaN) * Math.sqrt(group.runs.length),
    band.sigmaDb,
  );
  const sigmaDb =
    reference.runs.length === 1 && reference.runs[0] === run
      ? 0
      : Math.hypot(singleSigmaDb, reference.sigmaDb[b] ?? Number.NaN, stepSigmaDb);
  return {
    file: run.file,
    level_dB: run.levelDb,
    kind: run.kind,
    ...(run.variant === undefined ? {} : { variant: run.variant }),
    spl_dB: orNull(band.splDb),
    expected_dB: orNull((reference.splDb[b] ?? Number.NaN) + run.driveDb - reference.driveDb),
    compression_dB: orNull(referenceGainDb - (band.levelDb - run.driveDb)),
    uncertainty_dB: Number.isFinite(referenceGainDb - band.levelDb)
      ? orNull(COVERAGE_FACTOR * sigmaDb)
      : null,
    // The floor of a table is assumed, not known.
    snr_dB: run.isTable === true ? null : orNull(band.snrDb),
    thd_percent: orNull(band.thdPercent),
    thd_quality: band.thdQuality,
    thd_orders: band.thdOrders,
    harmonics: band.harmonics.map(({ order, ratio, floorRatio, quality }) => ({
      order,
      percent: quality === null || quality === "noise" ? null : orNull(100 * Math.sqrt(ratio)),
      quality,
      floor_percent:
        quality === null || run.isTable === true ? null : orNull(100 * Math.sqrt(floorRatio)),
    })),
  };
}
