/** The static law of a virtual loudspeaker, measured with steady tones: the truth that sweeps are held against. */
import { createLoudspeaker, playThrough, type VirtualLoudspeaker } from "./virtual-loudspeaker";

const RATE_HZ = 192_000;
const REFERENCE_PEAK_PA = Math.SQRT2 * 20e-6;

export interface SteadyTone {
  /** Fundamental, dB on the scale of a run's level, before the gain of the tester's volume setting. */
  levelDb: number;
  /** [orders] amplitude of H2, H3, ... re the fundamental. */
  harmonics: number[];
}

/**
 * A tone at one drive, after everything but the coil has settled.
 *
 * @param settleS how long the tone plays before it is looked at.
 * @param orders highest harmonic returned.
 */
export function measureSteadyTone(
  loudspeaker: VirtualLoudspeaker,
  frequencyHz: number,
  driveDb: number,
  { settleS = 1, orders = 5 }: { settleS?: number; orders?: number } = {},
): SteadyTone {
  const cold = { ...loudspeaker, ways: loudspeaker.ways.map(({ coil: _coil, ...way }) => way) };
  const cycles = Math.max(2, Math.ceil(frequencyHz / 20));
  const settle = Math.round(settleS * RATE_HZ);
  const window = Math.round((cycles * RATE_HZ) / frequencyHz);
  // The frequency that fits its window exactly.
  const omega = (2 * Math.PI * cycles) / window;
  const peak = REFERENCE_PEAK_PA * 10 ** (driveDb / 20);
  const signal = Float64Array.from(
    { length: settle + window },
    (_, n) => peak * Math.sin(omega * n),
  );
  playThrough(createLoudspeaker(cold, RATE_HZ), signal);
  const amplitudes = Array.from({ length: orders }, (_, i) =>
    toAmplitude(signal, settle, omega * (i + 1)),
  );
  const first = amplitudes[0] ?? NaN;
  return {
    levelDb: 20 * Math.log10(first / REFERENCE_PEAK_PA),
    harmonics: amplitudes.slice(1).map((a) => a / first),
  };
}

function toAmplitude(signal: Float64Array, from: number, omega: number): number {
  let [re, im] = [0, 0];
  for (let n = from; n < signal.length; n += 1) {
    re += (signal[n] ?? 0) * Math.cos(omega * n);
    im += (signal[n] ?? 0) * Math.sin(omega * n);
  }
  return (2 * Math.hypot(re, im)) / (signal.length - from);
}

/** Decibels lost at a drive against a tone 60 dB under it. */
export function measureStaticLossDb(
  loudspeaker: VirtualLoudspeaker,
  frequencyHz: number,
  driveDb: number,
): number {
  const low = measureSteadyTone(loudspeaker, frequencyHz, driveDb - 60, { settleS: 0.3 });
  const high = measureSteadyTone(loudspeaker, frequencyHz, driveDb);
  return low.levelDb + 60 - high.levelDb;
}

/** Drive at which a loss of `lossDb` is reached, by halving between the bounds; NaN where not in between. */
export function findStaticOnsetDb(
  loudspeaker: VirtualLoudspeaker,
  frequencyHz: number,
  lossDb: number,
  [lowDb, highDb]: readonly [number, number],
): number {
  let [low, high] = [lowDb, highDb];
  if (measureStaticLossDb(loudspeaker, frequencyHz, high) < lossDb) return NaN;
  if (measureStaticLossDb(loudspeaker, frequencyHz, low) >= lossDb) return NaN;
  while (high - low > 0.01) {
    const middle = (low + high) / 2;
    if (measureStaticLossDb(loudspeaker, frequencyHz, middle) >= lossDb) high = middle;
    else low = middle;
  }
  return (low + high) / 2;
}
