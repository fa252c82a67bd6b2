/** The job that checks an arrived recording. Ids only: the row is the truth. */
import { z } from "zod";
import type { JobQueue } from "./job-queue";

export const CHECK_ARRIVAL = "check-arrival";

export const checkArrivalPayloadSchema = z.strictObject({ labId: z.uuid(), runId: z.uuid() });
export type CheckArrivalPayload = z.infer<typeof checkArrivalPayloadSchema>;

/** Asking again while the job waits changes nothing. */
export async function enqueueCheckArrival(
  queues: { checks: JobQueue<CheckArrivalPayload> },
  payload: CheckArrivalPayload,
): Promise<void> {
  const parsed = checkArrivalPayloadSchema.parse(payload);
  await queues.checks.add(CHECK_ARRIVAL, parsed, { jobId: `check-${parsed.runId}` });
}
