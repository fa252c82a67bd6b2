/** What a second computing process of the worker adds, over the messages that the worker sends. */
import { fork, type ChildProcess } from "node:child_process";
import { once } from "node:events";
import { join } from "node:path";
import { readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import type { Reply, Request } from "../../workers/compute/messages";
import type { Bench } from "../setup/bench";
import { bundlePath } from "../setup/bundles.mjs";
import { makeFolder, removeFolder, short } from "./support/engine-folders";

const ANALYSES = 6;
const WARM_UP_ANALYSES = 4;

let pool: ChildProcess[] = [];

function analyse(child: ChildProcess, id: number): Promise<void> {
  const series = parseSeries(readSeriesText(short.folder));
  const named = [
    series.stimulus.file,
    series.ambient?.file,
    series.calibration !== undefined && "file" in series.calibration
      ? series.calibration.file
      : undefined,
    ...series.runs.map(({ file }) => file),
  ].filter((file) => file !== undefined);
  const paths = Object.fromEntries(named.map((file) => [file, join(short.folder, file)]));
  const request: Request = { id, task: { kind: "analyse", series, paths } };
  return new Promise((resolve, reject) => {
    const hear = (reply: Reply): void => {
      if (reply.id !== id || reply.kind === "progress") return;
      child.off("message", hear);
      if (reply.kind === "answer") resolve();
      else reject(new Error(reply.error.message));
    };
    child.on("message", hear);
    child.send(request);
  });
}

async function analyseMany(child: ChildProcess, count: number): Promise<void> {
  for (let id = 0; id < count; id += 1) await analyse(child, id);
}

/** Analyses per second. */
async function measureRate(children: ChildProcess[]): Promise<number> {
  const from = performance.now();
  await Promise.all(children.map((child) => analyseMany(child, ANALYSES)));
  return (1000 * ANALYSES * children.length) / (performance.now() - from);
}

async function setUp(): Promise<void> {
  await makeFolder(short);
  const program = bundlePath("compute-process");
  pool = [0, 1].map(() =>
    fork(program, { serialization: "advanced", stdio: ["ignore", 2, 2, "ipc"] }),
  );
  await Promise.all(pool.map((child) => analyseMany(child, WARM_UP_ANALYSES)));
}

export const benches: Bench[] = [
  {
    key: "worker.second_process",
    name: "analyses per second of two computing processes against one",
    unit: "times",
    runs: 5,
    before: setUp,
    run: async () => {
      const one = await measureRate(pool.slice(0, 1));
      const two = await measureRate(pool);
      process.stderr.write(`  ${one.toFixed(2)} and ${two.toFixed(2)} analyses a second\n`);
      return two / one;
    },
    after: async () => {
      const ends = pool.map((child) => once(child, "close"));
      pool.forEach((child) => child.disconnect());
      await Promise.all(ends);
      await removeFolder(short);
    },
  },
];
