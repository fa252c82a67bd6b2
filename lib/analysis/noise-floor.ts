/**
 * Room and recording noise as the deconvolution sees it: a noise of one-sided density S leaves
 * E|H_n|^2 = 2 S(f) f T_w / R at output frequency f (docs/onset-notes.md section 4).
 */
import type { Plans } from "./cell-power";
import { toFftSize } from "./fft/real-fft";
import { meanUniformInLog } from "./log-means";

/** One-sided power density of a stretch of noise. */
export interface NoiseDensity {
  /** [bins] f S(f), full scale^2; bin k at k * binHz. */
  byFrequency: Float64Array;
  binHz: number;
  /** Length behind it. */
  durationS: number;
}

const LONGEST_BLOCK_S = 0.35;
/** So many blocks settle a density to a few tenths of a decibel in the narrowest band; they are spread over the whole. */
const MOST_BLOCKS = 32;
const SHORTEST_S = 0.1;
/** Ambient and silence within this ratio, octave by octave, are the same noise and share their time. */
const SAME_NOISE_RATIO = 2;

/**
 * Averaged periodograms (Hann, half overlapping).
 * @returns null where there is under 0.1 s of it.
 */
export function measureNoise(
  samples: Float32Array | Float64Array,
  rateHz: number,
  plans: Plans,
): NoiseDensity | null {
  if (samples.length < SHORTEST_S * rateHz) return null;
  const wished = Math.min(samples.length, Math.round(LONGEST_BLOCK_S * rateHz));
  const size = toFftSize(wished / 2 + 1);
  const fft = plans.fft(size);
  const window = plans.hann(size);
  const { data } = fft;
  const byFrequency = new Float64Array(size / 2 + 1);
  let blocks = 0;
  const hop = Math.max(size / 2, Math.floor((samples.length - size) / MOST_BLOCKS));
  for (let from = 0; from + size <= samples.length; from += hop, blocks += 1) {
    for (let n = 0; n < size; n += 1) data[n] = window[n]! * samples[from + n]!;
    const power = fft.power();
    for (let k = 0; k < power.length; k += 1) byFrequency[k]! += power[k]!;
  }
  const binHz = rateHz / size;
  const scale = 2 / (rateHz * 0.375 * size * Math.max(1, blocks));
  for (let k = 0; k < byFrequency.length; k += 1) byFrequency[k]! *= scale * k * binHz;
  return blocks === 0 ? null : { byFrequency, binHz, durationS: samples.length / rateHz };
}

/** Orders beyond this one leave nothing to be heard of. */
const LAST_TRACE_OF_ORDERS = 30;
const DECAY_S = 1;

/**
 * The noise of a run that has no silence and no recording of the room: what its response holds
 * between the last decay and the highest orders, where the sweep left nothing.
 *
 * @param response [size] over circular lag. Not modified.
 */
export function measureResponseNoise(
  response: Float64Array,
  arrivalLag: number,
  { rateConstantS, rateHz }: { rateConstantS: number; rateHz: number },
  plans: Plans,
): NoiseDensity | null {
  const from = Math.round(arrivalLag + DECAY_S * rateHz);
  const length = Math.floor(
    response.length - (DECAY_S + rateConstantS * Math.log(LAST_TRACE_OF_ORDERS)) * rateHz,
  );
  if (length <= 0) return null;
  const quiet = Float64Array.from({ length }, (_, n) => response[(from + n) % response.length]!);
  const noise = measureNoise(quiet, rateHz, plans);
  if (noise === null) return null;
  // The deconvolution raised a density S to 4 f S / (R rate^2).
  const { byFrequency, binHz } = noise;
  for (let k = 1; k < byFrequency.length; k += 1) {
    byFrequency[k]! *= (rateHz ** 2 * rateConstantS) / (4 * k * binHz);
  }
  return noise;
}

/** Mean of f S(f) in cells of output frequency; what lies under the first bins takes the lowest that is known. */
function toCells(
  noise: NoiseDensity,
  edgeHz: Float64Array,
  order: number,
  plans: Plans,
): Float64Array {
  const cells = new Float64Array(edgeHz.length - 1);
  meanUniformInLog(noise.byFrequency, noise.binHz, edgeHz, order, plans.logs, cells);
  const known = cells.findIndex((x) => !Number.isNaN(x));
  if (known > 0) cells.fill(cells[known]!, 0, known);
  return cells;
}

export interface NoiseSources {
  /** Recording with nothing playing. */
  ambient: NoiseDensity | null;
  /** The run's own silence. */
  silence: NoiseDensity | null;
  /** Variance of the format's rounding, full scale^2. */
  rounding: number;
}

/**
 * Mean of f S(f) per cell, full scale^2. Ambient noise gives the shape; where the run's own silence
 * differs by more than 3 dB in the octave around, its level counts, for that is what the run met.
 *
 * @param edgeHz edges of excitation frequency; the noise is taken at order times these.
 */
export function toNoiseCells(
  { ambient, silence, rounding }: NoiseSources,
  edgeHz: Float64Array,
  order: number,
  rateHz: number,
  plans: Plans,
): Float64Array {
  const own = silence === null ? null : toCells(silence, edgeHz, order, plans);
  const room = ambient === null ? null : toCells(ambient, edgeHz, order, plans);
  const cells = room ?? own ?? new Float64Array(edgeHz.length - 1);
  // A room that was recorded as digital silence says nothing.
  if (room !== null && own !== null && !room.some((x) => x > 0)) room.set(own);
  if (room !== null && own !== null) blend(cells, own, ambient!.durationS, silence!.durationS);
  for (let c = 0; c < cells.length; c += 1) {
    const frequencyHz = order * Math.sqrt(edgeHz[c]! * edgeHz[c + 1]!);
    cells[c] = Math.max(cells[c]!, (frequencyHz * rounding) / (rateHz / 2));
  }
  return cells;
}

const OCTAVE_REACH = 12;

function blend(room: Float64Array, own: Float64Array, roomS: number, ownS: number): void {
  const ratios = new Float64Array(room.length);
  for (let c = 0; c < room.length; c += 1) {
    let ownSum = 0;
    let roomSum = 0;
    const end = Math.min(room.length, c + OCTAVE_REACH + 1);
    for (let i = Math.max(0, c - OCTAVE_REACH); i < end; i += 1) {
      if (Number.isNaN(room[i]!) || Number.isNaN(own[i]!)) continue;
      ownSum += own[i]!;
      roomSum += room[i]!;
    }
    ratios[c] = roomSum > 0 && ownSum > 0 ? ownSum / roomSum : 1;
  }
  for (let c = 0; c < room.length; c += 1) {
    const ratio = ratios[c]!;
    const same = ratio < SAME_NOISE_RATIO && ratio > 1 / SAME_NOISE_RATIO;
    room[c]! *= same ? (roomS + ratio * ownS) / (roomS + ownS) : ratio;
  }
}

/** E|H_n|^2 from f S(f): the deconvolution's gain on noise, for a window of energyS. */
export function toNoiseGain(energyS: number, rateConstantS: number): number {
  return (2 * energyS) / rateConstantS;
}
