import { z } from "zod";
import {
  commentSchema,
  decisionCauseSchema,
  decisionSchema,
  runRequestSchema,
  signOffSchema,
} from "../review/review-schema";
import { criterionSchema } from "../series/series-schema";
import { limitSchema, onsetSchema } from "../result/result-schema";
import { idSchema, personSchema, reasonSchema } from "./common";
import { defineOperation } from "./operation";
import { seriesViewSchema } from "./series";

const analysisParams = z.strictObject({ analysisId: idSchema });
const seriesParams = z.strictObject({ seriesId: idSchema });

export const reviewSchema = z.object({
  analysis_id: idSchema,
  decisions: z.array(decisionSchema),
  comments: z.array(commentSchema),
  run_requests: z.array(runRequestSchema),
  /** The sign-off in force for the series; it may bind an older analysis. */
  sign_off: signOffSchema.nullable(),
  past_sign_offs: z.array(signOffSchema),
  bands_total: z.number().int(),
  bands_decided: z.number().int(),
  /** SHA-256 of the decisions as they stand; null until every band is decided. */
  decisions_digest: z.string().nullable(),
  two_person_rule: z.boolean(),
  /** Why the caller may not sign off now; null where they may. */
  sign_off_refusal: z.string().nullable(),
  /** Who else could, where the two-person rule stands in the caller's way. */
  others_who_may: z.array(personSchema),
});
export type Review = z.infer<typeof reviewSchema>;

export const getReview = defineOperation({
  id: "getReview",
  method: "GET",
  path: "/api/v1/analyses/{analysisId}/review",
  summary: "Decisions, comments, runs asked for and sign-off of an analysis",
  access: "see",
  params: analysisParams,
  status: 200,
  answer: reviewSchema,
  errors: ["not-found"],
});

/** All or nothing. A conflict answers 409 with `details.conflicts`: the decisions that others took meanwhile. */
export const decideBands = defineOperation({
  id: "decideBands",
  method: "PUT",
  path: "/api/v1/analyses/{analysisId}/decisions",
  summary: "Decide bands, or open them again with cause null",
  access: "decide",
  params: analysisParams,
  body: z.strictObject({
    decisions: z
      .array(
        z.strictObject({
          nominal_Hz: z.number(),
          cause: decisionCauseSchema.nullable(),
          reason: z.string().trim().max(500).nullable().default(null),
          /** Version that the caller saw; 0 where the band had no decision. */
          seen_version: z.number().int().min(0),
        }),
      )
      .min(1)
      .max(60),
  }),
  status: 200,
  answer: reviewSchema,
  errors: [
    "not-found",
    "request.invalid",
    "conflict.changed",
    "conflict.state",
    "run.reason-missing",
  ],
});

export const writeComment = defineOperation({
  id: "writeComment",
  method: "POST",
  path: "/api/v1/analyses/{analysisId}/comments",
  summary: "Comment on a band or on the series",
  access: "decide",
  params: analysisParams,
  body: z.strictObject({
    nominal_Hz: z.number().nullable(),
    words: z.string().trim().min(1).max(2000),
  }),
  status: 201,
  answer: commentSchema,
  errors: ["not-found", "request.invalid"],
});

export const requestRun = defineOperation({
  id: "requestRun",
  method: "POST",
  path: "/api/v1/series/{seriesId}/run-requests",
  summary:
    "Ask the tester for a run: it appears in the series while the loudspeaker still stands there",
  access: "decide",
  params: seriesParams,
  body: z.strictObject({
    level_dB: z.number().min(40).max(130),
    kind: z.enum(["short-term", "long-term"]).default("short-term"),
    variant: z.string().trim().min(1).max(120).nullable().default(null),
    reason: reasonSchema,
  }),
  status: 201,
  answer: runRequestSchema,
  errors: ["not-found", "request.invalid", "conflict.exists", "conflict.state"],
});

