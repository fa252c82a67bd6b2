/**
 * From a recording of the sweep to the response over lag: spectral division by the stimulus, cut off
 * at the end of the sweep (docs/domain.md section 1). Harmonic n appears R ln n before the linear part.
 */
import { AnalysisError } from "../errors/app-error";
import type { Plans } from "./cell-power";
import type { ComplexFft } from "./fft/complex-fft";
import { toFftSize, type RealFft } from "./fft/real-fft";

export interface SweepInUse {
  startHz: number;
  stopHz: number;
  rateConstantS: number;
  lengthS: number;
  rateHz: number;
}

/** A stimulus ready to divide by; one serves every run of its size. */
export interface Deconvolver {
  readonly size: number;
  readonly rateHz: number;
  /** Peak amplitude of the stimulus re full scale: responses are for a sweep of this amplitude. */
  readonly amplitude: number;
  /**
   * @param samples at most size of them; the rest counts as silence.
   * @returns response over circular lag, [size], recorded peak re full scale per steady sine of the
   *   sweep's amplitude; and its envelope in the arrival band. Both valid until the next call.
   */
  deconvolve(samples: Float32Array | Float64Array): Deconvolved;
}

export interface Deconvolved {
  response: Float64Array;
  envelope: ArrivalEnvelope;
}

/** |analytic response| limited to the arrival band, over lag. */
export interface ArrivalEnvelope {
  /** [points] squared. */
  power: Float64Array;
  /** Samples of the recording per point. */
  samplesPerPoint: number;
  /** Circular lag of the peak in the lower and in the upper part of the arrival band, samples. */
  lowLag: number;
  highLag: number;
}

/** Where arrivals are looked for, as far as the sweep covers it (docs/domain.md section 9). */
const ARRIVAL_BAND_HZ = [500, 2000] as const;
/** Share of the expected spectrum below which the stimulus is not divided by: the fades. */
const WEAKEST_SHARE = 0.35;

/** FFT size that holds recording and stimulus without folding one onto the other. */
export function toDeconvolutionSize(recording: number, stimulus: number): number {
  return toFftSize(Math.max(recording, stimulus));
}

/** Bins of the arrival band; the middle of a sweep that does not cover it. */
export function toArrivalBandHz({ startHz, stopHz }: SweepInUse): [number, number] {
  const low = Math.max(ARRIVAL_BAND_HZ[0], 1.5 * startHz);
  const high = Math.min(ARRIVAL_BAND_HZ[1], 0.95 * stopHz);
  return high >= 1.5 * low
    ? [low, high]
    : [startHz * (stopHz / startHz) ** 0.25, startHz * (stopHz / startHz) ** 0.9];
}

/**
 * @param stimulus what was played, with its leads; not modified.
 * @param size from toDeconvolutionSize.
 * @throws AnalysisError "stimulus.invalid" where the file holds no such sweep.
 */
export function createDeconvolver(
  stimulus: Float32Array | Float64Array,
  sweep: SweepInUse,
  size: number,
  plans: Plans,
): Deconvolver {
  const fft = plans.fft(size);
  fft.data.set(stimulus.subarray(0, size));
  fft.data.fill(0, Math.min(size, stimulus.length));
  const spectrum = fft.forward();
  const amplitude = toStimulusAmplitude(spectrum, sweep, size);
  invertInPlace(spectrum, sweep, size, amplitude);
  const [lowHz, highHz] = toArrivalBandHz(sweep);
  const firstBin = Math.ceil((lowHz * size) / sweep.rateHz);
  const lastBin = Math.floor((highHz * size) / sweep.rateHz);
  const count = lastBin - firstBin + 1;
  const zooms: Zooms = {
    whole: toZoom(count, plans),
    part: toZoom(toPartBins(count), plans),
  };
  const kept = {
    first: firstBin,
    last: lastBin,
    bins: new Float64Array(2 * (lastBin - firstBin + 1)),
  };
  return {
    size,
    rateHz: sweep.rateHz,
    amplitude,
    deconvolve(samples) {
      load(fft, samples);
      const response = fft.filter(fft.forwardPacked(), spectrum, kept);
      return { response, envelope: toEnvelope(kept.bins, zooms, size) };
    },
  };
}

function load(fft: RealFft, samples: Float32Array | Float64Array): void {
  if (samples.length > fft.size) {
    throw new AnalysisError(
      "analysis.argument",
      `${samples.length} samples do not fit a deconvolution of ${fft.size}.`,
    );
  }
  fft.data.set(samples);
  fft.data.fill(0, samples.length);
}

