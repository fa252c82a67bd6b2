/** The web server's way to the queues; dropped and made anew where the first connection failed. */
import { getEnvironment, toConnectionString } from "../../lib/config/environment";
import { enqueueFollowUp, type FollowUp } from "../../lib/jobs/follow-up";
import { openQueues, type Queues } from "../../lib/jobs/queues";
import { log } from "./log";

const holder = globalThis as typeof globalThis & { tidemarkQueues?: Promise<Queues> | undefined };

/** @throws AppError "queue.unavailable" */
export function getQueues(): Promise<Queues> {
  holder.tidemarkQueues ??= openQueues(toConnectionString(getEnvironment(), "queue"), (error) =>
    log().warn({ err: error }, "a connection of the queue broke"),
  ).catch((error: unknown) => {
    holder.tidemarkQueues = undefined;
    throw error;
  });
  return holder.tidemarkQueues;
}

/**
 * Wakes the workers, after the commit. What is stored is safe either way: a queue that cannot be
 * reached only makes them find it by their own sweep, some seconds later.
 */
export async function follow(followUp: FollowUp): Promise<void> {
  if (followUp.runIds.length === 0 && followUp.analysisIds.length === 0) return;
  try {
    await enqueueFollowUp(await getQueues(), followUp);
  } catch (error) {
    log().warn({ err: error }, "workers could not be woken; their sweep takes it up");
  }
}
