/** The queues on PostgreSQL: one for arrival checks, one for analyses, so that checks run ahead. */
import { createPostgresBackend, withBackend } from "bullmq";
import { AppError } from "../errors/app-error";
import type { AnalyseSeriesPayload } from "./analyse-series";
import { ANALYSE_SERIES } from "./analyse-series";
import type { CheckArrivalPayload } from "./check-arrival";
import { CHECK_ARRIVAL } from "./check-arrival";

const backend = withBackend(createPostgresBackend);
const QueueOnPostgres = backend.Queue;
export const WorkerOnPostgres = backend.Worker;

export interface Queues {
  checks: InstanceType<typeof QueueOnPostgres<CheckArrivalPayload>>;
  analyses: InstanceType<typeof QueueOnPostgres<AnalyseSeriesPayload>>;
  close: () => Promise<void>;
}

/** A passing fault is tried again after 2, 4, 8 s; the row tells how it ended, so nothing is kept. */
const JOB_OPTIONS = {
  attempts: 4,
  backoff: { type: "exponential", delay: 2000 },
  removeOnComplete: true,
  removeOnFail: true,
} as const;

/**
 * Connects as tidemark_queue.
 *
 * @param onError told of a broken connection; the queue mends it by itself.
 * @throws AppError "queue.unavailable" where the first connection fails: the caller drops what it
 *   has and asks again later, since a queue that failed once never recovers.
 */
export async function openQueues(
  connectionString: string,
  onError: (error: Error) => void,
): Promise<Queues> {
  const options = {
    connection: { connectionString, max: 2 },
    defaultJobOptions: { ...JOB_OPTIONS },
  };
  const checks = new QueueOnPostgres<CheckArrivalPayload>(CHECK_ARRIVAL, options);
  const analyses = new QueueOnPostgres<AnalyseSeriesPayload>(ANALYSE_SERIES, options);
  const close = async (): Promise<void> => {
    await Promise.allSettled([checks.close(), analyses.close()]);
  };
  for (const queue of [checks, analyses]) queue.on("error", onError);
  try {
    await Promise.all([checks.waitUntilReady(), analyses.waitUntilReady()]);
  } catch (error) {
    await close();
    throw new AppError(
      "queue.unavailable",
      "The queue of the workers cannot be reached at the moment. What was saved is safe and is taken up when it is back.",
      { cause: error },
    );
  }
  return { checks, analyses, close };
}