/** |X|^2 of a sweep of amplitude 1 at bin 1, in the units of an unscaled DFT: it falls as 1/f. */
function toPowerAtFirstBin({ rateConstantS, rateHz }: SweepInUse, size: number): number {
  return 0.25 * rateHz * rateConstantS * size;
}

/** Amplitude from the energy in the inner part of the sweep, where fades and edge ripple do not reach. */
function toStimulusAmplitude(spectrum: Float64Array, sweep: SweepInUse, size: number): number {
  const { startHz, stopHz, rateHz } = sweep;
  const span = stopHz / startHz;
  const from = Math.ceil((startHz * span ** 0.3 * size) / rateHz);
  const to = Math.floor((startHz * span ** 0.9 * size) / rateHz);
  let sum = 0;
  for (let k = from; k <= to; k += 1)
    sum += k * (spectrum[2 * k]! ** 2 + spectrum[2 * k + 1]! ** 2);
  const amplitude = Math.sqrt(sum / Math.max(1, to - from + 1) / toPowerAtFirstBin(sweep, size));
  if (!(amplitude > 1e-6) || to <= from) {
    throw new AnalysisError(
      "stimulus.invalid",
      `The stimulus holds no sweep from ${startHz} to ${stopHz} Hz.`,
    );
  }
  return amplitude;
}

/** conj(X) A / |X|^2 from start to stop, 0 elsewhere; held back where the fades leave little of X. */
function invertInPlace(
  spectrum: Float64Array,
  sweep: SweepInUse,
  size: number,
  amplitude: number,
): void {
  const { startHz, stopHz, rateHz } = sweep;
  const from = Math.ceil((0.9 * startHz * size) / rateHz);
  const to = Math.min(size / 2, Math.floor((stopHz * size) / rateHz));
  const weakest = (WEAKEST_SHARE * amplitude) ** 2 * toPowerAtFirstBin(sweep, size);
  for (let k = from; k <= to; k += 1) {
    const re = spectrum[2 * k]!;
    const im = spectrum[2 * k + 1]!;
    const scale = amplitude / Math.max(re * re + im * im, weakest / k);
    spectrum[2 * k] = re * scale;
    spectrum[2 * k + 1] = -im * scale;
  }
  spectrum.fill(0, 0, 2 * from);
  spectrum.fill(0, 2 * (to + 1));
}

/** Lower and upper part of the arrival band that are looked at on their own: a quarter of its bins each. */
const PART = 0.25;
const toPartBins = (count: number): number => Math.max(1, Math.floor(count * PART));

/** Transforms so many bins back to lag, at the pace of what they hold. */
interface Zoom {
  fft: ComplexFft;
  /** [bins] a raised cosine keeps the flanks short. */
  weights: Float64Array;
}

interface Zooms {
  whole: Zoom;
  part: Zoom;
}

function toZoom(bins: number, plans: Plans): Zoom {
  const weights = new Float64Array(bins);
  for (let k = 0; k < bins; k += 1) weights[k] = 1 - Math.cos((2 * Math.PI * (k + 0.5)) / bins);
  return { fft: plans.complex(toFftSize(2 * bins)), weights };
}

function toEnvelope(kept: Float64Array, { whole, part }: Zooms, size: number): ArrivalEnvelope {
  const count = kept.length / 2;
  const bins = toPartBins(count);
  const toLag = (peak: number): number => (peak * size) / part.fft.size;
  return {
    power: toLagPower(kept, 0, whole),
    samplesPerPoint: size / whole.fft.size,
    lowLag: toLag(toPeak(toLagPower(kept, 0, part))),
    highLag: toLag(toPeak(toLagPower(kept, count - bins, part))),
  };
}

/** |analytic response|^2 over lag, of the bins from one on. */
function toLagPower(kept: Float64Array, from: number, { fft, weights }: Zoom): Float64Array {
  const { data } = fft;
  for (let k = 0; k < weights.length; k += 1) {
    // Conjugated, so that the forward transform goes back to lag.
    data[2 * k] = weights[k]! * kept[2 * (from + k)]!;
    data[2 * k + 1] = -weights[k]! * kept[2 * (from + k) + 1]!;
  }
  data.fill(0, 2 * weights.length);
  const lag = fft.transform();
  const power = new Float64Array(fft.size);
  for (let m = 0; m < power.length; m += 1) {
    power[m] = lag[2 * m]! * lag[2 * m]! + lag[2 * m + 1]! * lag[2 * m + 1]!;
  }
  return power;
}

/** Index of the largest value. */
export function toPeak(power: Float64Array): number {
  let peak = 0;
  for (let m = 1; m < power.length; m += 1) if (power[m]! > power[peak]!) peak = m;
  return peak;
}
