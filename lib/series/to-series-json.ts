/**
 * From the plan and the usable recordings to the series.json of the contract: what the worker gives
 * to the engine, and what makes a folder that the analysis command reads.
 */
import { AnalysisError } from "../errors/app-error";
import type { Plan } from "./plan-schema";
import type { RecordingRole } from "./planned-runs";
import { seriesSchema, type Run, type Series, type StatedUncertainty } from "./series-schema";
import { isTableName, type ColumnChoice } from "./table-columns";

/** A recording that may enter an analysis. */
export interface UsableRun {
  id: string;
  role: RecordingRole;
  levelDb: number | null;
  variant: string | null;
  /** Name of the planned recording: unlike uploaded names, one per place. */
  file: string;
  digest: string;
  channel: number;
  /** Of a table: which column holds what, where a person said so. */
  columns?: ColumnChoice | null;
}

export interface SeriesSource {
  loudspeaker: {
    maker: string;
    model: string;
    largestDimensionM: number | null;
    tuningHz: number | null;
  };
  plan: Plan;
  /** In the order of the plan. */
  runs: readonly UsableRun[];
}

export interface SeriesFiles {
  series: Series;
  /** What lies behind each name; run_id null for the microphone file. */
  files: { file: string; digest: string; run_id: string | null }[];
}

/**
 * @throws AnalysisError "series.too-few-runs" with fewer than two short-term levels,
 *   "calibration.missing" where neither calibrator nor sensitivity is there.
 */
export function toSeriesJson({ loudspeaker, plan, runs }: SeriesSource): SeriesFiles {
  const levels = new Set(
    runs.flatMap((run) => (run.role === "short-term" && run.levelDb !== null ? [run.levelDb] : [])),
  );
  if (levels.size < 2) {
    throw new AnalysisError(
      "series.too-few-runs",
      `An analysis compares at least two levels; ${levels.size === 0 ? "no" : "one"} short-term run is usable. Record another level, or keep a failed take with a reason.`,
      { details: { usableLevels: [...levels] } },
    );
  }
  const withRole = (role: RecordingRole): UsableRun | undefined =>
    runs.find((r) => r.role === role);
  const ambient = withRole("ambient");
  const microphone = plan.microphone;
  const document = {
    loudspeaker: `${loudspeaker.maker} ${loudspeaker.model}`,
    environment: plan.place.environment,
    distance_m: plan.place.distance_m,
    ...(plan.place.gate_ms === null ? {} : { gate_ms: plan.place.gate_ms }),
    ...(loudspeaker.largestDimensionM === null
      ? {}
      : { largest_dimension_m: loudspeaker.largestDimensionM }),
    ...(loudspeaker.tuningHz === null ? {} : { tuning_Hz: loudspeaker.tuningHz }),
    reference_band_Hz: plan.reference_band_Hz,
    stimulus: { ...plan.sweep },
    ...toCalibration(plan, runs),
    ...toUncertainty(plan),
    ...(microphone === null
      ? {}
      : { microphone: { file: toMicrophoneName(plan), kind: microphone.kind } }),
    ...(ambient === undefined ? {} : { ambient: { file: ambient.file } }),
    runs: inOrder(runs, plan).flatMap((run) => toRun(run, plan)),
    settings: { criteria: plan.criteria },
  };
  const named = runs.map((run) => ({ file: run.file, digest: run.digest, run_id: run.id }));
  return {
    series: seriesSchema.parse(document),
    files:
      microphone === null
        ? named
        : [...named, { file: toMicrophoneName(plan), digest: microphone.digest, run_id: null }],
  };
}

/** Only what is known; the rest the engine assumes, and says so. */
function toUncertainty({ uncertainty, place }: Plan): { uncertainty?: StatedUncertainty } {
  const known = Object.entries({ ...uncertainty, temperature_C: place.temperature_C }).filter(
    ([, value]) => value !== null,
  );
  return known.length === 0 ? {} : { uncertainty: Object.fromEntries(known) };
}

const toMicrophoneName = ({ files }: Plan): string =>
  files?.find(({ slot }) => slot === "microphone")?.file ?? "microphone.txt";

/** As the folder had them, where the series came as one; what came later stands last. */
function inOrder(runs: readonly UsableRun[], { files }: Plan): readonly UsableRun[] {
  if (files === undefined) return runs;
  const places = new Map(files.map(({ file }, at) => [file, at]));
  const placeOf = ({ file }: UsableRun): number => places.get(file) ?? Infinity;
  return runs.toSorted((a, b) => (placeOf(a) === placeOf(b) ? 0 : placeOf(a) - placeOf(b)));
}

function toCalibration(
  plan: Plan,
  runs: readonly UsableRun[],
): { calibration?: Record<string, unknown> } {
  const { by, level_dB, frequency_Hz, full_scale_dB } = plan.calibration;
  if (by === "sensitivity" && full_scale_dB !== null) return { calibration: { full_scale_dB } };
  const before = runs.find((run) => run.role === "calibrator-before");
  const after = runs.find((run) => run.role === "calibrator-after");
  // One calibrator recording out of two still calibrates.
  const first = before ?? after;
  if (first === undefined) {
    // Tables state their levels themselves.
    if (runs.every((run) => run.levelDb === null || isTableName(run.file))) return {};
    throw new AnalysisError(
      "calibration.missing",
      "No calibrator recording is usable, so levels cannot be told. Record the calibrator at the same input gain, or keep the take with a reason.",
    );
  }
  return {
    calibration: {
      file: first.file,
      level_dB,
      frequency_Hz,
      ...(before !== undefined && after !== undefined ? { after_file: after.file } : {}),
    },
  };
}

function toRun(run: UsableRun, plan: Plan): Partial<Run>[] {
  if (run.levelDb === null) return [];
  const kind = run.role === "long-term" || run.role === "closing" ? run.role : "short-term";
  return [
    {
      file: run.file,
      level_dB: run.levelDb,
      kind,
      channel: run.channel,
      ...(run.columns == null ? {} : { columns: run.columns }),
      ...(run.role === "long-term" ? { conditioning: plan.conditioning } : {}),
      ...(run.variant === null ? {} : { variant: run.variant }),
    },
  ];
}
