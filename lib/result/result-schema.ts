/**
 * The result of an analysis, as the command prints it, the API answers it and the screens read it.
 * Numbers stand in the units of their names; null is "no value", never zero. More keys may come,
 * none is renamed (docs/contract.md).
 */
import * as z from "zod";
import { criterionSchema, settingsSchema, conditioningSchema } from "../series/series-schema";
import {
  LIMIT_STATUSES,
  LONG_TERM_CAUSES,
  ONSET_STATUSES,
  RUN_KINDS,
  SHORT_TERM_CAUSES,
} from "../series/vocabulary";

const value = z.number().nullable();
const curve = z.array(value);

export const QUALITIES = ["measured", "uncertain", "noise"] as const;
export const qualitySchema = z.enum(QUALITIES);
export type Quality = z.infer<typeof qualitySchema>;

export const harmonicSchema = z.object({
  order: z.number().int().min(2).max(9),
  spl_dB: curve,
  floor_dB: curve,
  quality: z.array(qualitySchema.nullable()),
});

export const resultRunSchema = z.object({
  file: z.string(),
  level_dB: z.number(),
  drive_dB: z.number(),
  kind: z.enum(RUN_KINDS),
  variant: z.string().optional(),
  conditioning: conditioningSchema.optional(),
  /** Mean-square SPL over the reference band at 1 m; null where SPL is not valid. */
  measured_level_dB: value,
  latency_s: value,
  drift_ppm: value,
  peak_dBFS: value,
  clipped: z.boolean(),
  /** Signal over noise in the reference band. */
  snr_dB: value,
  spl_dB: curve,
  /** Floor of the fundamental, on the same grid. */
  floor_dB: curve,
  harmonics: z.array(harmonicSchema),
  thd_percent: curve,
  thd_quality: z.array(qualitySchema.nullable()),
  /** Orders that entered, as "2-5"; "" where none did. */
  thd_orders: z.array(z.string()),
});
export type ResultRun = z.infer<typeof resultRunSchema>;

export const bandLevelSchema = z.object({
  file: z.string(),
  level_dB: z.number(),
  kind: z.enum(RUN_KINDS),
  variant: z.string().optional(),
  spl_dB: value,
  /** Reference level plus step: what a loudspeaker without loss would give. */
  expected_dB: value,
  compression_dB: value,
  uncertainty_dB: value,
  snr_dB: value,
  thd_percent: value,
  thd_quality: qualitySchema.nullable(),
  thd_orders: z.string(),
  /** Per order: percent of the fundamental in this band; percent null where in the noise. */
  harmonics: z.array(
    z.object({
      order: z.number().int(),
      percent: value,
      quality: qualitySchema.nullable(),
      floor_percent: value,
    }),
  ),
});
export type BandLevel = z.infer<typeof bandLevelSchema>;

export const onsetSchema = z.object({
  status: z.enum(ONSET_STATUSES),
  nominal_dB: value,
  low_dB: value,
  high_dB: value,
  spl_dB: value,
  ceiling_dB: value,
  reason: z.string().optional(),
  /** Where no law follows the losses: the gain depends on time, or more than one control acts. */
  control: z.enum(["slow control", "several controls"]).optional(),
});

export type Onset = z.infer<typeof onsetSchema>;

export const evidenceSchema = z.object({
  /** Local slope d(output)/d(input) over the top step of the plain short-term runs. */
  slope: value,
  /** Question 1 of the estimator: odd distortion over what the loss needs; overload from 0.2. */
  odd_ratio: value,
  /** Question 2: dB by which H3 grew beyond what follows the output. */
  growth_dB: value,
  growth_needed_dB: value,
  /** The law with the most weight: "hard limiter", "soft knee", "two paths", "hard clip", "tanh", "cubic", or "linear". */
  law: z.string().nullable(),
  /** Median law, for drawing: expected against measured, dB. */
  law_curve: z
    .object({ expected_dB: z.array(z.number()), measured_dB: z.array(z.number()) })
    .nullable(),
  /** The level whose run would narrow the interval most, and how far. */
  next_run: z
    .object({
      level_dB: z.number(),
      width_now_dB: z.number(),
      width_expected_dB: z.number(),
      /** Every level that was weighed, ascending. */
      candidates: z
        .array(z.object({ level_dB: z.number(), width_expected_dB: z.number() }))
        .optional(),
    })
    .nullable(),
});

