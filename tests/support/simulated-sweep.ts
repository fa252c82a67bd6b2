/**
 * Recordings with known truth: the sweep's phase is known at every sample, so a device is written as
 * the amplitudes of its harmonics over instantaneous frequency, free of aliasing by construction.
 */
import { planRealFft, toFftSize } from "../../lib/analysis/fft/real-fft";
import { toStimulusLayout, toSweepTiming, type StimulusShape } from "../../lib/analysis/sweep";
import type { SeriesSource } from "../../lib/analysis/measure-series";
import type { Recording } from "../../lib/analysis/types";

/** Seeded standard normal numbers (32-bit mix and Box-Muller). */
export function createNormal(seed: number): () => number {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x9e3779b9) >>> 0;
    let z = state;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return ((z ^ (z >>> 16)) >>> 0) / 2 ** 32;
  };
  return () => Math.sqrt(-2 * Math.log(uniform() + 1e-12)) * Math.cos(2 * Math.PI * uniform());
}

export interface SimulatedDevice {
  /** Amplitude of order n at instantaneous excitation frequency, for the drive of this run; order 1 first. */
  amplitudes: (frequencyHz: number) => number[];
  /** Linear part behind it: magnitude (dB) over frequency, made minimum phase. */
  responseDb?: (frequencyHz: number) => number;
}

export interface RecordingShape {
  stimulus: StimulusShape;
  device: SimulatedDevice;
  /** Samples from the start of the recording to the start of the stimulus. */
  delay: number;
  /** Samples after the stimulus. */
  after: number;
  /** Rms of white noise re full scale. */
  noiseRms?: number;
  seed?: number;
  bits?: 16 | 24;
  /** Player's clock over the recorder's, ppm. */
  driftPpm?: number;
}

export function simulateRecording(file: string, shape: RecordingShape): Recording {
  const { stimulus, device, delay, after, noiseRms = 0, seed = 1, bits, driftPpm = 0 } = shape;
  const { leadIn, total } = toStimulusLayout(stimulus);
  const { rateConstantS, lengthS } = toSweepTiming(stimulus);
  const samples = new Float64Array(delay + total + after);
  const cycles = stimulus.startHz * rateConstantS;
  for (let n = 0; n < samples.length; n += 1) {
    const timeS =
      ((n - delay) / stimulus.rateHz) * (1 + driftPpm * 1e-6) - leadIn / stimulus.rateHz;
    if (timeS < 0 || timeS > lengthS) continue;
    const growth = Math.exp(timeS / rateConstantS);
    const frequencyHz = stimulus.startHz * growth;
    const fade = fadeAt(timeS, 0.05) * fadeAt(lengthS - timeS, 0.01);
    const phase = 2 * Math.PI * cycles * growth;
    device.amplitudes(frequencyHz).forEach((amplitude, i) => {
      if ((i + 1) * frequencyHz < stimulus.rateHz / 2)
        samples[n]! += amplitude * fade ** (i + 1) * Math.sin((i + 1) * phase);
    });
  }
  if (device.responseDb !== undefined)
    filterMinimumPhase(samples, stimulus.rateHz, device.responseDb);
  const normal = createNormal(seed);
  if (noiseRms > 0) for (let n = 0; n < samples.length; n += 1) samples[n]! += noiseRms * normal();
  if (bits !== undefined) {
    const full = 2 ** (bits - 1);
    for (let n = 0; n < samples.length; n += 1) samples[n] = Math.round(samples[n]! * full) / full;
  }
  return {
    file,
    rateHz: stimulus.rateHz,
    samples,
    fullScale: bits === undefined ? 1 : 1 - 2 ** (1 - bits),
  };
}

const fadeAt = (fromEdgeS: number, fadeS: number): number =>
  fromEdgeS >= fadeS ? 1 : 0.5 - 0.5 * Math.cos((Math.PI * Math.max(0, fromEdgeS)) / fadeS);

/** Filters in place by a minimum-phase response of the given magnitude (folded cepstrum). */
export function filterMinimumPhase(
  samples: Float64Array,
  rateHz: number,
  responseDb: (frequencyHz: number) => number,
): void {
  const size = toFftSize(samples.length + rateHz);
  const plan = planRealFft(size);
  for (let k = 0; k < size; k += 1) {
    const bin = Math.min(k, size - k);
    plan.data[k] = (Math.LN10 / 20) * responseDb(Math.max(1, (bin * rateHz) / size));
  }
  const cepstrum = plan.forward();
  for (let n = 0; n < size; n += 1) {
    const c = cepstrum[2 * Math.min(n, size - n)]! / size;
    plan.data[n] = n === 0 || n === size / 2 ? c : n < size / 2 ? 2 * c : 0;
  }
  const logs = plan.forward();
  const transfer = new Float64Array(size + 2);
  for (let k = 0; k <= size / 2; k += 1) {
    const magnitude = Math.exp(logs[2 * k]!);
    transfer[2 * k] = magnitude * Math.cos(logs[2 * k + 1]!);
    transfer[2 * k + 1] = magnitude * Math.sin(logs[2 * k + 1]!);
  }
  plan.data.set(samples);
  plan.data.fill(0, samples.length);
  samples.set(plan.filter(plan.forwardPacked(), transfer).subarray(0, samples.length));
}

/** A calibrator's tone with hum and noise. */
export function simulateTone(
  file: string,
  rateHz: number,
  amplitude: number,
  frequencyHz = 1000,
  options: { humAmplitude?: number; noiseRms?: number; seconds?: number } = {},
): Recording {
  const { humAmplitude = 0, noiseRms = 0, seconds = 5 } = options;
  const normal = createNormal(99);
  const samples = Float64Array.from(
    { length: Math.round(seconds * rateHz) },
    (_, n) =>
      amplitude * Math.sin((2 * Math.PI * frequencyHz * n) / rateHz + 0.4) +
      humAmplitude * Math.sin((2 * Math.PI * 50 * n) / rateHz) +
      noiseRms * normal(),
  );
  return { file, rateHz, samples, fullScale: 1 };
}

export function simulateNoise(
  file: string,
  rateHz: number,
  rms: number,
  seconds: number,
  seed = 17,
): Recording {
  const normal = createNormal(seed);
  return {
    file,
    rateHz,
    samples: Float64Array.from({ length: Math.round(seconds * rateHz) }, () => rms * normal()),
    fullScale: 1,
  };
}

/** A source that holds its recordings in memory. */
export function toMemorySource(
  recordings: readonly Recording[],
  microphone?: { frequencyHz: number[]; levelDb: number[] },
): SeriesSource {
  return {
    readRecording(file) {
      const found = recordings.find((r) => r.file === file);
      return found === undefined ? Promise.reject(new Error(`no ${file}`)) : Promise.resolve(found);
    },
    readTable: () =>
      Promise.resolve({ ...(microphone ?? { frequencyHz: [], levelDb: [] }), harmonics: [] }),
  };
}
