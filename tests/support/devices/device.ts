/**
 * Devices made of other programs' effects with known settings. Each runs at four or eight times the rate of
 * the recording, so that what it distorts does not fold back, as in an analogue device.
 *
 * Levels are those of runs: a sine of TOP_LEVEL_DB has a peak of TOP_DBFS.
 */
import { writeFile } from "node:fs/promises";
import { join } from "node:path";
import { writeWav } from "../../../lib/audio/write-wav";
import { runFfmpeg, runSox, withFolder } from "../programs";

export const TOP_LEVEL_DB = 102;
const TOP_DBFS = -3;

/** Peak, full scale 1, of a sine at a run level. */
export const toPeak = (levelDb: number): number => 10 ** ((TOP_DBFS + levelDb - TOP_LEVEL_DB) / 20);

/** Effects from samples to samples of the same number; a delay is allowed. */
export type Effect = (samples: Float64Array, rateHz: number) => Promise<Float64Array>;

export const ffmpegEffect =
  (filter: string): Effect =>
  (samples, rateHz) =>
    throughFile(samples, rateHz, (path) =>
      runFfmpeg([
        "-i",
        path,
        "-filter_complex",
        filter,
        "-c:a",
        "pcm_f32le",
        "-f",
        "f32le",
        "pipe:1",
      ]),
    );

export const soxEffect =
  (...effect: string[]): Effect =>
  (samples, rateHz) =>
    throughFile(samples, rateHz, (path) =>
      runSox(["-D", path, "-t", "raw", "-e", "floating-point", "-b", "32", "-", ...effect]),
    );

async function throughFile(
  samples: Float64Array,
  rateHz: number,
  run: (path: string) => Promise<Buffer>,
): Promise<Float64Array> {
  return withFolder(async (folder) => {
    const path = join(folder, "in.wav");
    await writeFile(path, writeWav([samples], rateHz, "float32"));
    const bytes = await run(path);
    const heard = new Float32Array(
      bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length),
    );
    const out = new Float64Array(samples.length);
    out.set(heard.subarray(0, out.length));
    return out;
  });
}

/** How an onset is told: the classes of the accuracy table. */
export type OnsetClass = "hard" | "soft" | "overload" | "none";

export interface Device {
  name: string;
  effect: Effect;
  onset: OnsetClass;
  /** Causes that are right for a band which loses 1 dB or more at the top. */
  causes: readonly string[];
  /** The law is the same at every frequency: one measurement at 1 kHz serves all bands. */
  sameEverywhere: boolean;
  /** Recording: rate, bits, sweep. */
  rateHz: 44_100 | 48_000 | 96_000;
  /** By how much the device runs faster; what clips hard needs more. */
  oversampling: 4 | 8;
  format: "pcm16" | "pcm24" | "float32";
  sweepS: number;
}

const peak = (levelDb: number): string => toPeak(levelDb).toFixed(6);
/** rms of a sine at a run level, re a full-scale square wave, dB: what level detectors compare. */
const rmsDb = (levelDb: number): number => 20 * Math.log10(toPeak(levelDb)) - 3.0103;

const device = (
  name: string,
  effect: Effect,
  onset: OnsetClass,
  causes: readonly string[],
  rest: Partial<Device> = {},
): Device => ({
  name,
  effect,
  onset,
  causes,
  sameEverywhere: true,
  rateHz: 48_000,
  oversampling: 4,
  format: "pcm24",
  sweepS: 5.5,
  ...rest,
});

/** ffmpeg's look-ahead peak limiter, without its automatic level. */
const limit = (levelDb: number, attackMs = 5, releaseMs = 50): string =>
  `alimiter=level=0:limit=${peak(levelDb)}:attack=${attackMs}:release=${releaseMs}:latency=1`;

const compress = (
  levelDb: number,
  ratio: number,
  knee: number,
  attackMs = 5,
  releaseMs = 50,
): string =>
  `acompressor=threshold=${(10 ** (rmsDb(levelDb) / 20)).toFixed(6)}:ratio=${ratio}:knee=${knee}:attack=${attackMs}:release=${releaseMs}:detection=rms`;

/** An effect on the part below a crossover alone. */
const below = (hz: number, effect: string): string =>
  `acrossover=split=${hz}:order=4th:precision=double[low][high];[low]${effect}[held];[held][high]amix=inputs=2:normalize=0`;

export const DEVICES: readonly Device[] = [
  device("no effect", (samples) => Promise.resolve(samples), "none", ["none"], {
    rateHz: 44_100,
    format: "pcm16",
  }),
  device("look-ahead peak limiter at 93 dB", ffmpegEffect(limit(93)), "hard", ["limiter"]),
  device("peak limiter at 88.5 dB", ffmpegEffect(limit(88.5)), "hard", ["limiter"], {
    rateHz: 44_100,
    format: "float32",
    sweepS: 11,
  }),
  device(
    "bass limiter below 120 Hz at 90 dB",
    ffmpegEffect(below(120, limit(90))),
    "hard",
    ["limiter", "compressor"],
    {
      sameEverywhere: false,
      sweepS: 11,
    },
  ),
  device("compressor 3:1 from 89 dB", ffmpegEffect(compress(89, 3, 1)), "soft", [
    "compressor",
    "limiter",
  ]),
  device("compressor 4:1 with a wide knee around 92 dB", ffmpegEffect(compress(92, 4, 4)), "soft", [
    "compressor",
    "limiter",
  ]),
  device(
    "hard clipper at 95 dB",
    ffmpegEffect(`asoftclip=type=hard:threshold=${peak(95)}`),
    "overload",
    ["overload"],
    { oversampling: 8 },
  ),
  device(
    "tanh clipper",
    ffmpegEffect(`asoftclip=type=tanh:threshold=${peak(101)}`),
    "overload",
    ["overload"],
    { sweepS: 11 },
  ),
  device("cubic clipper", ffmpegEffect(`asoftclip=type=cubic:threshold=${peak(100)}`), "overload", [
    "overload",
  ]),
  device(
    "clipper of the bass alone",
    ffmpegEffect(below(200, `asoftclip=type=hard:threshold=${peak(94)}`)),
    "overload",
    ["overload"],
    {
      sameEverywhere: false,
    },
  ),
  device(
    "compander as limiter at 91 dB",
    soxEffect(
      "compand",
      "0.004,0.05",
      `-70,-70,${rmsDb(91) + 3.0103},${rmsDb(91) + 3.0103},0,${rmsDb(91) + 3.0103}`,
    ),
    "hard",
    ["limiter"],
  ),
  device(
    "compander 2:1 with a 9 dB knee",
    soxEffect(
      "compand",
      "0.004,0.05",
      `9:-70,-70,${rmsDb(90) + 3.0103},${rmsDb(90) + 3.0103},0,${(rmsDb(90) + 3.0103) / 2}`,
    ),
    "soft",
    ["compressor"],
  ),
];
