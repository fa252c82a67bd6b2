import { z } from "zod";
import { headlineSchema } from "../result/result-schema";
import { planSchema } from "../series/plan-schema";
import { RECORDING_ROLES } from "../series/planned-runs";
import { criterionSchema } from "../series/series-schema";
import { LIMIT_STATUSES, SERIES_STATES, SHORT_TERM_CAUSES } from "../series/vocabulary";
import { idSchema, pageQuery, personSchema, timeSchema } from "./common";
import { loudspeakerSchema } from "./loudspeakers";
import { defineOperation } from "./operation";

/** What the list shows of an analysed series for one criterion: no more than it draws. */
export const listLimitsSchema = z.object({
  criterion: criterionSchema,
  wall: z.array(
    z.object({
      nominal_Hz: z.number(),
      status: z.enum(LIMIT_STATUSES),
      /** SPL of the limit. */
      spl_dB: z.number().nullable(),
      /** Loudest level that was reached: top of the water. */
      reached_dB: z.number().nullable(),
    }),
  ),
  headline: headlineSchema.nullable(),
  /** Why there is no headline. */
  headline_missing: z.string().nullable(),
  /** Cause in the band that gives out first. */
  first_cause: z.union([z.enum(SHORT_TERM_CAUSES), z.literal("distortion only")]).nullable(),
});
export type ListLimits = z.infer<typeof listLimitsSchema>;

export const progressSchema = z.object({
  /** Stages done and in all, for the bar. */
  done: z.number().int(),
  total: z.number().int(),
  runs: z.array(
    z.object({
      file: z.string(),
      label: z.string(),
      stages: z.array(z.object({ stage: z.string(), state: z.enum(["waiting", "going", "done"]) })),
    }),
  ),
});
export type Progress = z.infer<typeof progressSchema>;

export const failureSchema = z.object({
  code: z.string(),
  message: z.string(),
  /** Slot of the run at fault, where one is. */
  slot: z.string().nullable(),
  file: z.string().nullable(),
  remedy: z.string(),
  /** Report number, to be quoted. */
  report: z.string(),
  at: timeSchema,
});
export type Failure = z.infer<typeof failureSchema>;

export const seriesRowSchema = z.object({
  id: idSchema,
  number: z.string().regex(/^S-\d{4,}$/),
  loudspeaker: z.object({
    id: idSchema,
    maker: z.string(),
    model: z.string(),
    kind: z.string(),
    serial: z.string(),
  }),
  state: z.enum(SERIES_STATES),
  /** "5 of 11 recordings", "run 3 of 6". */
  state_detail: z.string(),
  levels_dB: z.array(z.number()),
  captured: z.number().int(),
  planned: z.number().int(),
  limits: z.array(listLimitsSchema),
  /** Loudest level of any run, dB SPL at 1 m: for the hearing notice. */
  max_level_dB: z.number().nullable(),
  with: personSchema.nullable(),
  changed_at: timeSchema,
});
export type SeriesRow = z.infer<typeof seriesRowSchema>;

export const SERIES_SORTS = ["changed", "name", "number", "state", "reached"] as const;

export const seriesQuerySchema = z.strictObject({
  search: z.string().max(120).default(""),
  state: z.enum(SERIES_STATES).optional(),
  loudspeaker: idSchema.optional(),
  archived: z.enum(["no", "yes"]).default("no"),
  sort: z.enum(SERIES_SORTS).default("changed"),
  direction: z.enum(["up", "down"]).default("down"),
  ...pageQuery,
});

export const listSeries = defineOperation({
  id: "listSeries",
  method: "GET",
  path: "/api/v1/series",
  summary: "Series of the lab: filter, sort, search",
  access: "see",
  query: seriesQuerySchema,
  status: 200,
  answer: z.object({
    series: z.array(seriesRowSchema),
    /** Series that match search and state. */
    found: z.number().int(),
    /** Series in the lab, archived ones left out. */
    total: z.number().int(),
    /** By state, for the filter: the search counts, the state filter does not. */
    by_state: z.record(z.string(), z.number().int()),
  }),
  errors: ["request.invalid"],
});

/** One of the five boxes in the header of a series. */
export const stepSchema = z.object({
  step: z.enum(["captured", "analysed", "in review", "signed off", "published"]),
  /** 0 to 1: how much of the box is filled. */
  share: z.number().min(0).max(1),
  done: z.boolean(),
  /** "11 May, I. Varley", "5 of 11 recordings", "needs analyst". */
  detail: z.string(),
});
export type Step = z.infer<typeof stepSchema>;

export const plannedRunSchema = z.object({
  slot: z.string(),
  role: z.enum(RECORDING_ROLES),
  levelDb: z.number().nullable(),
  repeat: z.number().int(),
  variant: z.string().nullable(),
  label: z.string(),
  fileName: z.string(),
  stimulusPeakDbfs: z.number().nullable(),
  /** An analyst asked for it after the plan was fixed. */
  asked: z.object({ by: z.string(), reason: z.string() }).optional(),
});

