/**
 * From the series.json of a folder to a plan that asks for exactly its recordings, under its names:
 * the analysis of what is then uploaded is the analysis of the folder, to the byte.
 */
import { AppError } from "../errors/app-error";
import { RESERVED_FILES } from "../evidence/evidence-schema";
import { listSeriesFiles } from "./list-series-files";
import { planSchema, type Plan, type PlanInput } from "./plan-schema";
import { toPlannedRuns, type PlannedRun } from "./planned-runs";
import type { Run, Series } from "./series-schema";
import type { ColumnChoice } from "./table-columns";
import { toSeriesJson } from "./to-series-json";

export interface FolderUpload {
  file: string;
  slot: string;
  channel: number;
  /** Of a table: which column holds what, where series.json says so. */
  columns: ColumnChoice | null;
}

export interface PlannedFolder {
  plan: Plan;
  /** In capture order: what must be sent, and for which place. */
  uploads: FolderUpload[];
}

export interface FolderFacts {
  loudspeaker: { largestDimensionM: number | null; tuningHz: number | null };
  /** SHA-256 of the microphone file that the series names; null where it names none. */
  microphoneDigest: string | null;
}

/**
 * @throws AppError "series.not-plannable" naming every key of series.json that a series here cannot
 *   hold; "plan.invalid" where a value is out of what a plan takes.
 */
export function toPlannedFolder(series: Series, facts: FolderFacts): PlannedFolder {
  requireFreeNames(series);
  const draft = toPlan(series, facts, []);
  const uploads = matchFiles(series, toPlannedRuns(draft, "folder"));
  const inOrder = [
    ...series.runs.map(({ file }) => file),
    ...uploads.map(({ file }) => file),
  ].flatMap((file) => uploads.filter((one) => one.file === file));
  const files = [...new Set(inOrder)].map(({ slot, file }) => ({ slot, file }));
  const plan = toPlan(series, facts, files);
  requireSame(series, plan, facts, uploads);
  return { plan, uploads };
}

/** @throws AppError "series.file-name" for a name that means something else in a folder of ours */
function requireFreeNames(series: Series): void {
  const reserved = new Set(RESERVED_FILES.map((name) => name.toLowerCase()));
  const taken = listSeriesFiles(series)
    .slice(1)
    .find((file) => reserved.has(file.toLowerCase()));
  if (taken === undefined) return;
  throw new AppError(
    "series.file-name",
    `A recording cannot be called ${taken}: in a folder that leaves the lab this name is taken. Rename it here and in series.json.`,
    { file: taken },
  );
}

/** What series.json states of the loudspeaker; its row must say the same. */
export const toLoudspeakerFacts = (series: Series): FolderFacts["loudspeaker"] => ({
  largestDimensionM: series.largest_dimension_m ?? null,
  tuningHz: series.tuning_Hz ?? null,
});

const isPlain = (run: Run): boolean => run.kind === "short-term" && run.variant === undefined;

function toPlan(series: Series, facts: FolderFacts, files: NonNullable<Plan["files"]>): Plan {
  const { runs, stimulus, calibration, microphone } = series;
  const plain = runs.filter(isPlain);
  const levels = [...new Set(plain.map((run) => run.level_dB))].map((level_dB) => ({
    level_dB,
    long_term: runs.some((run) => run.kind === "long-term" && run.level_dB === level_dB),
    repeats: plain.filter((run) => run.level_dB === level_dB).length - 1,
  }));
  const conditioning = runs.find((run) => run.conditioning !== undefined)?.conditioning;
  const { start_Hz, stop_Hz, length_s, rate_Hz, lead_in_s, lead_out_s } = stimulus;
  const input: unknown = {
    place: {
      environment: series.environment,
      distance_m: series.distance_m,
      gate_ms: series.gate_ms ?? null,
      temperature_C: series.uncertainty?.temperature_C ?? null,
    },
    ...toUncertainty(series.uncertainty),
    calibration: toCalibration(calibration),
    microphone:
      microphone === undefined || facts.microphoneDigest === null
        ? null
        : { file_name: microphone.file, digest: facts.microphoneDigest, kind: microphone.kind },
    levels,
    variants: runs
      .filter((run) => run.kind === "short-term" && run.variant !== undefined)
      .map((run) => ({ text: run.variant, level_dB: run.level_dB })),
    ambient: series.ambient !== undefined,
    closing: runs.some((run) => run.kind === "closing"),
    sweep: { start_Hz, stop_Hz, length_s, rate_Hz, lead_in_s, lead_out_s },
    ...(conditioning === undefined ? {} : { conditioning }),
    ...(series.reference_band_Hz === undefined
      ? {}
      : { reference_band_Hz: series.reference_band_Hz }),
    criteria: series.settings.criteria,
    ...(files.length === 0 ? {} : { files: withMicrophone(series, files) }),
  };
  const parsed = planSchema.safeParse(input);
  if (parsed.success) return parsed.data;
  const faults = parsed.error.issues.map((issue) => ({
    path: issue.path.join("."),
    message: issue.message,
  }));
  const [first] = faults;
  throw new AppError(
    "plan.invalid",
    `A plan here cannot hold what series.json says: ${first?.path ?? ""}: ${first?.message ?? ""} The analysis command takes the folder as it is.`,
    { file: "series.json", details: { faults } },
  );
}

