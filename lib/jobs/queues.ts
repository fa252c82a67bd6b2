/**
 * The queues on PostgreSQL: one for arrival checks, one for analyses, so that checks run ahead, and
 * one for mails, which the worker alone fills: the outbox says what is due.
 */
import { createPostgresBackend, withBackend } from "bullmq";
import { AppError } from "../errors/app-error";
import type { AnalyseSeriesPayload } from "./analyse-series";
import { ANALYSE_SERIES } from "./analyse-series";
import type { CheckArrivalPayload } from "./check-arrival";
import { CHECK_ARRIVAL } from "./check-arrival";
import { SEND_MAIL, type SendMailPayload } from "./send-mail";

const backend = withBackend(createPostgresBackend);
const QueueOnPostgres = backend.Queue;
export const WorkerOnPostgres = backend.Worker;

export interface MailQueue {
  mails: InstanceType<typeof QueueOnPostgres<SendMailPayload>>;
  close: () => Promise<void>;
}

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
  const close = await becomeReady([checks, analyses], onError);
  return { checks, analyses, close };
}

/** Connects as tidemark_queue. A mail is tried again by its row, not by the queue. @throws as openQueues */
export async function openMailQueue(
  connectionString: string,
  onError: (error: Error) => void,
): Promise<MailQueue> {
  const mails = new QueueOnPostgres<SendMailPayload>(SEND_MAIL, {
    connection: { connectionString, max: 1 },
    defaultJobOptions: { ...JOB_OPTIONS, attempts: 1 },
  });
  return { mails, close: await becomeReady([mails], onError) };
}

interface Opening {
  on: (event: "error", listener: (error: Error) => void) => unknown;
  waitUntilReady: () => Promise<unknown>;
  close: () => Promise<void>;
}

/** @returns closes them. @throws AppError "queue.unavailable" */
async function becomeReady(
  queues: readonly Opening[],
  onError: (error: Error) => void,
): Promise<() => Promise<void>> {
  const close = async (): Promise<void> => {
    await Promise.allSettled(queues.map((queue) => queue.close()));
  };
  for (const queue of queues) queue.on("error", onError);
  try {
    await Promise.all(queues.map((queue) => queue.waitUntilReady()));
  } catch (error) {
    await close();
    throw new AppError(
      "queue.unavailable",
      "The queue of the workers cannot be reached at the moment. What was saved is safe and is taken up when it is back.",
      { cause: error },
    );
  }
  return close;
}
