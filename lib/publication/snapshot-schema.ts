/**
 * What a publication shows, whole and immutable: the page, card, report and data files are drawn
 * from this and from nothing else. Canonical JSON in the order of this schema; its SHA-256 names it.
 */
import { z } from "zod";
import { timeSchema } from "../api/common";
import {
  bandLevelSchema,
  headlineSchema,
  limitSchema,
  longTermSchema,
  onsetSchema,
  programmeSchema,
} from "../result/result-schema";
import { decisionCauseSchema } from "../review/review-schema";
import { loudspeakerStateSchema } from "../series/plan-schema";
import { criterionSchema } from "../series/series-schema";
import { ENVIRONMENTS } from "../series/vocabulary";

export const PUBLICATION_STATES = ["live", "replaced", "withdrawn"] as const;
export type PublicationState = (typeof PUBLICATION_STATES)[number];

export const snapshotSchema = z.object({
  format: z.literal("tidemark-publication-1"),
  lab: z.object({ slug: z.string(), name: z.string() }),
  series: z.object({ number: z.string(), slug: z.string() }),
  revision: z.number().int(),
  published_at: timeSchema,
  published_by: z.string(),
  change_note: z.string().nullable(),
  loudspeaker: z.object({
    maker: z.string(),
    model: z.string(),
    serial: z.string(),
    kind: z.string(),
    largest_dimension_m: z.number().nullable(),
    tuning_Hz: z.number().nullable(),
    photo_digest: z.string().nullable(),
  }),
  state: loudspeakerStateSchema,
  /** Who supplied the unit: "bought by the lab", "lent by the maker". */
  supplied_by: z.string(),
  measured: z.object({
    environment: z.enum(ENVIRONMENTS),
    distance_m: z.number(),
    temperature_C: z.number().nullable(),
    first_recording_at: timeSchema,
    sweep: z.object({ start_Hz: z.number(), stop_Hz: z.number(), length_s: z.number() }),
    levels_dB: z.array(z.number()),
    long_term_levels_dB: z.array(z.number()),
    calibration: z.string(),
  }),
  analysis: z.object({
    version: z.number().int(),
    engine_version: z.string(),
    result_digest: z.string(),
  }),
  criterion: criterionSchema,
  sign_off: z.object({
    by: z.string(),
    at: timeSchema,
    decisions_digest: z.string(),
    one_person: z.boolean(),
  }),
  spl_valid: z.boolean(),
  bands: z.array(
    z.object({
      nominal_Hz: z.number(),
      exact_Hz: z.number(),
      /** The limit under the signed criterion, and no other. */
      limit: limitSchema,
      onset: onsetSchema,
      cause: decisionCauseSchema,
      /** A person changed the computed cause, for this reason. */
      cause_changed: z.boolean(),
      cause_reason: z.string(),
      levels: z.array(
        bandLevelSchema.pick({
          level_dB: true,
          kind: true,
          spl_dB: true,
          expected_dB: true,
          compression_dB: true,
          uncertainty_dB: true,
          thd_percent: true,
          thd_quality: true,
          thd_orders: true,
        }),
      ),
      long_term: z.array(longTermSchema),
      /** Of the band's absolute levels, k = 2, one unit; absent in snapshots from before it was computed. */
      spl_uncertainty_dB: z.number().nullable().optional(),
    }),
  ),
  headline: headlineSchema.nullable(),
  headline_missing: z.string().nullable(),
  programme: z.array(programmeSchema),
  /** Uncertainty of a level in words and figure, k = 2, one unit. */
  uncertainty_dB: z.number().nullable(),
  /** The reviewer's own words; the figures stand above them and cannot be altered. */
  words: z.string(),
  maker_statement: z.object({ name: z.string(), words: z.string() }).nullable(),
  answer_to_maker: z.string().nullable(),
  evidence_public: z.boolean(),
});
export type Snapshot = z.infer<typeof snapshotSchema>;
