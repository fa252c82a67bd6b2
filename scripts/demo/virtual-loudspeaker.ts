/**
 * A loudspeaker in code, played through a virtual microphone. All of its truths are settings, and
 * every law can be measured with steady tones (steady-tone.ts), without any sweep.
 *
 *   file -> crossover -> limiter -> coil -> driver -> sum -> response -> distance -> recorder
 *
 * Everything between file and recorder runs at about 192 kHz, so that distortion does not fold back.
 * Levels are on the scale of a run: the level that a linear, flat loudspeaker gives at 1 m.
 */
import { Coil, type CoilSetting, type Heating } from "./coil";
import { Driver, Polynomial, type DriverSetting, type PolynomialSetting } from "./driver";
import { Chain, createCrossoverHalf, createPeak, Parallel, type Peak, type Stage } from "./filters";
import { Limiter, type LimiterSetting } from "./limiter";
import type { Random } from "./random";
import { record, upsample } from "./resample";
import { composeNoise, type RoomNoise } from "./room-noise";

export interface Way {
  /** Crossovers; null where the way is open. */
  fromHz: number | null;
  toHz: number | null;
  /** Of this way alone. */
  limiter?: LimiterSetting;
  /** Of the part of this way below a frequency. */
  bassLimiter?: LimiterSetting & { belowHz: number };
  coil?: CoilSetting;
  driver: DriverSetting | PolynomialSetting;
}

export interface VirtualLoudspeaker {
  /** From low to high. */
  ways: Way[];
  /** Over the whole signal, ahead of the crossover. */
  limiter?: LimiterSetting;
  /** Bumps and dips of the response. */
  response: Peak[];
}

const REFERENCE_PA = 20e-6;
const UNIT = REFERENCE_PA ** 2;
const PEAK_AT_0_DB = Math.SQRT2 * REFERENCE_PA;
const MODEL_RATE_HZ = 192_000;
const BLOCK = 4096;

/** @returns how many times faster than the file the model runs. */
export const toOversampling = (rateHz: number): number =>
  Math.max(1, Math.round(MODEL_RATE_HZ / rateHz));

/** Conditioning before a run: level of the whole signal, pink. */
export interface Conditioned {
  levelDb: number;
  minutes: number;
  gapS: number;
}

/** The loudspeaker from volts to pascals: input on the scale of a run's level, Pa; output Pa at 1 m. */
export function createLoudspeaker(
  loudspeaker: VirtualLoudspeaker,
  rateHz: number,
  conditioned: Conditioned | null = null,
): Stage {
  const ways = loudspeaker.ways.map((way) => new Chain(createWay(way, rateHz, conditioned)));
  const stages: Stage[] = [
    new Parallel(ways),
    ...loudspeaker.response.map((peak) => createPeak(peak, rateHz)),
  ];
  if (loudspeaker.limiter) stages.unshift(new Limiter(loudspeaker.limiter, UNIT, rateHz));
  return new Chain(stages);
}

function createWay(way: Way, rateHz: number, conditioned: Conditioned | null): Stage[] {
  const stages: Stage[] = [];
  if (way.fromHz !== null) stages.push(createCrossoverHalf("high-pass", way.fromHz, rateHz));
  if (way.toHz !== null) stages.push(createCrossoverHalf("low-pass", way.toHz, rateHz));
  if (way.bassLimiter) {
    const { belowHz, ...setting } = way.bassLimiter;
    stages.push(
      new Parallel([
        new Chain([
          createCrossoverHalf("low-pass", belowHz, rateHz),
          new Limiter(setting, UNIT, rateHz),
        ]),
        createCrossoverHalf("high-pass", belowHz, rateHz),
      ]),
    );
  }
  if (way.limiter) stages.push(new Limiter(way.limiter, UNIT, rateHz));
  if (way.coil) {
    const coil = new Coil(way.coil, UNIT, rateHz);
    if (conditioned) coil.heat(toHeating(way, conditioned));
    stages.push(coil);
  }
  stages.push(
    "resonanceHz" in way.driver
      ? new Driver(way.driver, PEAK_AT_0_DB, rateHz)
      : new Polynomial(way.driver, PEAK_AT_0_DB),
  );
  return stages;
}

/** Pink noise gives each way the power of its octaves, out of the ten from 20 Hz to 20 kHz. */
function toHeating(way: Way, conditioned: Conditioned): Heating {
  const share = Math.log2((way.toHz ?? 20_000) / (way.fromHz ?? 20)) / Math.log2(1000);
  return {
    levelDb: conditioned.levelDb + 10 * Math.log10(share),
    minutes: conditioned.minutes,
    gapS: conditioned.gapS,
  };
}

