/**
 * Output limits of up to four loudspeakers side by side: what page, file and script get. The first
 * test is the reference; differences are re it. Numbers stand in the units of their names.
 */
import { z } from "zod";
import { decisionCauseSchema } from "../review/review-schema";
import { criterionSchema } from "../series/series-schema";
import { ENVIRONMENTS, LIMIT_STATUSES } from "../series/vocabulary";

const value = z.number().nullable();

/** The reference and three others. */
export const MOST_COMPARED = 4;
export const COMPARED_KINDS = ["short-term", "long-term"] as const;

export const comparedBandSchema = z.object({
  nominal_Hz: z.number(),
  exact_Hz: z.number(),
  status: z.enum(LIMIT_STATUSES),
  /** Level at 1 m at the limit; of the loudest run where it was not reached, of the quietest where it lies below. */
  spl_dB: value,
  /** Drives on the scale of the run levels. */
  nominal_dB: value,
  low_dB: value,
  high_dB: value,
  bound_by: z.enum(["compression", "thd"]).nullable(),
  cause: decisionCauseSchema,
  /** Of the level, k = 2. */
  uncertainty_dB: z.number(),
});
export type ComparedBand = z.infer<typeof comparedBandSchema>;

/** One test as it enters a comparison: from the lab's own result or from a publication. */
export const comparedTestSchema = z.object({
  /** Of the series; of a publication "lab/series". */
  id: z.string(),
  path: z.string(),
  maker: z.string(),
  model: z.string(),
  lab: z.string(),
  number: z.string(),
  stage: z.boolean(),
  environment: z.enum(ENVIRONMENTS),
  distance_m: z.number(),
  /** Levels of the runs that were judged, rising. */
  levels_dB: z.array(z.number()),
  /** The test states no uncertainty of its levels; the usual one was taken. */
  uncertainty_assumed: z.boolean(),
  bands: z.array(comparedBandSchema),
  /** The lowest limit over the range that stays together (docs/domain.md section 8). */
  reached: z
    .object({ from_Hz: z.number(), to_Hz: z.number(), spl_dB: z.number(), at_least: z.boolean() })
    .nullable(),
  /** Why there is no single figure. */
  reached_missing: z.string().nullable(),
});
export type ComparedTest = z.infer<typeof comparedTestSchema>;

export const differenceSchema = z.object({
  /** value: there is a difference; none: less than the uncertainty; unknown: the tests cannot tell. */
  shown: z.enum(["value", "none", "unknown"]),
  /** Over the reference: positive is louder. Null unless shown is "value". */
  difference_dB: value,
  /** At least so much louder, or so much quieter. */
  or_more: z.boolean(),
  /** Of both tests together, k = 2; null where the tests cannot tell. */
  uncertainty_dB: value,
});
export type Difference = z.infer<typeof differenceSchema>;

const partSchema = z.object({
  name: z.string(),
  from_Hz: z.number(),
  to_Hz: z.number(),
  /** Lowest limit in this part of the sound; null where none was assessed or a band lies below the lowest run. */
  reached_dB: value,
  at_least: z.boolean(),
  below_lowest: z.boolean(),
  /** Null for the reference. */
  difference: differenceSchema.nullable(),
});
export type ComparedPart = z.infer<typeof partSchema>;

const firstSchema = z.object({
  status: z.enum(["found", "below lowest"]),
  nominal_Hz: z.number(),
  spl_dB: value,
  /** Run level at which it happens; with a bracket it lies between two runs. */
  nominal_dB: value,
  bracket_dB: z.tuple([z.number(), z.number()]).nullable(),
  cause: decisionCauseSchema,
});

export const comparisonSchema = z.object({
  criterion: criterionSchema,
  kind: z.enum(COMPARED_KINDS),
  /** Of every test in it, rising. */
  bands_Hz: z.array(z.number()),
  tests: z.array(
    comparedTestSchema.extend({
      /** The band that needs the lowest drive; null where none gave out. */
      first: firstSchema.nullable(),
      parts: z.array(partSchema),
      /** [bands_Hz] over the reference; empty for the reference itself. */
      differences: z.array(differenceSchema),
    }),
  ),
  /** What was asked for and cannot stand beside the reference, and why. */
  left_out: z.array(
    z.object({ id: z.string(), maker: z.string(), model: z.string(), why: z.string() }),
  ),
});
export type Comparison = z.infer<typeof comparisonSchema>;
export type ComparisonTest = Comparison["tests"][number];