/** What a plan asks for; the rest is found by the comparison. */
function toUncertainty(stated: Series["uncertainty"]): Pick<PlanInput, "uncertainty"> {
  const { calibrator_dB, microphone_dB, distance_m } = stated ?? {};
  const asked = { calibrator_dB, microphone_dB, distance_m };
  return Object.values(asked).every((value) => value === undefined) ? {} : { uncertainty: asked };
}

const withMicrophone = (
  { microphone }: Series,
  files: NonNullable<Plan["files"]>,
): NonNullable<Plan["files"]> =>
  microphone === undefined ? files : [...files, { slot: "microphone", file: microphone.file }];

function toCalibration(calibration: Series["calibration"]): PlanInput["calibration"] {
  if (calibration === undefined) {
    throw new AppError(
      "calibration.missing",
      "series.json has no calibration, and a series here needs one: a calibrator recording, or full_scale_dB.",
      { file: "series.json" },
    );
  }
  if ("full_scale_dB" in calibration) {
    return { by: "sensitivity", full_scale_dB: calibration.full_scale_dB };
  }
  return {
    by: calibration.after_file === undefined ? "calibrator" : "calibrator-before-after",
    level_dB: calibration.level_dB,
    frequency_Hz: calibration.frequency_Hz,
  };
}

/** The recording of each place; what is not there is left out and found by the comparison. */
function matchFiles(series: Series, planned: readonly PlannedRun[]): FolderUpload[] {
  const left = [...series.runs];
  const take = (wanted: (run: Run) => boolean): Run | undefined => {
    const at = left.findIndex(wanted);
    return at < 0 ? undefined : left.splice(at, 1)[0];
  };
  const { calibration, ambient } = series;
  const tones = calibration !== undefined && "file" in calibration ? calibration : undefined;
  return planned.flatMap((place): FolderUpload[] => {
    if (place.levelDb === null) {
      const byRole: Partial<Record<PlannedRun["role"], string | undefined>> = {
        "calibrator-before": tones?.file,
        "calibrator-after": tones?.after_file,
        ambient: ambient?.file,
      };
      const file = byRole[place.role];
      return file === undefined ? [] : [{ file, slot: place.slot, channel: 1, columns: null }];
    }
    const kind = place.role === "variant" ? "short-term" : place.role;
    const run = take(
      (one) =>
        one.kind === kind &&
        one.level_dB === place.levelDb &&
        (one.variant ?? null) === place.variant,
    );
    if (run === undefined) return [];
    const { file, channel, columns = null } = run;
    return [{ file, slot: place.slot, channel, columns }];
  });
}

/** What an analysis would be given must be what the folder gives to the command. */
function requireSame(
  series: Series,
  plan: Plan,
  { loudspeaker, microphoneDigest }: FolderFacts,
  uploads: readonly FolderUpload[],
): void {
  const planned = toPlannedRuns(plan, "folder");
  const unmatched = planned.filter((place) => !uploads.some((one) => one.slot === place.slot));
  const runs = planned.flatMap((place) => {
    const upload = uploads.find((one) => one.slot === place.slot);
    if (upload === undefined) return [];
    const { slot: id, role, levelDb, variant, fileName: file } = place;
    const { channel, columns } = upload;
    return [{ id, role, levelDb, variant, file, digest: id, channel, columns }];
  });
  const made = toSeriesJson({
    loudspeaker: { maker: "", model: "", ...loudspeaker },
    plan,
    runs,
  }).series;
  const faults = [
    ...listDifferences(withoutName(series, plan), withoutName(made, plan), ""),
    ...unmatched.map(({ label }) => `${label} is not among its runs`),
    ...(series.microphone !== undefined && microphoneDigest === null ? ["microphone"] : []),
  ];
  if (faults.length === 0) return;
  throw new AppError(
    "series.not-plannable",
    `A series here cannot hold all that series.json says: ${faults.slice(0, 6).join(", ")}. The analysis command takes the folder as it is.`,
    { file: "series.json", details: { faults } },
  );
}

/** The name is the loudspeaker's own matter; the band is written out where series.json leaves it. */
const withoutName = ({ loudspeaker: _name, ...rest }: Series, plan: Plan): unknown => ({
  ...rest,
  reference_band_Hz: rest.reference_band_Hz ?? plan.reference_band_Hz,
});

/** Paths at which two JSON values differ. */
function listDifferences(a: unknown, b: unknown, path: string): string[] {
  if (Object.is(a, b)) return [];
  if (!isTree(a) || !isTree(b)) return [path];
  const keys = [...new Set([...Object.keys(a), ...Object.keys(b)])];
  return keys.flatMap((key) => {
    const step = Array.isArray(a) ? `${path}[${key}]` : path === "" ? key : `${path}.${key}`;
    return listDifferences(a[key], b[key], step);
  });
}

const isTree = (value: unknown): value is Record<string, unknown> =>
  typeof value === "object" && value !== null;
