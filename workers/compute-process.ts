/**
 * The computing process of a worker: takes a task, answers it, takes the next. It reads recordings,
 * writes nothing, and ends with its worker.
 */
import { closeSync, openSync, readFileSync } from "node:fs";
import type { SeriesSource } from "../lib/analysis/measure-series";
import { toFileSource, withFileSource, type ByteSource } from "../lib/audio/byte-source";
import { readRecording } from "../lib/audio/read-recording";
import { readTable } from "../lib/audio/read-table";
import { AppError } from "../lib/errors/app-error";
import { analyseSeries } from "../lib/analysis/analyse-series";
import { Plans } from "../lib/analysis/cell-power";
import { checkArrival } from "../lib/runs/arrival/check-arrival";
import type { AnalyseTask, CheckTask, Reply, Request } from "./compute/messages";
import { toSentError } from "./compute/sent-error";

/** Tables stay from one task to the next, up to about 100 MB of them. */
const MOST_POINTS = 2 ** 22;
let plans = new Plans();

const send = (reply: Reply): void => {
  process.send?.(reply);
};

process.on("message", (request: Request) => void answer(request));
// The worker ends in its own order; a signal to the whole group is not for us.
process.on("SIGINT", () => undefined);
process.on("SIGTERM", () => undefined);
process.on("disconnect", () => process.exit(0));

async function answer({ id, task }: Request): Promise<void> {
  if (plans.points > MOST_POINTS) plans = new Plans();
  try {
    const found = task.kind === "check" ? await check(task) : await analyse(task, id);
    send({ id, kind: "answer", answer: found });
  } catch (error) {
    send({ id, kind: "error", error: toSentError(error) });
  }
}

async function check({ request, paths }: CheckTask) {
  const opened: number[] = [];
  const open = (digest: string): ByteSource => {
    const descriptor = openSync(pathOf(paths, digest), "r");
    opened.push(descriptor);
    return toFileSource(descriptor);
  };
  try {
    return await checkArrival({ ...request, open }, plans);
  } finally {
    opened.forEach((descriptor) => closeSync(descriptor));
  }
}

async function analyse({ series, paths }: AnalyseTask, id: number) {
  return analyseSeries(series, createPathSource(paths), {
    plans,
    onProgress: (event) => send({ id, kind: "progress", event }),
  });
}

/** Recordings wherever the store has them, under the names of the series. */
function createPathSource(paths: Record<string, string>): SeriesSource {
  return {
    readRecording: async (file, channel, loopbackChannel) => {
      const { recording } = await withFileSource(pathOf(paths, file), (source) =>
        readRecording(source, { file, channel, loopbackChannel }),
      );
      return recording;
    },
    readTable: (file, columns) =>
      Promise.resolve(readTable(readFileSync(pathOf(paths, file)), file, columns)),
  };
}

function pathOf(paths: Record<string, string>, key: string): string {
  const path = paths[key];
  if (path === undefined) {
    throw new AppError("storage.missing", `${key} is not among the recordings of this work.`);
  }
  return path;
}
