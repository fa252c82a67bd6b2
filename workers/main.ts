/**
 * The worker: arrival checks ahead of analyses, each with its own computing process, and a sweep
 * for what was forgotten. SIGTERM lets running jobs finish, or gives them back to the queue.
 */
import type { Job } from "bullmq";
import type { Logger } from "pino";
import { createDatabase } from "../db/client";
import { getEnvironment, toConnectionString } from "../lib/config/environment";
import { readSourceCommit } from "../lib/config/source-commit";
import { ANALYSE_SERIES } from "../lib/jobs/analyse-series";
import { CHECK_ARRIVAL } from "../lib/jobs/check-arrival";
import { openQueues, WorkerOnPostgres } from "../lib/jobs/queues";
import { createFileStore } from "../lib/storage/file-store";
import { stagingFolder, storeFolder } from "../lib/storage/folders";
import { analyseSeriesJob, giveUpAnalysis } from "./analyse-series";
import { checkArrivalJob, giveUpCheck } from "./check-arrival";
import { createComputingChild } from "./compute/computing-child";
import { createLog } from "./log";
import { openPost } from "./post";
import { repeat } from "./repeat";
import { sweepFiles, sweepJobs, sweepRetention, sweepUploads } from "./sweep";
import type { JobTools } from "./tools";

/** Short enough that the work of a killed worker is taken up within seconds. */
const LOCK_MS = 6000;
const STALLED_CHECK_MS = 3000;
const MOST_STALLS = 8;
/** Ends before the supervisor's patience does. */
const CLOSE_WITHIN_MS = 7000;
const JOB_SWEEP_MS = 5000;
const UPLOAD_SWEEP_MS = 60_000;
const RETENTION_SWEEP_MS = 3600 * 1000;
const FILE_SWEEP_MS = 1800 * 1000;

type Processor = (tools: JobTools, data: unknown) => Promise<void>;
type GiveUp = (tools: JobTools, data: unknown, error: unknown) => Promise<void>;

async function main(): Promise<void> {
  const environment = getEnvironment();
  const log = createLog(environment.logLevel);
  const queueConnection = toConnectionString(environment, "queue");
  const db = createDatabase({
    connectionString: toConnectionString(environment, "app"),
    max: 4 + environment.workerProcesses,
    applicationName: "tidemark worker",
    onIdleError: (error) => log.warn({ err: error }, "a database connection broke"),
  });
  const queues = await openQueues(queueConnection, (error) =>
    log.warn({ err: error }, "a connection of the queue broke"),
  );
  const store = createFileStore(storeFolder(environment.dataDir));
  const sourceCommit = readSourceCommit(process.cwd());
  const shared = { db, queues, store, log, sourceCommit };

  const start = (name: string, processor: Processor, giveUp: GiveUp) => {
    const tools: JobTools = { ...shared, child: createComputingChild() };
    const worker = new WorkerOnPostgres(name, (job: Job<unknown>) => processor(tools, job.data), {
      connection: { connectionString: queueConnection, max: 2 },
      concurrency: 1,
      lockDuration: LOCK_MS,
      stalledInterval: STALLED_CHECK_MS,
      maxStalledCount: MOST_STALLS,
      removeOnComplete: { count: 0 },
      removeOnFail: { count: 0 },
    });
    worker.on("error", (error) => log.warn({ err: error }, "the queue reports an error"));
    worker.on("failed", (job, error) => {
      if (job !== undefined && isFinal(job, error)) {
        void giveUp(tools, job.data, error).catch((fault: unknown) =>
          log.error({ err: fault, data: job.data }, "a failed job could not be written down"),
        );
      }
    });
    return { worker, child: tools.child };
  };

  const slots = [
    start(CHECK_ARRIVAL, checkArrivalJob, giveUpCheck),
    ...Array.from({ length: environment.workerProcesses }, () =>
      start(ANALYSE_SERIES, analyseSeriesJob, giveUpAnalysis),
    ),
  ];
  await Promise.all(slots.map(({ worker }) => worker.waitUntilReady()));
  const post = await openPost(environment, db, log);

  const sweepTools = { ...shared, stagingFolder: stagingFolder(environment.dataDir) };
  const sweeps = [
    repeat(JOB_SWEEP_MS, () => sweepJobs(sweepTools), log),
    repeat(UPLOAD_SWEEP_MS, () => sweepUploads(sweepTools), log),
    repeat(RETENTION_SWEEP_MS, () => sweepRetention(sweepTools, new Date()), log),
    repeat(FILE_SWEEP_MS, () => sweepFiles(sweepTools, new Date()), log),
  ];
  log.info({ analyses: environment.workerProcesses }, "worker is ready");

  await untilAskedToEnd();
  log.info("worker ends");
  sweeps.forEach((stop) => stop());
  post?.stop();
  await closeWithin(
    CLOSE_WITHIN_MS,
    [...slots.map(({ worker }) => worker), ...(post === null ? [] : [post])],
    log,
  );
  slots.forEach(({ child }) => child.close());
  await queues.close();
  await db.destroy();
}

/** No try is left, or the queue saw the job stall too often. */
function isFinal(job: Job<unknown>, error: Error): boolean {
  const stalled = error.message.includes("stalled more than allowable limit");
  return stalled || job.attemptsMade >= (job.opts.attempts ?? 1);
}

/** Running jobs finish; one that takes too long goes back: its lock runs out and its row tells. */
async function closeWithin(
  ms: number,
  workers: readonly { close: (force?: boolean) => Promise<void> }[],
  log: Logger,
): Promise<void> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<"late">((resolve) => {
    timer = setTimeout(() => resolve("late"), ms);
  });
  const closed = Promise.all(workers.map((worker) => worker.close()));
  if ((await Promise.race([closed, late])) === "late") {
    log.warn("a job did not end in time and goes back to the queue");
    process.exit(0);
  }
  clearTimeout(timer);
}

function untilAskedToEnd(): Promise<void> {
  return new Promise((resolve) => {
    for (const name of ["SIGTERM", "SIGINT"] as const) process.once(name, () => resolve());
  });
}

main().then(
  () => process.exit(0),
  (error: unknown) => {
    // The supervisor starts us again: a queue or database that was down at first is tried anew.
    createLog("error").fatal({ err: error }, "the worker cannot run");
    process.exit(1);
  },
);
