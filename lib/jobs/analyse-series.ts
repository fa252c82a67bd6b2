/** The job that computes an analysis. Ids only: the row is the truth. */
import { z } from "zod";
import type { JobQueue } from "./job-queue";

export const ANALYSE_SERIES = "analyse-series";

export const analyseSeriesPayloadSchema = z.strictObject({
  labId: z.uuid(),
  analysisId: z.uuid(),
});
export type AnalyseSeriesPayload = z.infer<typeof analyseSeriesPayloadSchema>;

/** Asking again while the job waits changes nothing. */
export async function enqueueAnalyseSeries(
  queues: { analyses: JobQueue<AnalyseSeriesPayload> },
  payload: AnalyseSeriesPayload,
): Promise<void> {
  const parsed = analyseSeriesPayloadSchema.parse(payload);
  await queues.analyses.add(ANALYSE_SERIES, parsed, { jobId: `analysis-${parsed.analysisId}` });
}
