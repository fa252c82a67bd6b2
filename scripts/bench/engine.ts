/**
 * The engine on four runs, stimulus, room noise and calibrator: warm in this process, and as the whole
 * analysis command. 2^19 and 2^21 samples are the length of each file.
 */
import { spawn } from "node:child_process";
import { mkdir, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { analyseSeries } from "../../lib/analysis/analyse-series";
import { Plans } from "../../lib/analysis/cell-power";
import type { RealFft } from "../../lib/analysis/fft/real-fft";
import { synthesiseStimulus, toSweepTiming } from "../../lib/analysis/sweep";
import { writeWav } from "../../lib/audio/write-wav";
import { toResultText } from "../../lib/result/result-text";
import { createFolderSource, readSeriesText } from "../../lib/series/folder-source";
import { parseSeries } from "../../lib/series/parse-series";
import { createRandom } from "../demo/random";
import type { Bench } from "../setup/bench";
import { cloneDir } from "../setup/bootstrap.mjs";
import { bundlePath, ensureBundle, listBundles } from "../setup/bundles.mjs";

const LEVELS = [76, 86, 96, 102];
const LEAD_S = 0.4;
const DELAY = 3000;

interface BenchSeries {
  folder: string;
  samples: number;
  rateHz: number;
}

const toSeries = (name: string, samples: number, rateHz: number): BenchSeries => ({
  folder: join(cloneDir, ".tidemark", "bench-engine", name),
  samples,
  rateHz,
});
const short = toSeries("2e19", 2 ** 19, 48_000);
const long = toSeries("2e21", 2 ** 21, 96_000);

/** A loudspeaker that clips softly, in noise: every part of the engine has something to find. */
async function make({ folder, samples, rateHz }: BenchSeries): Promise<void> {
  await mkdir(folder, { recursive: true });
  const wishedS = samples / rateHz - 2 * LEAD_S - 0.3;
  const shape = {
    startHz: 20,
    stopHz: 20_000,
    lengthS: wishedS,
    rateHz,
    leadInS: LEAD_S,
    leadOutS: LEAD_S,
  };
  const stimulus = synthesiseStimulus(shape);
  const random = createRandom(folder.slice(cloneDir.length));
  const write = (file: string, sample: (n: number) => number): Promise<void> =>
    writeFile(
      join(folder, file),
      writeWav([Float64Array.from({ length: samples }, (_, n) => sample(n))], rateHz),
    );
  for (const level of LEVELS) {
    const gain = 10 ** ((level - 102) / 20);
    await write(
      `${level}.wav`,
      (n) => 0.3 * Math.tanh(gain * (stimulus[n - DELAY] ?? 0)) + 1e-4 * random.normal(),
    );
  }
  await write("stimulus.wav", (n) => 0.7 * (stimulus[n] ?? 0));
  await write("room.wav", () => 1e-4 * random.normal());
  await write(
    "calibrator.wav",
    (n) => 0.05 * Math.sin((2 * Math.PI * 1000 * n) / rateHz) + 1e-4 * random.normal(),
  );
  const series = {
    loudspeaker: "Bench",
    environment: "anechoic",
    distance_m: 1,
    stimulus: {
      file: "stimulus.wav",
      start_Hz: 20,
      stop_Hz: 20_000,
      length_s: toSweepTiming(shape).lengthS,
      rate_Hz: rateHz,
      lead_in_s: LEAD_S,
      lead_out_s: LEAD_S,
    },
    calibration: { file: "calibrator.wav", level_dB: 94 },
    ambient: { file: "room.wav" },
    runs: LEVELS.map((level) => ({ file: `${level}.wav`, level_dB: level })),
  };
  await writeFile(join(folder, "series.json"), JSON.stringify(series));
}

const remove = (series: BenchSeries): Promise<void> =>
  rm(series.folder, { recursive: true, force: true });

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
      power: timed((into?: Float64Array) => plan.power(into)),
    };
  }
}

const plans = new TimedPlans();

/** From files to JSON text, ms; tables of earlier runs stay, as in a worker. */
async function analyseMs({ folder }: BenchSeries): Promise<number> {
  const from = performance.now();
  const series = parseSeries(readSeriesText(folder));
  toResultText(await analyseSeries(series, createFolderSource(folder), { plans }));
  return performance.now() - from;
}

async function warmUp(series: BenchSeries): Promise<void> {
  await make(series);
  for (let i = 0; i < 3; i += 1) await analyseMs(series);
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

async function prepareCommand(): Promise<void> {
  await make(short);
  const bundle = listBundles().find(({ name }) => name === "analyse");
  if (bundle === undefined) throw new Error("scripts/entries/analyse.ts is missing");
  await ensureBundle(bundle);
}

export const benches: Bench[] = [
  {
    key: "engine.series_2e19_ms",
    name: "analysis of four runs of 2^19 samples at 48 kHz, warm, one thread",
    unit: "ms",
    runs: 7,
    before: () => warmUp(short),
    run: () => analyseMs(short),
    after: () => remove(short),
  },
  {
    key: "engine.series_2e21_ms",
    name: "analysis of four runs of 2^21 samples at 96 kHz, warm, one thread",
    unit: "ms",
    runs: 7,
    before: () => warmUp(long),
    run: () => analyseMs(long),
    after: () => remove(long),
  },
  {
    key: "engine.fft_share",
    name: "share of the transforms in the analysis of 2^19 samples",
    unit: "of 1",
    runs: 7,
    before: () => warmUp(short),
    run: fftShare,
    after: () => remove(short),
  },
  {
    key: "engine.process_2e19_s",
    name: "the analysis command as a whole process, 2^19 samples",
    unit: "s",
    runs: 7,
    before: prepareCommand,
    run: async () => (await runCommand(short)).seconds,
    after: () => remove(short),
  },
  {
    key: "engine.rss_mib",
    name: "resident memory of the analysis command, 2^19 samples",
    unit: "MiB",
    runs: 3,
    before: prepareCommand,
    run: async () => (await runCommand(short)).rssMib,
    after: () => remove(short),
  },
];
