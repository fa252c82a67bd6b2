/**
 * The noise-free device under its sweep, measured with wide windows and a plain division of spectra
 * by another FFT than the engine's: the truth for levels, compression and harmonics.
 */
import FFT from "fft.js";
import { toSweepTiming, type StimulusShape } from "../../../lib/analysis/sweep";

export interface SweepTruth {
  /** By third octave n (1000 * 10^(n/10) Hz): fundamental, dB SPL, mean of p^2 uniform in lg f. */
  levelDb: Map<number, number>;
  /** By order, then by third octave n, where it lies in the measured range: ratio of rms to the fundamental. */
  harmonics: Map<number, Map<number, number>>;
}

const BANDS = Array.from({ length: 26 }, (_, i) => i - 14);
const ORDERS = [2, 3, 4, 5, 6, 7, 8, 9];
const POINTS = 96;
/** docs/domain.md section 4. */
const HIGHEST_SHARE_OF_RATE = 0.45;
const EDGE_S = 0.03;
const AFTER_S = 0.3;

/** Measures recordings of one stimulus: its spectrum and the tables of the transforms serve them all. */
export class TruthMeter {
  private readonly spectra = new Map<number, Spectrum>();
  private readonly stimuli = new Map<number, number[]>();

  /** @param stimulus peak 1, at shape.rateHz. */
  constructor(
    private readonly stimulus: Float64Array,
    private readonly shape: StimulusShape,
  ) {}

  /** @param heard pressure, Pa, without noise, at shape.rateHz. */
  measure(heard: Float64Array): SweepTruth {
    const { rateHz } = this.shape;
    const size = 2 ** Math.ceil(Math.log2(heard.length + rateHz));
    const transform = this.transformOf(size);
    const stimulus = this.stimuli.get(size) ?? transform.forward(this.stimulus);
    this.stimuli.set(size, stimulus);
    const response = deconvolve(heard, stimulus, transform, this.shape);
    const window = this.transformOf(2 ** Math.ceil(Math.log2(rateHz * 2)));
    return readTruth(response, window, this.shape);
  }

  private transformOf(size: number): Spectrum {
    const transform = this.spectra.get(size) ?? new Spectrum(size);
    this.spectra.set(size, transform);
    return transform;
  }
}

function readTruth(response: Float64Array, transform: Spectrum, shape: StimulusShape): SweepTruth {
  const { rateHz, stopHz } = shape;
  const at = (n: number): number => response[(n + response.length) % response.length] ?? 0;
  let arrival = 0;
  for (let n = 0; n < rateHz * 2; n += 1) if (Math.abs(at(n)) > Math.abs(at(arrival))) arrival = n;

  const { rateConstantS } = toSweepTiming(shape);
  /** Power of one order over frequency. */
  const toPower = (order: number): ((hz: number) => number) => {
    const lead = Math.round(rateConstantS * Math.log(order) * rateHz);
    const before = rateConstantS * Math.log((order + 1) / order) * 0.5;
    const behind =
      order === 1
        ? AFTER_S
        : Math.min(AFTER_S, rateConstantS * Math.log(order / (order - 1)) * 0.5);
    const [from, to] = [-Math.round(before * rateHz), Math.round(behind * rateHz)];
    const windowed = Float64Array.from({ length: to - from + 1 }, (_, i) => {
      const flanks = fade(i / rateHz) * fade((to - from - i) / rateHz);
      return at(arrival - lead + from + i) * flanks;
    });
    return transform.toPower(windowed, rateHz);
  };
  const meanOver = (n: number, power: (hz: number) => number, order = 1): number => {
    let sum = 0;
    for (let i = 0; i < POINTS; i += 1)
      sum += power(order * 1000 * 10 ** ((n - 0.5 + (i + 0.5) / POINTS) / 10));
    return sum / POINTS;
  };
  const fundamental = toPower(1);
  const means = new Map(BANDS.map((n) => [n, meanOver(n, fundamental)]));
  const topHz = Math.min(stopHz, HIGHEST_SHARE_OF_RATE * rateHz);
  const toRatios = (order: number): Map<number, number> => {
    const power = toPower(order);
    const within = BANDS.filter((n) => order * 1000 * 10 ** ((n + 0.5) / 10) <= topHz);
    return new Map(
      within.map((n) => [n, Math.sqrt(meanOver(n, power, order) / (means.get(n) ?? NaN))]),
    );
  };
  return {
    levelDb: new Map(
      BANDS.map((n) => [n, 10 * Math.log10((means.get(n) ?? NaN) / 2 / 20e-6 ** 2)]),
    ),
    harmonics: new Map(ORDERS.map((order) => [order, toRatios(order)])),
  };
}

/** Spectra divided between the sweep's ends; nothing outside. */
function deconvolve(
  heard: Float64Array,
  x: readonly number[],
  transform: Spectrum,
  { rateHz, startHz, stopHz }: StimulusShape,
): Float64Array {
  const { size } = transform;
  const y = transform.forward(heard);
  for (let k = 0; k < size; k += 1) {
    const hz = (Math.min(k, size - k) * rateHz) / size;
    const [a = 0, b = 0, c = 0, d = 0] = [y[2 * k], y[2 * k + 1], x[2 * k], x[2 * k + 1]];
    const keep = hz >= startHz && hz <= stopHz ? 1 / (c * c + d * d) : 0;
    y[2 * k] = (a * c + b * d) * keep;
    y[2 * k + 1] = (b * c - a * d) * keep;
  }
  return transform.backward(y);
}

class Spectrum {
  private readonly fft: FFT;

  constructor(readonly size: number) {
    this.fft = new FFT(size);
  }

  /** [2 size] real and imaginary parts in turn. */
  forward(samples: Float64Array): number[] {
    const padded = new Float64Array(this.size);
    padded.set(samples);
    const out = this.fft.createComplexArray();
    this.fft.realTransform(out, padded);
    this.fft.completeSpectrum(out);
    return out;
  }

  backward(spectrum: number[]): Float64Array {
    const out = this.fft.createComplexArray();
    this.fft.inverseTransform(out, spectrum);
    return Float64Array.from({ length: this.size }, (_, n) => out[2 * n] ?? 0);
  }

  /** Squared magnitude at any frequency, on straight lines between the bins. */
  toPower(samples: Float64Array, rateHz: number): (hz: number) => number {
    const bins = this.forward(samples);
    const power = (k: number): number => (bins[2 * k] ?? 0) ** 2 + (bins[2 * k + 1] ?? 0) ** 2;
    return (hz) => {
      const position = (hz * this.size) / rateHz;
      const low = Math.floor(position);
      return power(low) + (position - low) * (power(low + 1) - power(low));
    };
  }
}

const fade = (insideS: number): number =>
  insideS >= EDGE_S ? 1 : 0.5 - 0.5 * Math.cos((Math.PI * insideS) / EDGE_S);
