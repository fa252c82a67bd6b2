/**
 * The engine on four runs, stimulus, room noise and calibrator: warm in this process, as the whole
 * analysis command, and against the same work in numpy and scipy. 2^19 and 2^21 samples are the
 * length of each file.
 */
import { spawn, spawnSync } from "node:child_process";
import { join } from "node:path";
import { median } from "simple-statistics";
import { z } from "zod";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { Plans } from "../../lib/analysis/cell-power";
import type { RunHelper } from "../../lib/analysis/measure-series";
import type { RealFft } from "../../lib/analysis/fft/real-fft";
import { toResultText } from "../../lib/result/result-text";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import type { Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { startMeasuringThread } from "../threads/measuring-thread";
import { bundlePath, ensureBundle, listBundles } from "../setup/bundles.mjs";
import { long, makeFolder, removeFolder, short, type BenchSeries } from "./support/engine-folders";

const WARM_RUNS = 7;
/** The compiler has settled by then; a worker is past it with its second series. */
const WARM_UP_RUNS = 10;

/** Plans that add up the time of their transforms. */
class TimedPlans extends Plans {
  transformMs = 0;

  override fft(size: number): RealFft {
    const plan = super.fft(size);
    const timed =
      <A extends unknown[], R>(work: (...args: A) => R) =>
      (...args: A): R => {
        const from = performance.now();
        const out = work(...args);
        this.transformMs += performance.now() - from;
        return out;
      };
    return {
      ...plan,
      forward: timed((into?: Float64Array) => plan.forward(into)),
      forwardPacked: timed(() => plan.forwardPacked()),
      filter: timed((...args: Parameters<RealFft["filter"]>) => plan.filter(...args)),
      power: timed(() => plan.power()),
    };
  }
}

const plans = new TimedPlans();

/** From files to JSON text, ms; tables of earlier runs stay, as in a worker. */
async function analyseMs({ folder }: BenchSeries, helper?: RunHelper): Promise<number> {
  const from = performance.now();
  const series = parseSeries(readSeriesText(folder));
  toResultText(await analyseSeries(series, createFolderSource(folder), { plans, helper }));
  return performance.now() - from;
}

async function warmUp(series: BenchSeries): Promise<void> {
  await makeFolder(series);
  for (let i = 0; i < WARM_UP_RUNS; i += 1) await analyseMs(series);
}

async function fftShare(): Promise<number> {
  plans.transformMs = 0;
  const ms = await analyseMs(short);
  return plans.transformMs / ms;
}

/** The built command in a process of its own. */
async function runCommand({ folder }: BenchSeries): Promise<{ seconds: number; rssMib: number }> {
  const report =
    'process.on("exit",()=>process.stderr.write("\\nrss "+process.resourceUsage().maxRSS))';
  const from = performance.now();
  const args = [
    "--import",
    `data:text/javascript,${encodeURIComponent(report)}`,
    bundlePath("analyse"),
    folder,
  ];
  const child = spawn(process.execPath, args, { stdio: ["ignore", "ignore", "pipe"] });
  let said = "";
  child.stderr.on("data", (bytes: Buffer) => (said += bytes.toString()));
  const code = await new Promise((done) => child.on("close", done));
  const seconds = (performance.now() - from) / 1000;
  const rss = /rss (\d+)$/.exec(said)?.[1];
  if (code !== 0 || rss === undefined)
    throw new Error(`the analysis command ended with ${String(code)}: ${said}`);
  return { seconds, rssMib: Number(rss) / 1024 };
}

async function prepareCommand(series: BenchSeries): Promise<void> {
  await makeFolder(series);
  const bundle = listBundles().find(({ name }) => name === "analyse");
  if (bundle === undefined) throw new Error("scripts/entries/analyse.ts is missing");
  await ensureBundle(bundle);
}

let thread: ReturnType<typeof startMeasuringThread> | undefined;

async function warmUpTwoCores(series: BenchSeries): Promise<void> {
  await prepareCommand(series);
  await warmUp(series);
  thread = startMeasuringThread(bundlePath("analyse"));
  for (let i = 0; i < WARM_UP_RUNS; i += 1)
    await analyseMs(series, thread.helperFor(series.folder));
}

/** Both cores over one, one after the other, so that whatever else the machine does meets both. */
async function compareCores(series: BenchSeries): Promise<number> {
  const one: number[] = [];
  const two: number[] = [];
  for (let i = 0; i < WARM_RUNS; i += 1) {
    one.push(await analyseMs(series));
    two.push(await analyseMs(series, thread?.helperFor(series.folder)));
  }
  process.stderr.write(
    `  one core: ${median(one).toFixed(0)} ms, both: ${median(two).toFixed(0)} ms\n`,
  );
  return median(two) / median(one);
}

const onTwoCores = (series: BenchSeries, key: string, name: string): Bench => ({
  key,
  name: `analysis of ${name} samples, warm, on both cores against one`,
  unit: "times",
  runs: 3,
  before: () => warmUpTwoCores(series),
  run: () => compareCores(series),
  after: async () => {
    await thread?.close();
    await removeFolder(series);
  },
});

const peerSchema = z.object({ warm_ms: z.number(), process_s: z.number() });

/** Runs the peer; its own figure, warm, and the time of the whole process. */
function runPeer({ folder }: BenchSeries, runs: number): z.infer<typeof peerSchema> {
  const from = performance.now();
  const script = join(cloneDir, "scripts/bench/peer.py");
  const { status, stdout, stderr } = spawnSync("python3", [script, folder, String(runs)], {
    encoding: "utf8",
  });
  if (status !== 0) throw new Error(`the peer ended with ${String(status)}: ${stderr}`);
  const said: unknown = JSON.parse(stdout);
  const process_s = (performance.now() - from) / 1000;
  return peerSchema.parse({ ...z.looseObject({}).parse(said), process_s });
}

function findPeerMissing(): string | null {
  const { status } = spawnSync("python3", ["-c", "import numpy, scipy"]);
  return status === 0 ? null : "python3 with scipy is not here (Debian: python3-scipy)";
}

/** Engine over peer, one after the other, so that whatever else the machine does meets both. */
async function comparePeer(series: BenchSeries): Promise<number> {
  const peer = runPeer(series, WARM_RUNS);
  const own: number[] = [];
  for (let i = 0; i < WARM_RUNS; i += 1) own.push(await analyseMs(series));
  process.stderr.write(
    `  engine: ${median(own).toFixed(0)} ms, peer: ${peer.warm_ms.toFixed(0)} ms\n`,
  );
  return median(own) / peer.warm_ms;
}

async function compareProcesses(series: BenchSeries): Promise<number> {
  const peer = runPeer(series, 1).process_s;
  const own = (await runCommand(series)).seconds;
  process.stderr.write(`  command: ${own.toFixed(2)} s, peer: ${peer.toFixed(2)} s\n`);
  return own / peer;
}

const againstPeer = (series: BenchSeries, name: string): Bench[] => [
  {
    key: `engine.series_${name}_re_peer`,
    name: `analysis of ${name} samples, warm, against numpy and scipy`,
    unit: "times",
    runs: 3,
    missing: findPeerMissing,
    before: () => warmUp(series),
    run: () => comparePeer(series),
    after: () => removeFolder(series),
  },
  {
    key: `engine.process_${name}_re_peer`,
    name: `the analysis command of ${name} samples against numpy and scipy, whole processes`,
    unit: "times",
    runs: 5,
    missing: findPeerMissing,
    before: () => prepareCommand(series),
    run: () => compareProcesses(series),
    after: () => removeFolder(series),
  },
];

export const benches: Bench[] = [
  {
    key: "engine.series_2e19_ms",
    name: "analysis of four runs of 2^19 samples at 48 kHz, warm, one thread",
    unit: "ms",
    runs: WARM_RUNS,
    before: () => warmUp(short),
    run: () => analyseMs(short),
    after: () => removeFolder(short),
  },
  {
    key: "engine.series_2e21_ms",
    name: "analysis of four runs of 2^21 samples at 96 kHz, warm, one thread",
    unit: "ms",
    runs: WARM_RUNS,
    before: () => warmUp(long),
    run: () => analyseMs(long),
    after: () => removeFolder(long),
  },
  {
    key: "engine.fft_share",
    name: "share of the transforms in the analysis of 2^19 samples",
    unit: "of 1",
    runs: WARM_RUNS,
    before: () => warmUp(short),
    run: fftShare,
    after: () => removeFolder(short),
  },
  {
    key: "engine.process_2e19_s",
    name: "the analysis command as a whole process, 2^19 samples",
    unit: "s",
    runs: WARM_RUNS,
    before: () => prepareCommand(short),
    run: async () => (await runCommand(short)).seconds,
    after: () => removeFolder(short),
  },
  {
    key: "engine.process_2e21_s",
    name: "the analysis command as a whole process, 2^21 samples",
    unit: "s",
    runs: 5,
    before: () => prepareCommand(long),
    run: async () => (await runCommand(long)).seconds,
    after: () => removeFolder(long),
  },
  {
    key: "engine.rss_mib",
    name: "resident memory of the analysis command, 2^19 samples",
    unit: "MiB",
    runs: 3,
    before: () => prepareCommand(short),
    run: async () => (await runCommand(short)).rssMib,
    after: () => removeFolder(short),
  },
  onTwoCores(short, "engine.two_cores_ratio", "2^19"),
  onTwoCores(long, "engine.two_cores_2e21_ratio", "2^21"),
  ...againstPeer(short, "2e19"),
  ...againstPeer(long, "2e21"),
];
