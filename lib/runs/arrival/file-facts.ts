/** Figures of a recording that need no sweep: peak, mean, clipping, and its picture. */
import type { Recording } from "../../analysis/types";
import type { ArrivalReport } from "../arrival-schema";

export interface FileFacts {
  /** Largest absolute sample, full scale = 1. */
  peak: number;
  /** Root of the mean square, the mean taken off. */
  rms: number;
  /** Mean, full scale = 1. */
  mean: number;
  /** Stretches at digital full scale, longest first; samples from `from` up to but not `to`. */
  clips: { from: number; to: number }[];
  /** Samples in all clipped stretches. */
  clippedSamples: number;
}

/** Stretches of fewer samples are ordinary peaks. */
const CLIP_RUN = 3;
const COLUMNS = 400;

/**
 * One pass over the samples.
 *
 * @param recording samples re full scale; integer files clip at their own largest value on either
 *   side, float files where they pass 1.
 */
export function measureFile({ samples, fullScale }: Recording): FileFacts {
  const float = fullScale >= 1;
  let peak = 0;
  let sum = 0;
  let squares = 0;
  let start = -1;
  const clips: { from: number; to: number }[] = [];
  const close = (to: number): void => {
    // A float sample beyond full scale is past it by itself; integers need a flat top.
    if (start >= 0 && (float || to - start >= CLIP_RUN)) clips.push({ from: start, to });
    start = -1;
  };
  for (let n = 0; n < samples.length; n += 1) {
    const sample = samples[n] ?? 0;
    const size = Math.abs(sample);
    if (size > peak) peak = size;
    sum += sample;
    squares += sample * sample;
    if (float ? size > 1 : size >= fullScale) {
      if (start < 0) start = n;
    } else if (start >= 0) close(n);
  }
  close(samples.length);
  const mean = samples.length === 0 ? 0 : sum / samples.length;
  const power = samples.length === 0 ? 0 : squares / samples.length - mean * mean;
  return {
    peak,
    rms: Math.sqrt(Math.max(0, power)),
    mean,
    clips: clips.sort((a, b) => b.to - b.from - (a.to - a.from)),
    clippedSamples: clips.reduce((total, clip) => total + clip.to - clip.from, 0),
  };
}

/** @returns lowest and highest sample of each of up to 400 columns, three decimals. */
export function drawEnvelope({ samples, rateHz }: Recording): ArrivalReport["envelope"] {
  const columns = Math.min(COLUMNS, samples.length);
  const low: number[] = [];
  const high: number[] = [];
  for (let column = 0; column < columns; column += 1) {
    const from = Math.floor((column * samples.length) / columns);
    const to = Math.floor(((column + 1) * samples.length) / columns);
    let least = Infinity;
    let most = -Infinity;
    for (let n = from; n < to; n += 1) {
      const sample = samples[n] ?? 0;
      if (sample < least) least = sample;
      if (sample > most) most = sample;
    }
    low.push(round(least, 3));
    high.push(round(most, 3));
  }
  return {
    from_s: 0,
    to_s: round(samples.length / rateHz, 4),
    low,
    high,
    from_Hz: null,
    to_Hz: null,
  };
}

/** Level of an amplitude re full scale, dBFS, one decimal more than is shown; null for nothing. */
export function toDbfs(amplitude: number): number | null {
  return amplitude > 0 ? round(20 * Math.log10(amplitude), 2) : null;
}

export function round(value: number, digits: number): number {
  const rounded = Number(value.toFixed(digits));
  return rounded === 0 ? 0 : rounded;
}
