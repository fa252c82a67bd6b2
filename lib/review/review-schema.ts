/** Decisions of people on what was computed, and the sign-off that binds them. */
import * as z from "zod";
import { idSchema, personSchema, timeSchema } from "../api/common";
import { criterionSchema } from "../series/series-schema";
import { DECIDABLE_CAUSES } from "../series/vocabulary";

/** A decision may also confirm "distortion only", which is computed and has no key. */
export const DECISION_CAUSES = [...DECIDABLE_CAUSES, "distortion only"] as const;
export const decisionCauseSchema = z.enum(DECISION_CAUSES);
export type DecisionCause = z.infer<typeof decisionCauseSchema>;

export const decisionSchema = z.object({
  nominal_Hz: z.number(),
  /** Counted per band; sent back with a change, so that nobody's decision is lost. */
  version: z.number().int(),
  /** null: the band is open again. */
  cause: decisionCauseSchema.nullable(),
  computed_cause: decisionCauseSchema,
  changed: z.boolean(),
  reason: z.string().nullable(),
  by: personSchema,
  at: timeSchema,
});
export type Decision = z.infer<typeof decisionSchema>;

/** A decision as it stands in a sign-off: what is digested. Order of bands: rising frequency. */
export const signedDecisionSchema = z.object({
  nominal_Hz: z.number(),
  cause: decisionCauseSchema,
  computed_cause: decisionCauseSchema,
  reason: z.string().nullable(),
  by: z.string(),
  at: timeSchema,
});
export type SignedDecision = z.infer<typeof signedDecisionSchema>;

export const signOffSchema = z.object({
  id: idSchema,
  analysis_id: idSchema,
  analysis_version: z.number().int(),
  criterion: criterionSchema,
  decisions_digest: z.string(),
  result_digest: z.string(),
  one_person: z.boolean(),
  by: personSchema,
  at: timeSchema,
  reopened: z.object({ by: personSchema, at: timeSchema, reason: z.string() }).nullable(),
});
export type SignOff = z.infer<typeof signOffSchema>;

export const commentSchema = z.object({
  id: idSchema,
  nominal_Hz: z.number().nullable(),
  words: z.string(),
  by: personSchema,
  at: timeSchema,
});
export type BandComment = z.infer<typeof commentSchema>;

export const runRequestSchema = z.object({
  id: idSchema,
  slot: z.string(),
  level_dB: z.number(),
  kind: z.enum(["short-term", "long-term"]),
  variant: z.string().nullable(),
  reason: z.string(),
  by: personSchema,
  at: timeSchema,
  /** A recording stands in its place. */
  fulfilled: z.boolean(),
  withdrawn_at: timeSchema.nullable(),
});
export type RunRequest = z.infer<typeof runRequestSchema>;