export const seriesViewSchema = z.object({
  id: idSchema,
  number: z.string(),
  loudspeaker: loudspeakerSchema,
  state: z.enum(SERIES_STATES),
  steps: z.array(stepSchema),
  plan: planSchema,
  plan_version: z.number().int(),
  /** The plan is fixed once a recording is in. */
  plan_locked: z.boolean(),
  planned_runs: z.array(plannedRunSchema),
  failure: failureSchema.nullable(),
  latest_done_analysis: z.object({ id: idSchema, version: z.number().int() }).nullable(),
  latest_analysis: z
    .object({ id: idSchema, version: z.number().int(), state: z.string() })
    .nullable(),
  max_level_dB: z.number().nullable(),
  created_at: timeSchema,
  created_by: personSchema.nullable(),
  changed_at: timeSchema,
  archived_at: timeSchema.nullable(),
});
export type SeriesView = z.infer<typeof seriesViewSchema>;

const params = z.strictObject({ seriesId: idSchema });

export const createSeries = defineOperation({
  id: "createSeries",
  method: "POST",
  path: "/api/v1/series",
  summary: "Start a series of a loudspeaker",
  access: "capture",
  body: z.strictObject({ loudspeaker_id: idSchema, plan: planSchema.prefault({}) }),
  status: 201,
  answer: seriesViewSchema,
  errors: ["request.invalid", "not-found", "plan.invalid"],
});

export const getSeries = defineOperation({
  id: "getSeries",
  method: "GET",
  path: "/api/v1/series/{seriesId}",
  summary: "One series with plan and state",
  access: "see",
  params,
  status: 200,
  answer: seriesViewSchema,
  errors: ["not-found"],
});

export const updatePlan = defineOperation({
  id: "updatePlan",
  method: "PUT",
  path: "/api/v1/series/{seriesId}/plan",
  summary: "Replace the plan, until the first recording is in",
  access: "capture",
  params,
  body: z.strictObject({ plan: planSchema, plan_version: z.number().int() }),
  status: 200,
  answer: seriesViewSchema,
  errors: [
    "not-found",
    "request.invalid",
    "conflict.changed",
    "conflict.state",
    "plan.invalid",
    "plan.locked",
  ],
});

/** Criteria may be changed after the plan is fixed: they are a setting of the analysis. */
export const updateCriteria = defineOperation({
  id: "updateCriteria",
  method: "PUT",
  path: "/api/v1/series/{seriesId}/criteria",
  summary: "Change the criteria that the next analysis judges by",
  access: "analyse",
  params,
  body: z.strictObject({
    criteria: z.array(criterionSchema).min(1).max(12),
    plan_version: z.number().int(),
  }),
  status: 200,
  answer: seriesViewSchema,
  errors: ["not-found", "request.invalid", "conflict.changed", "conflict.state"],
});

export const removeSeries = defineOperation({
  id: "removeSeries",
  method: "DELETE",
  path: "/api/v1/series/{seriesId}",
  summary: "Delete an empty series, archive one with recordings",
  access: "capture",
  params,
  status: 200,
  answer: z.object({ outcome: z.enum(["deleted", "archived"]) }),
  errors: ["not-found", "conflict.state"],
});

export const restoreSeries = defineOperation({
  id: "restoreSeries",
  method: "POST",
  path: "/api/v1/series/{seriesId}/restore",
  summary: "Take a series back from the archive",
  access: "capture",
  params,
  status: 200,
  answer: seriesViewSchema,
  errors: ["not-found", "conflict.state"],
});

/** 24-bit WAV made on the fly. */
export const getStimulus = defineOperation({
  id: "getStimulus",
  method: "GET",
  path: "/api/v1/series/{seriesId}/stimulus/{slot}",
  summary: "Stimulus of one planned run; slot `conditioning` for the conditioning noise",
  access: "see",
  params: z.strictObject({ seriesId: idSchema, slot: z.string().max(60) }),
  status: 200,
  answerMediaType: "audio/wav",
  errors: ["not-found"],
});

export const getStimulusZip = defineOperation({
  id: "getStimulusZip",
  method: "GET",
  path: "/api/v1/series/{seriesId}/stimuli",
  summary: "All stimulus files and the capture check-list as one ZIP",
  access: "see",
  params,
  status: 200,
  answerMediaType: "application/zip",
  errors: ["not-found"],
});

export const historyEventSchema = z.object({
  id: z.string(),
  at: timeSchema,
  who: personSchema.nullable(),
  /** Name of the token, where a script did it. */
  by_token: z.string().nullable(),
  /** Stable word: "run.uploaded", "analysis.done". */
  act: z.string(),
  /** In words: "uploaded osier5a_91_short.wav for 91 dB short-term". */
  words: z.string(),
  reason: z.string().nullable(),
});
export type HistoryEvent = z.infer<typeof historyEventSchema>;

export const getSeriesHistory = defineOperation({
  id: "getSeriesHistory",
  method: "GET",
  path: "/api/v1/series/{seriesId}/history",
  summary: "Who did what, when and why, newest first",
  access: "see",
  params,
  status: 200,
  answer: z.object({ events: z.array(historyEventSchema) }),
  errors: ["not-found"],
});

export const seriesOperations = [
  listSeries,
  createSeries,
  getSeries,
  updatePlan,
  updateCriteria,
  removeSeries,
  restoreSeries,
  getStimulus,
  getStimulusZip,
  getSeriesHistory,
] as const;
