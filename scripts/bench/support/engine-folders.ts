/** The folders that the engine's benches analyse: four runs, stimulus, room noise and calibrator, each of one length. */
import { mkdir, rm, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { synthesiseStimulus, toSweepTiming } from "../../../lib/analysis/sweep";
import { writeWav } from "../../../lib/audio/write-wav";
import { createRandom } from "../../demo/random";
import { cloneDir } from "../../setup/bootstrap.mjs";

const LEVELS = [76, 86, 96, 102];
const LEAD_S = 0.4;
const DELAY = 3000;

export interface BenchSeries {
  folder: string;
  samples: number;
  rateHz: number;
}

const toSeries = (name: string, samples: number, rateHz: number): BenchSeries => ({
  folder: join(cloneDir, ".tidemark", "bench-engine", name),
  samples,
  rateHz,
});
export const short = toSeries("2e19", 2 ** 19, 48_000);
export const long = toSeries("2e21", 2 ** 21, 96_000);

/** A loudspeaker that clips softly, in noise: every part of the engine has something to find. */
export async function makeFolder({ folder, samples, rateHz }: BenchSeries): Promise<void> {
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

export const removeFolder = (series: BenchSeries): Promise<void> =>
  rm(series.folder, { recursive: true, force: true });
