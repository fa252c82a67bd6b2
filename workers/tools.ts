/** What every job is given. */
import type { Logger } from "pino";
import type { Db } from "../db/client";
import type { LabScope } from "../db/in-lab";
import { enqueueFollowUp, type FollowUp } from "../lib/jobs/follow-up";
import type { Queues } from "../lib/jobs/queues";
import type { RecordingStore } from "../lib/storage/recording-store";
import type { ComputingChild } from "./compute/computing-child";

export interface JobTools {
  db: Db;
  queues: Queues;
  store: RecordingStore;
  child: ComputingChild;
  log: Logger;
  /** Of this program, for what it computes. */
  sourceCommit: string | null;
}

/** A worker acts for nobody: the trail names no person. */
export const workerScope = (labId: string): LabScope => ({ labId, accountId: null });

/** What this job leaves to others; should it fail, the sweep finds the rows. */
export async function follow({ queues, log }: JobTools, followUp: FollowUp): Promise<void> {
  try {
    await enqueueFollowUp(queues, followUp);
  } catch (error) {
    log.warn({ err: error }, "follow-up could not be enqueued; the sweep takes it up");
  }
}
