import { z } from "zod";
import { resultSchema } from "../result/result-schema";
import { idSchema, personSchema, timeSchema } from "./common";
import { defineOperation } from "./operation";
import { failureSchema, progressSchema } from "./series";

export const ANALYSIS_STATES = ["queued", "running", "done", "failed", "cancelled"] as const;
export type AnalysisState = (typeof ANALYSIS_STATES)[number];

export const analysisViewSchema = z.object({
  id: idSchema,
  series_id: idSchema,
  version: z.number().int(),
  state: z.enum(ANALYSIS_STATES),
  progress: progressSchema.nullable(),
  failure: failureSchema.nullable(),
  engine_version: z.string(),
  requested_by: personSchema.nullable(),
  requested_at: timeSchema,
  started_at: timeSchema.nullable(),
  finished_at: timeSchema.nullable(),
  /** Runs that entered it. */
  run_ids: z.array(idSchema),
});
export type AnalysisView = z.infer<typeof analysisViewSchema>;

const seriesParams = z.strictObject({ seriesId: idSchema });
const params = z.strictObject({ analysisId: idSchema });

export const startAnalysis = defineOperation({
  id: "startAnalysis",
  method: "POST",
  path: "/api/v1/series/{seriesId}/analyses",
  summary:
    "Analyse the recordings that are in; the same inputs, settings and engine make no new version",
  access: "analyse",
  params: seriesParams,
  status: 202,
  answer: analysisViewSchema,
  errors: ["not-found", "conflict.state", "series.too-few-runs", "calibration.missing"],
});

export const listAnalyses = defineOperation({
  id: "listAnalyses",
  method: "GET",
  path: "/api/v1/series/{seriesId}/analyses",
  summary: "Versions of the analysis, newest first",
  access: "see",
  params: seriesParams,
  status: 200,
  answer: z.object({ analyses: z.array(analysisViewSchema) }),
  errors: ["not-found"],
});

export const getAnalysis = defineOperation({
  id: "getAnalysis",
  method: "GET",
  path: "/api/v1/analyses/{analysisId}",
  summary: "State and progress of an analysis",
  access: "see",
  params,
  status: 200,
  answer: analysisViewSchema,
  errors: ["not-found"],
});

/** The same JSON, byte for byte, as the analysis command prints for the same recordings. */
export const getResult = defineOperation({
  id: "getResult",
  method: "GET",
  path: "/api/v1/analyses/{analysisId}/result",
  summary: "The result of an analysis that is done",
  access: "see",
  params,
  status: 200,
  answer: resultSchema,
  errors: ["not-found", "conflict.state"],
});

/** Server-sent events: `analysis` with an AnalysisView at each change, until it has ended. */
export const followAnalysis = defineOperation({
  id: "followAnalysis",
  method: "GET",
  path: "/api/v1/analyses/{analysisId}/events",
  summary: "Follow an analysis live",
  access: "see",
  params,
  status: 200,
  answerMediaType: "text/event-stream",
  errors: ["not-found"],
});

/** Server-sent events: `change` whenever a recording, a check or an analysis of the series changes. */
export const followSeries = defineOperation({
  id: "followSeries",
  method: "GET",
  path: "/api/v1/series/{seriesId}/events",
  summary: "Follow recordings, checks and analyses of a series live",
  access: "see",
  params: seriesParams,
  status: 200,
  answerMediaType: "text/event-stream",
  errors: ["not-found"],
});

export const analysisOperations = [
  startAnalysis,
  listAnalyses,
  getAnalysis,
  getResult,
  followAnalysis,
  followSeries,
] as const;
