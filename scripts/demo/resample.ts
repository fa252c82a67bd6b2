/** Up to the rate of the model and down to the rate of the recorder, by Kaiser-windowed sinc. */

/** About 100 dB of stop band. */
const KAISER_BETA = 10.06;
/** Taps on each side, in samples of the slower rate. */
const HALF_WIDTH = 20;

/**
 * Zero-stuffing and low-pass in one.
 * @param samples [n] not modified.
 * @returns [n * factor], no delay; the ends see silence beyond.
 */
export function upsample(samples: Float64Array, factor: number): Float64Array {
  if (factor === 1) return samples.slice();
  const out = new Float64Array(samples.length * factor);
  for (let phase = 0; phase < factor; phase += 1) {
    const kernel = toKernel(phase / factor, 1);
    for (let n = 0; n < samples.length; n += 1) {
      out[n * factor + phase] = weigh(kernel, samples, n - HALF_WIDTH + 1);
    }
  }
  return out;
}

/**
 * The recorder's view of a faster signal: low-pass, then one sample at every tick of its own clock.
 *
 * @param fast [n] at `factor` times the recorder's nominal rate. Not modified.
 * @param delay samples of the recorder that pass before fast[0].
 * @param driftPpm by how much the recorder's clock runs fast.
 * @returns [length]
 */
export function record(
  fast: Float64Array,
  factor: number,
  { length, delay, driftPpm }: { length: number; delay: number; driftPpm: number },
): Float64Array {
  const out = new Float64Array(length);
  const step = factor / (1 + driftPpm * 1e-6);
  const half = HALF_WIDTH * factor;
  const kernels = new Map<number, Float64Array>();
  for (let n = 0; n < length; n += 1) {
    const position = n * step - delay * factor;
    const whole = Math.floor(position);
    // A 4096th of a fast sample: below 24 bits for whatever the recorder can hold.
    const fraction = Math.round((position - whole) * 4096) / 4096;
    let kernel = kernels.get(fraction);
    if (kernel === undefined) {
      kernel = toKernel(fraction, factor);
      kernels.set(fraction, kernel);
    }
    out[n] = weigh(kernel, fast, whole - half + 1);
  }
  return out;
}

/** Sum of kernel times samples from `first` on; silence beyond the ends. */
function weigh(kernel: Float64Array, samples: Float64Array, first: number): number {
  const taps = kernel.length;
  if (first < 0 || first + taps > samples.length) {
    let edge = 0;
    for (let k = 0; k < taps; k += 1) edge += (kernel[k] ?? 0) * (samples[first + k] ?? 0);
    return edge;
  }
  // Four sums side by side: each addition alone would wait for the one before.
  let [a, b, c, d] = [0, 0, 0, 0];
  for (let k = 0; k < taps; k += 4) {
    const at = first + k;
    a += (kernel[k] ?? 0) * (samples[at] ?? 0);
    b += (kernel[k + 1] ?? 0) * (samples[at + 1] ?? 0);
    c += (kernel[k + 2] ?? 0) * (samples[at + 2] ?? 0);
    d += (kernel[k + 3] ?? 0) * (samples[at + 3] ?? 0);
  }
  return a + b + (c + d);
}

/** Taps for a point `fraction` of a sample after the middle tap, cut off at 1/factor of half the rate. */
function toKernel(fraction: number, factor: number): Float64Array {
  const half = HALF_WIDTH * factor;
  const kernel = new Float64Array(2 * half);
  let sum = 0;
  for (let k = 0; k < 2 * half; k += 1) {
    const at = (k - half + 1 - fraction) / factor;
    const value = sinc(at) * kaiser(at / HALF_WIDTH);
    kernel[k] = value;
    sum += value;
  }
  return kernel.map((value) => value / sum);
}

const sinc = (x: number): number => (x === 0 ? 1 : Math.sin(Math.PI * x) / (Math.PI * x));
const kaiser = (x: number): number =>
  Math.abs(x) >= 1 ? 0 : bessel0(KAISER_BETA * Math.sqrt(1 - x * x)) / BESSEL0_BETA;

/** Modified Bessel function of the first kind, order 0, by its series. */
function bessel0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-16 * sum; k += 1) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}
const BESSEL0_BETA = bessel0(KAISER_BETA);
