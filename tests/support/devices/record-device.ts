/** A four-run set of a device: stimulus through the effect, a room's noise on top, WAV files out, truth beside them. */
import { synthesiseStimulus, toSweepTiming, type StimulusShape } from "../../../lib/analysis/sweep";
import type { SeriesSource } from "../../../lib/analysis/measure-series";
import { toByteSource } from "../../../lib/audio/byte-source";
import { readRecording } from "../../../lib/audio/read-recording";
import { writeWav } from "../../../lib/audio/write-wav";
import { seriesSchema, type Series } from "../../../lib/series/series-schema";
import { Chain, createCrossoverHalf, createPeak, type Stage } from "../../../scripts/demo/filters";
import { createRandom } from "../../../scripts/demo/random";
import { record, upsample } from "../../../scripts/demo/resample";
import {
  recordCalibrator,
  recordRoom,
  toDigital,
  type Recorder,
} from "../../../scripts/demo/virtual-loudspeaker";
import { toPeak, type Device } from "./device";
import { TruthMeter, type SweepTruth } from "./sweep-truth";

export const LEVELS_DB = [76, 86, 96, 102] as const;
const PA_AT_0_DB = Math.SQRT2 * 20e-6;
const FULL_SCALE_DB = 118;

export interface DeviceSet {
  series: Series;
  source: SeriesSource;
  /** By run level: the same sweep without noise, measured another way. */
  truth: Map<number, SweepTruth>;
}

/** Behind the effect: a response that is not flat. Nothing in it depends on level. */
const createResponse = (rateHz: number): Stage =>
  new Chain([
    createCrossoverHalf("high-pass", 26, rateHz),
    createPeak({ frequencyHz: 120, q: 1, gainDb: 2.5 }, rateHz),
    createPeak({ frequencyHz: 1100, q: 1.4, gainDb: -2 }, rateHz),
    createPeak({ frequencyHz: 6500, q: 2, gainDb: 3 }, rateHz),
  ]);

export interface Conditions {
  /** Level of the room's noise, dB SPL. */
  roomDb?: number;
  /** By run level: what the player's step is off by, dB. */
  stepErrorDb?: Record<number, number>;
  /** By how much the recorder's clock runs fast. */
  driftPpm?: number;
  /** Reflections of a living room, which stand still; SPL is then not assessed. */
  inRoom?: boolean;
  /** A second channel records what the player gives out. */
  loopback?: boolean;
}

/** When reflections arrive after the sound itself, s, and what they keep of it. */
const REFLECTIONS = [
  [0.0031, 0.55],
  [0.0074, -0.4],
  [0.0122, 0.42],
  [0.0196, 0.3],
  [0.0287, -0.24],
  [0.0413, 0.17],
  [0.0571, 0.11],
] as const;

/** Adds each reflection to the sound as it was. */
function reflect(pressure: Float64Array, rateHz: number): void {
  const direct = pressure.slice();
  for (const [afterS, share] of REFLECTIONS) {
    const delay = Math.round(afterS * rateHz);
    for (let n = delay; n < pressure.length; n += 1)
      pressure[n] = (pressure[n] ?? 0) + share * (direct[n - delay] ?? 0);
  }
}

export async function recordDevice(
  device: Device,
  conditions: Conditions = {},
): Promise<DeviceSet> {
  const { roomDb = 34, stepErrorDb = {}, driftPpm = 0, inRoom, loopback } = conditions;
  const { rateHz, oversampling } = device;
  const shape: StimulusShape = {
    startHz: 20,
    stopHz: 20_000,
    lengthS: device.sweepS,
    rateHz,
    leadInS: 0.6,
    leadOutS: 0.6,
  };
  const random = createRandom(device.name);
  const recorder: Recorder = {
    fullScaleDb: FULL_SCALE_DB,
    distanceM: 1,
    noise: { roomDb, microphoneDb: 14 },
    latencyS: 0,
    driftPpm: 0,
    lengthS: 6,
  };
  const files = new Map<string, Uint8Array<ArrayBuffer>>();
  const write = (name: string, ...channels: Float64Array[]): void => {
    files.set(name, writeWav(channels, rateHz, device.format));
  };
  const tone = { levelDb: 94, frequencyHz: 1000 };
  write("calibrator.wav", recordCalibrator(tone, rateHz, recorder, random));
  write("room.wav", recordRoom(rateHz, { ...recorder, lengthS: 10 }, random));

  const stimulus = synthesiseStimulus(shape);
  const fast = upsample(stimulus, oversampling);
  const meter = new TruthMeter(stimulus, shape);
  const truth = new Map<number, SweepTruth>();
  for (const levelDb of LEVELS_DB) {
    const peak = toPeak(levelDb + (stepErrorDb[levelDb] ?? 0));
    const played = await device.effect(
      fast.map((x) => x * peak),
      rateHz * oversampling,
    );
    // Back to the scale of levels, in pascals at 1 m.
    const scale = (PA_AT_0_DB * 10 ** (levelDb / 20)) / toPeak(levelDb);
    const pressure = played.map((x) => x * scale);
    createResponse(rateHz * oversampling).process(pressure);
    if (inRoom === true) reflect(pressure, rateHz * oversampling);
    const latencyS = 0.05 + 0.4 * random.uniform();
    const heard = record(pressure, oversampling, {
      length: stimulus.length + Math.round((latencyS + 0.1) * rateHz),
      delay: latencyS * rateHz,
      driftPpm,
    });
    truth.set(levelDb, meter.measure(heard));
    const recorded = toDigital(heard, rateHz, recorder, random);
    if (loopback === true) {
      // The player's own output, a little earlier than the microphone hears it.
      const sent = record(
        fast.map((x) => x * peak),
        oversampling,
        { length: recorded.length, delay: (latencyS - 0.004) * rateHz, driftPpm },
      );
      write(`${levelDb}.wav`, recorded, sent);
    } else write(`${levelDb}.wav`, recorded);
  }
  return { series: toSeries(device, shape, conditions), source: toSource(files), truth };
}

function toSeries(device: Device, shape: StimulusShape, { inRoom, loopback }: Conditions): Series {
  return seriesSchema.parse({
    loudspeaker: device.name,
    environment: inRoom === true ? "in-room" : "anechoic",
    distance_m: 1,
    stimulus: {
      start_Hz: shape.startHz,
      stop_Hz: shape.stopHz,
      length_s: toSweepTiming(shape).lengthS,
      rate_Hz: shape.rateHz,
      lead_in_s: shape.leadInS,
      lead_out_s: shape.leadOutS,
    },
    calibration: { file: "calibrator.wav", level_dB: 94, frequency_Hz: 1000 },
    ambient: { file: "room.wav" },
    runs: LEVELS_DB.map((levelDb) => ({
      file: `${levelDb}.wav`,
      level_dB: levelDb,
      kind: "short-term",
      ...(loopback === true ? { loopback_channel: 2 } : {}),
    })),
  });
}

/** Files in memory, read as any other. */
export function toSource(files: ReadonlyMap<string, Uint8Array>): SeriesSource {
  return {
    async readRecording(file, channel, loopbackChannel) {
      const bytes = files.get(file);
      if (bytes === undefined) throw new Error(`no file ${file}`);
      const { recording } = await readRecording(toByteSource(bytes), {
        file,
        channel,
        loopbackChannel,
      });
      return recording;
    },
    readTable: (file) => Promise.reject(new Error(`no table ${file}`)),
  };
}
