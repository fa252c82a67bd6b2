/**
 * series.json: what a folder given to the analysis command says of its recordings.
 * Strict everywhere: an unknown key is refused by name (docs/contract.md).
 */
import * as z from "zod";
import { columnChoiceSchema, isTableName } from "./table-columns";
import { ENVIRONMENTS, RUN_KINDS } from "./vocabulary";

const finite = z.number().finite();
const positive = finite.positive();

/** A name inside the folder: no leading slash, no drive, no "..", no backslash. */
export const relativeFileSchema = z
  .string()
  .min(1)
  .max(255)
  .refine(
    (name) =>
      !name.startsWith("/") &&
      !name.includes("\\") &&
      !name.includes("\0") &&
      !/^[A-Za-z]:/.test(name) &&
      name.split("/").every((part) => part !== "" && part !== "." && part !== ".."),
    {
      error: "must be a name inside the folder: relative, with no . or .. as a step",
      params: { code: "series.file-name" },
    },
  );

export const criterionSchema = z
  .strictObject({
    thd_percent: positive.max(100).optional(),
    compression_dB: positive.max(20).optional(),
  })
  .refine((c) => c.thd_percent !== undefined || c.compression_dB !== undefined, {
    error: "needs thd_percent, compression_dB or both",
  });
export type Criterion = z.infer<typeof criterionSchema>;

export const DEFAULT_CRITERIA: readonly Criterion[] = [
  { thd_percent: 3 },
  { thd_percent: 10 },
  { compression_dB: 1 },
  { compression_dB: 3 },
];

export const conditioningSchema = z.strictObject({
  minutes: positive.max(24 * 60),
  crest_dB: finite.min(0).max(40),
  rms_re_sweep_dB: finite.min(-60).max(20),
  gap_s: finite.min(0).max(3600),
});
export type Conditioning = z.infer<typeof conditioningSchema>;

export const stimulusSchema = z
  .strictObject({
    file: relativeFileSchema.optional(),
    start_Hz: positive.max(100_000),
    stop_Hz: positive.max(200_000),
    length_s: positive.max(600),
    rate_Hz: z.number().int().min(8_000).max(384_000),
    lead_in_s: finite.min(0).max(60).default(0),
    lead_out_s: finite.min(0).max(60).default(0),
  })
  .refine((s) => s.stop_Hz >= 2 * s.start_Hz, {
    error: "must be at least twice start_Hz",
    path: ["stop_Hz"],
  })
  .refine((s) => s.stop_Hz <= s.rate_Hz / 2, {
    error: "must not pass half of rate_Hz",
    path: ["stop_Hz"],
  });
export type Stimulus = z.infer<typeof stimulusSchema>;

export const calibrationSchema = z.union([
  z.strictObject({
    file: relativeFileSchema,
    level_dB: finite.min(40).max(180),
    frequency_Hz: positive.max(20_000).default(1000),
    after_file: relativeFileSchema.optional(),
  }),
  z.strictObject({ full_scale_dB: finite.min(0).max(220) }),
]);
export type Calibration = z.infer<typeof calibrationSchema>;

/** What is known of the uncertainty of an absolute level; what is not stated is assumed, and said to be. */
export const statedUncertaintySchema = z.strictObject({
  /** Of the calibrator, or of a stated full_scale_dB: expanded, k = 2. */
  calibrator_dB: finite.min(0).max(10).optional(),
  /** Of microphone and its file at any frequency: expanded, k = 2. */
  microphone_dB: finite.min(0).max(10).optional(),
  /** Limit of error of distance_m, with the loudspeaker's acoustic centre. */
  distance_m: finite.min(0).max(1).optional(),
  /** Of reflections: expanded, k = 2. */
  reflections_dB: finite.min(0).max(20).optional(),
  temperature_C: finite.min(-40).max(80).optional(),
});
export type StatedUncertainty = z.infer<typeof statedUncertaintySchema>;