/** Plays a signal through a loudspeaker, block by block and in place. */
export function playThrough(loudspeaker: Stage, signal: Float64Array): void {
  for (let start = 0; start < signal.length; start += BLOCK) {
    loudspeaker.process(signal.subarray(start, Math.min(signal.length, start + BLOCK)));
  }
}

/**
 * Linear gain over 500 Hz to 2 kHz, mean square, uniform in lg f: what the tester's volume setting makes up for.
 * From the answer to a pulse far too small for any limit.
 */
export function computeMidGain(loudspeaker: VirtualLoudspeaker, rateHz = MODEL_RATE_HZ): number {
  const pulse = new Float64Array(Math.round(rateHz / 8));
  const height = PEAK_AT_0_DB;
  pulse[0] = height;
  playThrough(createLoudspeaker(loudspeaker, rateHz), pulse);
  const points = 49;
  let sum = 0;
  for (let i = 0; i < points; i += 1) {
    const omega = (2 * Math.PI * 500 * 4 ** ((i + 0.5) / points)) / rateHz;
    let [re, im] = [0, 0];
    for (let n = 0; n < pulse.length; n += 1) {
      re += (pulse[n] ?? 0) * Math.cos(omega * n);
      im += (pulse[n] ?? 0) * Math.sin(omega * n);
    }
    sum += (re * re + im * im) / height ** 2;
  }
  return Math.sqrt(sum / points);
}

export interface Playback {
  loudspeaker: VirtualLoudspeaker;
  /** [n] the file that is played, full scale 1. */
  stimulus: Float64Array;
  rateHz: number;
  /** Level of a sine at digital full scale, by the tester's volume setting. */
  fullScaleLevelDb: number;
  conditioned: Conditioned | null;
  /** computeMidGain of the loudspeaker, what the volume setting makes up for. */
  midGain: number;
}

export interface Recorder {
  /** SPL of a sine that just reaches full scale of the recording. */
  fullScaleDb: number;
  distanceM: number;
  noise: RoomNoise | null;
  /** From the start of the recording to the start of the file, sound's way included. */
  latencyS: number;
  driftPpm: number;
  /** Length of the recording. */
  lengthS: number;
}

/** Signal as the recording interface holds it: full scale 1, not yet rounded to bits, not clipped. */
export function recordPlayback(
  playback: Playback,
  recorder: Recorder,
  random: Random,
): Float64Array {
  const { loudspeaker, rateHz } = playback;
  const factor = toOversampling(rateHz);
  const pressure = upsample(playback.stimulus, factor);
  const drive = PEAK_AT_0_DB * 10 ** (playback.fullScaleLevelDb / 20);
  for (let n = 0; n < pressure.length; n += 1) pressure[n] = (pressure[n] ?? 0) * drive;
  playThrough(createLoudspeaker(loudspeaker, rateHz * factor, playback.conditioned), pressure);
  const heard = record(pressure, factor, {
    length: Math.round(recorder.lengthS * rateHz),
    delay: recorder.latencyS * rateHz,
    driftPpm: recorder.driftPpm,
  });
  const gain = 1 / (playback.midGain * recorder.distanceM);
  for (let n = 0; n < heard.length; n += 1) heard[n] = (heard[n] ?? 0) * gain;
  return toDigital(heard, rateHz, recorder, random);
}

/** A calibrator on the microphone: a steady tone. */
export function recordCalibrator(
  tone: { levelDb: number; frequencyHz: number },
  rateHz: number,
  recorder: Recorder,
  random: Random,
): Float64Array {
  const pressure = new Float64Array(Math.round(recorder.lengthS * rateHz));
  const peak = PEAK_AT_0_DB * 10 ** (tone.levelDb / 20);
  const phase = 2 * Math.PI * random.uniform();
  for (let n = 0; n < pressure.length; n += 1) {
    pressure[n] = peak * Math.sin(phase + (2 * Math.PI * tone.frequencyHz * n) / rateHz);
  }
  return toDigital(pressure, rateHz, recorder, random);
}

/** Nothing playing. */
export function recordRoom(rateHz: number, recorder: Recorder, random: Random): Float64Array {
  return toDigital(
    new Float64Array(Math.round(recorder.lengthS * rateHz)),
    rateHz,
    recorder,
    random,
  );
}

/** Pressure, Pa, on the scale of the recording, with its noise; changed in place. */
export function toDigital(
  pressure: Float64Array,
  rateHz: number,
  recorder: Recorder,
  random: Random,
): Float64Array {
  const scale = 1 / (PEAK_AT_0_DB * 10 ** (recorder.fullScaleDb / 20));
  const noise = recorder.noise
    ? composeNoise(recorder.noise, pressure.length, rateHz, random)
    : null;
  for (let n = 0; n < pressure.length; n += 1)
    pressure[n] = ((pressure[n] ?? 0) + (noise?.[n] ?? 0)) * scale;
  return pressure;
}