export const limitSchema = z.object({
  criterion: criterionSchema,
  kind: z.enum(["short-term", "long-term"]),
  status: z.enum(LIMIT_STATUSES),
  nominal_dB: value,
  low_dB: value,
  high_dB: value,
  spl_dB: value,
  bound_by: z.enum(["compression", "thd"]).nullable(),
  reached: z.boolean().nullable(),
  reason: z.string().optional(),
});
export type Limit = z.infer<typeof limitSchema>;

export const longTermSchema = z.object({
  level_dB: z.number(),
  total_dB: value,
  thermal_dB: value,
  uncertainty_dB: value,
  lower_bound: z.boolean(),
  cause: z.enum(LONG_TERM_CAUSES),
});

export const SPL_UNCERTAINTY_NAMES = [
  "calibrator",
  "sensitivity",
  "microphone",
  "distance",
  "reflections",
  "temperature",
  "repeat",
  "drift",
  "noise",
] as const;

export const splUncertaintyPartSchema = z.object({
  name: z.enum(SPL_UNCERTAINTY_NAMES),
  /** Standard uncertainty. */
  standard_dB: z.number(),
  /** The same for all bands, so it moves them together. */
  common: z.boolean(),
  /** What it rests on: stated, measured or assumed. */
  basis: z.string(),
});
export type SplUncertaintyPart = z.infer<typeof splUncertaintyPartSchema>;

/** Of an absolute level: parts as root of squares, expanded with k = 2, for the one unit measured. */
export const splUncertaintySchema = z.object({
  expanded_dB: z.number(),
  parts: z.array(splUncertaintyPartSchema),
});

export const bandSchema = z.object({
  nominal_Hz: z.number(),
  exact_Hz: z.number(),
  levels: z.array(bandLevelSchema),
  onset: onsetSchema,
  cause: z.enum(SHORT_TERM_CAUSES),
  cause_inferred: z.boolean(),
  cause_reason: z.string(),
  evidence: evidenceSchema,
  long_term: z.array(longTermSchema),
  limits: z.array(limitSchema),
  /** null where SPL is not valid, or levels came stated by tables. */
  spl_uncertainty: splUncertaintySchema.nullable().optional(),
});
export type Band = z.infer<typeof bandSchema>;

export const headlineSchema = z.object({
  criterion: criterionSchema,
  from_Hz: z.number(),
  to_Hz: z.number(),
  spl_dB: z.number(),
  at_least: z.boolean(),
  first: z
    .object({
      status: z.enum(["found", "below lowest"]),
      nominal_Hz: z.number(),
      spl_dB: value,
      nominal_dB: value,
      ceiling: z.boolean(),
    })
    .nullable(),
});

export const programmeSchema = z.object({
  spectrum: z.enum(["pink", "iec-60268-1"]),
  crest_dB: z.number(),
  criterion: criterionSchema,
  spl_dB: value,
  spl_dBA: value,
  bound_by: z.enum(["band", "peak"]).nullable(),
  first_band_Hz: value,
  at_least: z.boolean(),
  from_Hz: value,
  to_Hz: value,
});

/** Broadband loss and largest local excess of one run (domain.md section 5). */
export const shapeSchema = z.object({
  file: z.string(),
  level_dB: z.number(),
  kind: z.enum(RUN_KINDS),
  broadband_dB: value,
  excess_dB: value,
  excess_Hz: value,
});

export const warningSchema = z.object({
  code: z.string(),
  message: z.string(),
  file: z.string().optional(),
});
export type Warning = z.infer<typeof warningSchema>;

export const resultSchema = z.object({
  engine: z.object({ name: z.literal("tidemark"), version: z.string() }),
  settings: settingsSchema,
  environment: z.string(),
  distance_m: z.number(),
  /** Whether SPL holds in this environment; compression and onset hold in any. */
  spl_valid: z.boolean(),
  grid_Hz: z.array(z.number()),
  runs: z.array(resultRunSchema),
  bands: z.array(bandSchema),
  shape: z.array(shapeSchema),
  headline: z.array(headlineSchema),
  programme: z.array(programmeSchema),
  warnings: z.array(warningSchema),
});
export type Result = z.infer<typeof resultSchema>;
