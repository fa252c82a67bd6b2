/** A folder as the analysis command takes it, made of simulated recordings. */
import { mkdirSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { writeWav, type WavFormat } from "../../lib/audio/write-wav";
import {
  simulateNoise,
  simulateRecording,
  simulateTone,
  type SimulatedDevice,
} from "./simulated-sweep";

export interface SeriesFolderShape {
  levels: number[];
  device: (levelDb: number) => SimulatedDevice;
  rateHz?: number;
  lengthS?: number;
  noiseRms?: number;
  format?: WavFormat;
  /** Keys that replace or join those of series.json. */
  series?: Record<string, unknown>;
}

/** Writes series.json and its recordings; returns what series.json says. */
export function writeSeriesFolder(
  folder: string,
  shape: SeriesFolderShape,
): Record<string, unknown> {
  const { levels, device, rateHz = 48_000, lengthS = 3, noiseRms = 1e-5, format = "pcm24" } = shape;
  mkdirSync(folder, { recursive: true });
  const stimulus = { startHz: 20, stopHz: 20_000, lengthS, rateHz, leadInS: 0.4, leadOutS: 0.4 };
  const write = (file: string, samples: ArrayLike<number>): void =>
    writeFileSync(join(folder, file), writeWav([samples], rateHz, format));
  levels.forEach((levelDb, i) => {
    const recording = {
      stimulus,
      device: device(levelDb),
      delay: 4000 + i,
      after: 24_000,
      noiseRms,
      seed: i + 1,
    };
    write(`${levelDb}.wav`, simulateRecording(`${levelDb}.wav`, recording).samples);
  });
  write("calibrator.wav", simulateTone("calibrator.wav", rateHz, 0.05).samples);
  write("ambient.wav", simulateNoise("ambient.wav", rateHz, noiseRms, 4).samples);
  const series = {
    loudspeaker: "Simulated",
    environment: "anechoic",
    distance_m: 1,
    stimulus: {
      start_Hz: 20,
      stop_Hz: 20_000,
      length_s: lengthS,
      rate_Hz: rateHz,
      lead_in_s: 0.4,
      lead_out_s: 0.4,
    },
    // A recorded amplitude of 0.3 is 102 dB, so that a device may count its levels from there.
    calibration: { file: "calibrator.wav", level_dB: 86.44 },
    ambient: { file: "ambient.wav" },
    runs: levels.map((levelDb) => ({ file: `${levelDb}.wav`, level_dB: levelDb })),
    ...shape.series,
  };
  writeFileSync(join(folder, "series.json"), JSON.stringify(series, null, 2));
  return series;
}
