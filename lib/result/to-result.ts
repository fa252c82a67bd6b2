/** From what was measured and found to the result that is printed, kept and shown: numbers rounded to what they carry. */
import type { Assessment } from "../analysis/assess-series";
import { ENGINE_VERSION } from "../analysis/engine-version";
import type { MeasuredRun, MeasuredSeries } from "../analysis/types";
import type { Series } from "../series/series-schema";
import type { Result, ResultRun, Warning } from "./result-schema";

/** @param warnings of the measuring part; those of the assessment follow them. */
export function toResult(
  series: Series,
  measured: MeasuredSeries,
  assessment: Assessment,
  warnings: readonly Warning[],
): Result {
  const { bands, shape, headline, programme } = assessment;
  return {
    engine: { name: "tidemark", version: ENGINE_VERSION },
    settings: series.settings,
    environment: series.environment,
    distance_m: series.distance_m,
    spl_valid: measured.splValid,
    grid_Hz: roundFor("grid_Hz", [...measured.gridHz]),
    runs: measured.runs.map((run) => roundFor("runs", toResultRun(run, measured.splValid))),
    bands: roundFor("bands", bands),
    shape: roundFor("shape", shape),
    headline: roundFor("headline", headline),
    programme: roundFor("programme", programme),
    warnings: [...warnings, ...assessment.warnings],
  };
}

function toResultRun(run: MeasuredRun, splValid: boolean): ResultRun {
  return {
    file: run.file,
    level_dB: run.levelDb,
    drive_dB: run.driveDb,
    kind: run.kind,
    ...(run.variant === undefined ? {} : { variant: run.variant }),
    ...(run.conditioning === undefined ? {} : { conditioning: run.conditioning }),
    measured_level_dB: splValid ? run.measuredLevelDb : null,
    latency_s: run.latencyS,
    drift_ppm: run.driftPpm,
    peak_dBFS: run.peakDbfs,
    clipped: run.clipped,
    snr_dB: run.snrDb,
    spl_dB: [...run.splDb],
    // The floor of a table is assumed, not known.
    floor_dB: toFloor(run, run.floorDb),
    harmonics: run.harmonics.map(({ order, splDb, floorDb, quality }) => ({
      order,
      spl_dB: [...splDb],
      floor_dB: toFloor(run, floorDb),
      quality,
    })),
    thd_percent: [...run.thdPercent],
    thd_quality: run.thdQuality,
    thd_orders: run.thdOrders,
  };
}

const toFloor = ({ isTable }: MeasuredRun, floorDb: Float64Array): number[] =>
  isTable === true ? Array.from(floorDb, () => Number.NaN) : [...floorDb];

/** What a person stated stands as stated. */
const AS_STATED = new Set([
  "criterion",
  "conditioning",
  "level_dB",
  "crest_dB",
  "nominal_Hz",
  "order",
]);
const DIGITS = 4;
const FREQUENCY_DIGITS = 6;

type Round = (value: number) => number;

/** Adding zero turns -0 into 0. */
const toSteps =
  (perUnit: number): Round =>
  (value) =>
    Math.round(value * perUnit) / perUnit + 0;
const toDigits =
  (digits: number): Round =>
  (value) =>
    Number(value.toPrecision(digits));
const toHundredths = toSteps(100);

/** How a number is rounded, by the unit in its name. */
function toRounding(key: string): Round {
  if (key === "drive_dB") return toSteps(1000);
  // Never "without uncertainty".
  if (key === "uncertainty_dB") return (value) => Math.max(0.01, toHundredths(value));
  if (/_dB(?:A|FS)?$/.test(key)) return toHundredths;
  if (key.endsWith("_Hz")) return toDigits(FREQUENCY_DIGITS);
  if (key.endsWith("_s")) return toSteps(1e6);
  return key.endsWith("_ppm") ? toSteps(10) : toDigits(DIGITS);
}

/** NaN and infinities become null: at this border "no value" gets its name. */
function roundFor<T>(key: string, value: T): T {
  return round(key, value) as T;
}

function round(key: string, value: unknown): unknown {
  if (AS_STATED.has(key)) return value;
  if (typeof value === "number") return Number.isFinite(value) ? toRounding(key)(value) : null;
  if (Array.isArray(value)) {
    const rounding = toRounding(key);
    return value.map((item: unknown) =>
      typeof item === "number" ? (Number.isFinite(item) ? rounding(item) : null) : round(key, item),
    );
  }
  if (value !== null && typeof value === "object") {
    const rounded: Record<string, unknown> = {};
    for (const [name, item] of Object.entries(value)) rounded[name] = round(name, item);
    return rounded;
  }
  return value;
}
