/** What an act in the database leaves to the workers, once its transaction is committed. */
import { enqueueAnalyseSeries } from "./analyse-series";
import { enqueueCheckArrival } from "./check-arrival";
import type { Queues } from "./queues";

export interface FollowUp {
  labId: string;
  /** Recordings to be checked. */
  runIds: string[];
  /** Analyses to be computed. */
  analysisIds: string[];
}

/** Should this fail or never happen, the sweep of the workers finds the rows by themselves. */
export async function enqueueFollowUp(queues: Queues, followUp: FollowUp): Promise<void> {
  const { labId } = followUp;
  for (const runId of followUp.runIds) await enqueueCheckArrival(queues, { labId, runId });
  for (const analysisId of followUp.analysisIds) {
    await enqueueAnalyseSeries(queues, { labId, analysisId });
  }
}