export const microphoneSchema = z.strictObject({
  file: relativeFileSchema,
  kind: z.enum(["response", "correction"]),
});

export const runSchema = z
  .strictObject({
    file: relativeFileSchema,
    level_dB: finite.min(0).max(180),
    kind: z.enum(RUN_KINDS).default("short-term"),
    conditioning: conditioningSchema.optional(),
    /** Gain of the stimulus on the scale of level_dB; level_dB where not given. */
    drive_dB: finite.min(-100).max(220).optional(),
    channel: z.number().int().min(1).max(64).default(1),
    loopback_channel: z.number().int().min(1).max(64).optional(),
    variant: z.string().min(1).max(120).optional(),
    /** A train: this many sweeps, period_s apart. */
    sweeps: z.number().int().min(1).max(1000).optional(),
    period_s: positive.max(3600).optional(),
    /** Of a table: which column holds what, where its head does not tell. */
    columns: columnChoiceSchema.optional(),
  })
  .refine((r) => r.columns === undefined || isTableName(r.file), {
    error: "are of tables only: .csv, .tsv, .txt or .frd",
    path: ["columns"],
  })
  .refine((r) => (r.sweeps ?? 1) === 1 || r.period_s !== undefined, {
    error: "is needed with sweeps: a train is told by both",
    path: ["period_s"],
  })
  .refine((r) => r.period_s === undefined || r.sweeps !== undefined, {
    error: "is needed with period_s: a train is told by both",
    path: ["sweeps"],
  })
  .refine((r) => r.loopback_channel !== r.channel, {
    error: "must be another channel than the microphone's",
    path: ["loopback_channel"],
  });
export type Run = z.infer<typeof runSchema>;

export const settingsSchema = z.strictObject({
  criteria: z
    .array(criterionSchema)
    .min(1)
    .max(12)
    .default([...DEFAULT_CRITERIA]),
});
export type Settings = z.infer<typeof settingsSchema>;

export const seriesSchema = z
  .strictObject({
    loudspeaker: z.string().min(1).max(200),
    environment: z.enum(ENVIRONMENTS),
    distance_m: positive.max(1000),
    gate_ms: positive.max(10_000).optional(),
    /** Largest dimension of the loudspeaker, m: tells whether the distance is far enough. */
    largest_dimension_m: positive.max(20).optional(),
    tuning_Hz: positive.max(2000).optional(),
    reference_band_Hz: z
      .tuple([positive, positive])
      .refine(([low, high]) => low < high, { error: "must be a lower and a higher frequency" })
      .optional(),
    stimulus: stimulusSchema,
    calibration: calibrationSchema.optional(),
    microphone: microphoneSchema.optional(),
    uncertainty: statedUncertaintySchema.optional(),
    ambient: z.strictObject({ file: relativeFileSchema }).optional(),
    runs: z.array(runSchema).min(1).max(200),
    settings: settingsSchema.default({ criteria: [...DEFAULT_CRITERIA] }),
  })
  .refine((s) => s.environment !== "gated" || s.gate_ms !== undefined, {
    error: "is needed with the environment gated",
    path: ["gate_ms"],
  })
  .refine(
    ({ reference_band_Hz: band, stimulus }) =>
      band === undefined || (band[0] < stimulus.stop_Hz && band[1] > stimulus.start_Hz),
    {
      error: "must lie where the sweep is",
      path: ["reference_band_Hz"],
    },
  )
  .superRefine(({ runs, stimulus }, context) => {
    runs.forEach(({ period_s }, at) => {
      if (period_s === undefined || period_s >= stimulus.length_s) return;
      context.addIssue({
        code: "custom",
        message: "must not be shorter than the sweep",
        path: ["runs", at, "period_s"],
      });
    });
  });
/** A series as the engine takes it: parsed, defaults filled in. */
export type Series = z.infer<typeof seriesSchema>;
