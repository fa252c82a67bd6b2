/** FFT of real data as a complex one of half the size. */
import { fillTwiddles, planComplexFft, toComplexDoubles } from "./complex-fft";
import { createWorkspace } from "../kernel/kernel";

const ODD_PARTS = [1, 3, 5, 9, 15];

/** Smallest size of at least points that the real FFT takes: 2^a * {1, 3, 5, 9, 15}, a at least 1. */
export function toFftSize(points: number): number {
  const sizes = ODD_PARTS.map((odd) => odd * 2 ** Math.max(1, Math.ceil(Math.log2(points / odd))));
  return Math.min(...sizes);
}

/** A stretch of bins that the caller wants to see on their way. */
export interface KeptBins {
  first: number;
  last: number;
  /** [2 (last - first + 1)] */
  bins: Float64Array;
}

export interface RealFft {
  readonly size: number;
  /** [size] scratch: fill it with samples before forward, with the packed spectrum before inverse. */
  readonly data: Float64Array;
  /**
   * Transforms the samples in data.
   * @returns [size] packed half-size transform: make bins of it with unpackBin. Valid until the next call.
   */
  forwardPacked(): Float64Array;
  /**
   * One-sided spectrum of the samples in data, unscaled.
   * @returns [2 (size/2 + 1)] re, im interleaved; a new array unless one is given.
   */
  forward(into?: Float64Array): Float64Array;
  /** |X_k|^2, [size/2 + 1], of the samples in data. Valid until the next call. */
  power(): Float64Array;
  /**
   * Multiplies the packed spectrum by a one-sided transfer function and returns to samples.
   * @param packed from forwardPacked; used as scratch.
   * @param transfer [2 (size/2 + 1)] re, im interleaved. The plan takes it over once: it must not change between calls.
   * @param kept receives the product in bins first to last, re and im interleaved, where given.
   * @returns [size] samples, scaled as the inverse of forward. Valid until the next call.
   */
  filter(packed: Float64Array, transfer: Float64Array, kept?: KeptBins): Float64Array;
}

/**
 * @param size even, half of it 2^a * {1, 3, 5, 9, 15}.
 * @throws AnalysisError "analysis.argument" for another size, "audio.too-large"
 */
export function planRealFft(size: number): RealFft {
  const half = size / 2;
  const pairs = Math.floor(half / 2) + 1;
  const workspace = createWorkspace(toComplexDoubles(half) + 2 * pairs + 3 * (half + 2));
  const { kernel, take } = workspace;
  const complex = planComplexFft(half, workspace);
  const { data } = complex;
  // e^(-2 pi i k / size) for k up to half / 2: the pair (k, half - k) shares one.
  const twiddles = take(2 * pairs);
  fillTwiddles(twiddles, size);
  const powers = take(half + 1);
  const multiplier = take(size + 2);
  let taken: Float64Array | null = null;

  const forwardPacked = (): Float64Array => complex.transform();

  const forward = (into = new Float64Array(size + 2)): Float64Array => {
    const z = forwardPacked();
    const zr = z[0]!;
    const zi = z[1]!;
    for (let k = 1; 2 * k <= half; k += 1) {
      const a = 2 * k;
      const b = 2 * (half - k);
      const wr = twiddles[a]!;
      const wi = twiddles[a + 1]!;
      const evenR = (z[a]! + z[b]!) / 2;
      const evenI = (z[a + 1]! - z[b + 1]!) / 2;
      const oddR = (z[a + 1]! + z[b + 1]!) / 2;
      const oddI = (z[b]! - z[a]!) / 2;
      const tr = oddR * wr - oddI * wi;
      const ti = oddR * wi + oddI * wr;
      into[a] = evenR + tr;
      into[a + 1] = evenI + ti;
      into[b] = evenR - tr;
      into[b + 1] = ti - evenI;
    }
    into[0] = zr + zi;
    into[1] = 0;
    into[size] = zr - zi;
    into[size + 1] = 0;
    return into;
  };

  const power = (): Float64Array => {
    const z = forwardPacked();
    kernel.power(z.byteOffset, twiddles.byteOffset, powers.byteOffset, half);
    powers[0] = (z[0]! + z[1]!) ** 2;
    powers[half] = (z[0]! - z[1]!) ** 2;
    return powers;
  };

  /** The product in some bins, before the walk over all of them overwrites the packed spectrum. */
  const keep = (z: Float64Array, transfer: Float64Array, { first, last, bins }: KeptBins): void => {
    for (let k = first; k <= last; k += 1) {
      const upper = 2 * k > half;
      const a = upper ? 2 * (half - k) : 2 * k;
      const b = a === 0 ? 0 : 2 * half - a;
      const wr = twiddles[a]!;
      const wi = twiddles[a + 1]!;
      const evenR = (z[a]! + z[b]!) / 2;
      const evenI = (z[a + 1]! - z[b + 1]!) / 2;
      const oddR = (z[a + 1]! + z[b + 1]!) / 2;
      const oddI = (z[b]! - z[a]!) / 2;
      const tr = oddR * wr - oddI * wi;
      const ti = oddR * wi + oddI * wr;
      const re = upper ? evenR - tr : evenR + tr;
      const im = upper ? ti - evenI : evenI + ti;
      bins[2 * (k - first)] = re * transfer[2 * k]! - im * transfer[2 * k + 1]!;
      bins[2 * (k - first) + 1] = re * transfer[2 * k + 1]! + im * transfer[2 * k]!;
    }
  };

  const filter = (z: Float64Array, transfer: Float64Array, kept?: KeptBins): Float64Array => {
    if (kept !== undefined) keep(z, transfer, kept);
    if (taken !== transfer) multiplier.set(transfer);
    taken = transfer;
    const scale = 1 / size;
    const dcR = (z[0]! + z[1]!) * transfer[0]!;
    const topR = (z[0]! - z[1]!) * transfer[size]!;
    kernel.filter(
      z.byteOffset,
      twiddles.byteOffset,
      multiplier.byteOffset,
      data.byteOffset,
      half,
      scale,
    );
    data[0] = (dcR + topR) * scale;
    data[1] = -(dcR - topR) * scale;
    const samples = complex.transform();
    for (let n = 1; n < size; n += 2) samples[n] = -samples[n]!;
    return samples;
  };

  return { size, data, forwardPacked, forward, power, filter };
}
