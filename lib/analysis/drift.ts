/**
 * Clock difference between player and recorder. It delays each frequency by -e R ln f; what is left of
 * the group delay after the minimum-phase part of the response, over ln f, shows it. The all-pass of a
 * loudspeaker's crossovers does so as well and is told apart by its shape; what remains of it can look
 * like some tens of ppm: the loopback channel cannot.
 */
import type { Plans } from "./cell-power";
import { fitSlopeBesideCrossovers, type DelayPoint } from "./crossover-delay";

const POINTS = 4096;
const BEFORE_S = 0.01;
/** Above the bass, whose limiters and ports bend the phase; below what the noise takes. */
const FROM_HZ = 1000;
const TO_HZ = 12_000;
/** All-pass delay over this range that a loudspeaker may have of its own, s. */
const OWN_DELAY_S = 0.2e-3;
const STEPS_PER_OCTAVE = 24;

/**
 * @param response [size] over circular lag. Not modified.
 * @returns ppm, positive where the recorder's clock is the slower one; NaN where the sweep is too narrow to tell.
 */
export function estimateDriftPpm(
  response: Float64Array,
  arrivalLag: number,
  {
    startHz,
    stopHz,
    rateConstantS,
    rateHz,
  }: { startHz: number; stopHz: number; rateConstantS: number; rateHz: number },
  plans: Plans,
): number {
  const lowHz = Math.max(FROM_HZ, 4 * startHz);
  const highHz = Math.min(TO_HZ, 0.7 * stopHz);
  if (!(highHz > 4 * lowHz)) return Number.NaN;
  const points = POINTS * 2 ** Math.max(0, Math.round(Math.log2(rateHz / 48_000)));
  const delay = toExcessDelay(response, arrivalLag, { stopHz, startHz, rateHz }, points, plans);
  const read = readDelays(delay, { rateHz, binHz: rateHz / points, lowHz, highHz });
  return (-fitSlopeBesideCrossovers(read) / rateConstantS) * 1e6;
}

/** What a loudspeaker's own phase can feign, ppm: a smaller estimate says nothing. */
export function toDriftUncertaintyPpm(rateConstantS: number): number {
  return (OWN_DELAY_S / (rateConstantS * Math.log(TO_HZ / FROM_HZ))) * 1e6;
}

interface Weighted {
  /** [bins] excess group delay, samples. */
  delay: Float64Array;
  power: Float64Array;
}

function toExcessDelay(
  response: Float64Array,
  arrivalLag: number,
  { startHz, stopHz, rateHz }: { startHz: number; stopHz: number; rateHz: number },
  points: number,
  plans: Plans,
): Weighted {
  const fft = plans.fft(points);
  const before = Math.round(BEFORE_S * rateHz);
  const from = Math.round(arrivalLag) - before;
  const length = points / 2;
  const windowed = new Float64Array(length);
  for (let n = 0; n < length; n += 1) {
    const flank =
      n < before / 2 ? n / (before / 2) : n > length * 0.6 ? (length - n) / (length * 0.4) : 1;
    const index = (((from + n) % response.length) + response.length) % response.length;
    windowed[n] = response[index]! * (0.5 - 0.5 * Math.cos(Math.PI * flank));
  }
  const transform = (fill: (n: number) => number): Float64Array => {
    for (let n = 0; n < length; n += 1) fft.data[n] = fill(n);
    fft.data.fill(0, length);
    return fft.forward();
  };
  const plain = transform((n) => windowed[n]!);
  const ramped = transform((n) => windowed[n]! * (n - before));
  const bins = points / 2 + 1;
  const power = new Float64Array(bins);
  const delay = new Float64Array(bins);
  for (let k = 0; k < bins; k += 1) {
    power[k] = plain[2 * k]! ** 2 + plain[2 * k + 1]! ** 2;
    delay[k] =
      power[k]! > 0
        ? (ramped[2 * k]! * plain[2 * k]! + ramped[2 * k + 1]! * plain[2 * k + 1]!) / power[k]!
        : 0;
  }
  const minimum = toMinimumPhaseDelay(
    power,
    (2 * startHz * points) / rateHz,
    (0.97 * stopHz * points) / rateHz,
    plans,
  );
  for (let k = 0; k < bins; k += 1) delay[k]! -= minimum[k]!;
  return { delay, power };
}

/** Group delay of the minimum-phase response with this power, samples: from its cepstrum, n c_n. */
function toMinimumPhaseDelay(
  power: Float64Array,
  lowBin: number,
  highBin: number,
  plans: Plans,
): Float64Array {
  const points = 2 * (power.length - 1);
  const fft = plans.fft(points);
  const low = Math.ceil(lowBin);
  const high = Math.min(power.length - 1, Math.floor(highBin));
  // The real cepstrum is the cosine transform of ln|H|: an even sequence of its own.
  for (let k = 0; k < points; k += 1) {
    const bin = Math.min(high, Math.max(low, k < power.length ? k : points - k));
    fft.data[k] = 0.5 * Math.log(power[bin]! + Number.MIN_VALUE);
  }
  const cepstrum = fft.forward();
  for (let n = 0; n < points; n += 1) {
    // Folded: 2 c_n for n > 0. Its derivative over frequency gives the delay.
    fft.data[n] = n === 0 || n >= points / 2 ? 0 : (2 * n * cepstrum[2 * n]!) / points;
  }
  const delays = fft.forward();
  return Float64Array.from({ length: power.length }, (_, k) => delays[2 * k]!);
}

/** Delays in even steps of ln f, weighted by power within each. */
function readDelays(
  { delay, power }: Weighted,
  {
    rateHz,
    binHz,
    lowHz,
    highHz,
  }: { rateHz: number; binHz: number; lowHz: number; highHz: number },
): DelayPoint[] {
  const points: DelayPoint[] = [];
  const step = 2 ** (1 / STEPS_PER_OCTAVE);
  for (let hz = lowHz; hz * step <= highHz; hz *= step) {
    let weight = 0;
    let sum = 0;
    for (let k = Math.ceil(hz / binHz); k < (hz * step) / binHz; k += 1) {
      weight += power[k]!;
      sum += power[k]! * delay[k]!;
    }
    if (weight > 0)
      points.push({ lnHz: Math.log(hz * Math.sqrt(step)), delayS: sum / weight / rateHz });
  }
  return points;
}
