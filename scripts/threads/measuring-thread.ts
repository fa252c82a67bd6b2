/** A thread beside a command's own, that measures half of the runs of a series. */
import { once } from "node:events";
import { parentPort, Worker } from "node:worker_threads";
import { Plans } from "../../lib/analysis/cell-power";
import type { RawRun } from "../../lib/analysis/measure-run";
import { measureRuns, type RunHelper } from "../../lib/analysis/measure-series";
import { createFolderSource } from "../../lib/series/folder-source";
import type { Series } from "../../lib/series/series-schema";
import type { SentError } from "../../workers/compute/messages";
import { fromSentError, toSentError } from "../../workers/compute/sent-error";

interface Request {
  folder: string;
  series: Series;
  runs: readonly number[];
}

/** An error loses its class on the way between threads: it travels as its code and figures. */
type Reply = ({ status: "fulfilled"; value: RawRun } | { status: "rejected"; reason: SentError })[];

/** @param program a bundle that calls serveMeasuring where it is no main thread. */
export function startMeasuringThread(program: string): {
  helperFor: (folder: string) => RunHelper;
  close: () => Promise<void>;
} {
  const thread = new Worker(program);
  const measure = async (request: Request): Promise<PromiseSettledResult<RawRun>[]> => {
    const answered = once(thread, "message");
    thread.postMessage(request, []);
    const [reply] = (await answered) as [Reply];
    return reply.map((run) =>
      run.status === "fulfilled" ? run : { ...run, reason: fromSentError(run.reason) },
    );
  };
  return {
    helperFor: (folder) => ({ measure: (series, runs) => measure({ folder, series, runs }) }),
    close: async () => void (await thread.terminate()),
  };
}

/** Answers requests for as long as the thread lives. */
export function serveMeasuring(): void {
  const plans = new Plans();
  parentPort?.on("message", (request: Request) => void answer(request, plans));
}

async function answer({ folder, series, runs }: Request, plans: Plans): Promise<void> {
  const reply = await measureRuns(series, createFolderSource(folder), runs, plans).then(
    (settled): Reply =>
      settled.map((run) =>
        run.status === "fulfilled" ? run : { status: run.status, reason: toSentError(run.reason) },
      ),
    (error: unknown): Reply => [{ status: "rejected", reason: toSentError(error) }],
  );
  parentPort?.postMessage(reply, []);
}