export const withdrawRunRequest = defineOperation({
  id: "withdrawRunRequest",
  method: "POST",
  path: "/api/v1/run-requests/{requestId}/withdraw",
  summary: "Withdraw a run that was asked for and not yet recorded",
  access: "decide",
  params: z.strictObject({ requestId: idSchema }),
  status: 200,
  answer: runRequestSchema,
  errors: ["not-found", "conflict.state"],
});

export const signOff = defineOperation({
  id: "signOff",
  method: "POST",
  path: "/api/v1/analyses/{analysisId}/sign-off",
  summary: "Sign off one analysis version, one criterion and all decisions",
  access: "decide",
  params: analysisParams,
  body: z.strictObject({ criterion: criterionSchema, decisions_digest: z.string().length(64) }),
  status: 201,
  answer: signOffSchema,
  errors: ["not-found", "request.invalid", "conflict.changed", "conflict.state", "auth.forbidden"],
});

export const reopenSeries = defineOperation({
  id: "reopenSeries",
  method: "POST",
  path: "/api/v1/series/{seriesId}/reopen",
  summary: "Take a sign-off back, with a reason",
  access: "decide",
  params: seriesParams,
  body: z.strictObject({ reason: reasonSchema }),
  status: 200,
  answer: seriesViewSchema,
  errors: ["not-found", "request.invalid", "conflict.state"],
});

/** What a newer analysis changes against an older one, band by band, and which decisions it would keep. */
export const compareAnalyses = defineOperation({
  id: "compareAnalyses",
  method: "GET",
  path: "/api/v1/analyses/{analysisId}/changes",
  summary: "Changes of an analysis against another, band by band",
  access: "see",
  params: analysisParams,
  query: z.strictObject({ against: idSchema }),
  status: 200,
  answer: z.object({
    bands: z.array(
      z.object({
        nominal_Hz: z.number(),
        cause: z.object({ before: z.string(), after: z.string() }),
        onset: z.object({ before: onsetSchema, after: onsetSchema }),
        limit: z.object({ before: limitSchema.nullable(), after: limitSchema.nullable() }),
        changed: z.boolean(),
        /** The decision of the older analysis, and whether it would still fit. */
        decision: decisionSchema.nullable(),
        keeps_decision: z.boolean(),
      }),
    ),
  }),
  errors: ["not-found", "request.invalid"],
});

/** Take over the decisions that still fit: an act of the caller, recorded as theirs. */
export const keepDecisions = defineOperation({
  id: "keepDecisions",
  method: "POST",
  path: "/api/v1/analyses/{analysisId}/decisions/keep",
  summary: "Take over those decisions of an older analysis that still fit",
  access: "decide",
  params: analysisParams,
  body: z.strictObject({ from: idSchema }),
  status: 200,
  answer: reviewSchema,
  errors: ["not-found", "request.invalid", "conflict.state"],
});

/** After an engine update: published values that would change, and by how much. */
export const listEngineChanges = defineOperation({
  id: "listEngineChanges",
  method: "GET",
  path: "/api/v1/engine-changes",
  summary: "Published values that the present engine would change",
  access: "see",
  status: 200,
  answer: z.object({
    engine_version: z.string(),
    series: z.array(
      z.object({
        series_id: idSchema,
        number: z.string(),
        name: z.string(),
        published_engine: z.string(),
        /** null until the present engine has analysed it. */
        changes: z
          .array(
            z.object({
              nominal_Hz: z.number(),
              published_dB: z.number().nullable(),
              now_dB: z.number().nullable(),
              words: z.string(),
            }),
          )
          .nullable(),
      }),
    ),
  }),
  errors: [],
});

export const reviewOperations = [
  getReview,
  decideBands,
  writeComment,
  requestRun,
  withdrawRunRequest,
  signOff,
  reopenSeries,
  compareAnalyses,
  keepDecisions,
  listEngineChanges,
] as const;
