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
/** Full scale of 16 bits: where a converter of 16 bits clips, in whatever file its samples lie. */
const FULL_SCALE = 1 - 2 ** -15;
const COLUMNS = 400;

/**
 * One pass over the samples.
 *
 * @param recording samples re full scale; flat tops at full scale are clipped, and in float files
 *   whatever passes it.
 */
export function measureFile({ samples, fullScale }: Recording): FileFacts {
  const float = fullScale >= 1;
  const full = Math.min(fullScale, FULL_SCALE);
  let peak = 0;
  let sum = 0;
  let squares = 0;
  let start = -1;
  let beyond = false;
  const clips: { from: number; to: number }[] = [];
  const close = (to: number): void => {
    // A float sample beyond full scale is past it by itself; else it needs a flat top.
    if (start >= 0 && (beyond || to - start >= CLIP_RUN)) clips.push({ from: start, to });
    start = -1;
    beyond = false;
  };
  for (let n = 0; n < samples.length; n += 1) {
    const sample = samples[n] ?? 0;
    const size = Math.abs(sample);
    if (size > peak) peak = size;
    sum += sample;
    squares += sample * sample;
    if (size >= full) {
      if (start < 0) start = n;
      if (float && size > 1) beyond = true;
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

/** The whole recording, or the stretch that a sweep takes, whether it is all there or not. */
export interface EnvelopeSpan {
  fromS: number;
  toS: number;
  /** Frequencies of the sweep there; null without one. */
  fromHz: number | null;
  toHz: number | null;
}

/** @returns lowest and highest sample of each of up to 400 columns, three decimals; 0 where nothing was recorded. */
export function drawEnvelope(
  { samples, rateHz }: Recording,
  span: EnvelopeSpan = { fromS: 0, toS: samples.length / rateHz, fromHz: null, toHz: null },
): ArrivalReport["envelope"] {
  const start = Math.round(span.fromS * rateHz);
  const length = Math.round(span.toS * rateHz) - start;
  const columns = Math.min(COLUMNS, length);
  const low: number[] = [];
  const high: number[] = [];
  for (let column = 0; column < columns; column += 1) {
    const from = Math.max(0, start + Math.floor((column * length) / columns));
    const to = Math.min(samples.length, start + Math.floor(((column + 1) * length) / columns));
    let least = Infinity;
    let most = -Infinity;
    for (let n = from; n < to; n += 1) {
      const sample = samples[n] ?? 0;
      if (sample < least) least = sample;
      if (sample > most) most = sample;
    }
    low.push(from < to ? round(least, 3) : 0);
    high.push(from < to ? round(most, 3) : 0);
  }
  return {
    from_s: round(span.fromS, 4),
    to_s: round(span.toS, 4),
    low,
    high,
    from_Hz: span.fromHz,
    to_Hz: span.toHz,
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
