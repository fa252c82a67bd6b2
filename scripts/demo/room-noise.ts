/** Noise of a quiet room and of the microphone: falling 5 dB an octave, with a flat floor under it. */
import type { Random } from "./random";

export interface RoomNoise {
  /** Unweighted level over 20 Hz to 20 kHz, dB SPL. */
  roomDb: number;
  /** Of the microphone itself, flat, dB SPL in 20 kHz. */
  microphoneDb: number;
}

/** One-pole low-passes whose sum falls about 5 dB an octave from 20 Hz to 5 kHz. */
const POLES = [
  { frequencyHz: 15, weight: 1 },
  { frequencyHz: 90, weight: 0.2 },
  { frequencyHz: 600, weight: 0.035 },
  { frequencyHz: 4000, weight: 0.006 },
];

/** @returns [length] pressure, Pa. */
export function composeNoise(
  noise: RoomNoise,
  length: number,
  rateHz: number,
  random: Random,
): Float64Array {
  const shares = POLES.map((p) => 1 - Math.exp((-2 * Math.PI * p.frequencyHz) / rateHz));
  // Mean square of a one-pole driven by unit white noise is a/(2 - a).
  const cross = (i: number, j: number): number => {
    const [a, b] = [shares[i] ?? 0, shares[j] ?? 0];
    return ((POLES[i]?.weight ?? 0) * (POLES[j]?.weight ?? 0) * a * b) / (a + b - a * b);
  };
  const meanSquare = POLES.reduce(
    (sum, _p, i) => sum + POLES.reduce((inner, _q, j) => inner + cross(i, j), 0),
    0,
  );
  const room = toRmsPa(noise.roomDb) / Math.sqrt(meanSquare);
  const floor = toRmsPa(noise.microphoneDb) * Math.sqrt(rateHz / 40_000);
  const gains = POLES.map((p) => p.weight * room);
  const state = new Float64Array(POLES.length);
  const out = new Float64Array(length);
  for (let n = -Math.round(rateHz / 20); n < length; n += 1) {
    const white = random.normal();
    let sum = floor * random.normal();
    for (let i = 0; i < state.length; i += 1) {
      const next = (state[i] ?? 0) + (shares[i] ?? 0) * (white - (state[i] ?? 0));
      state[i] = next;
      sum += (gains[i] ?? 0) * next;
    }
    if (n >= 0) out[n] = sum;
  }
  return out;
}

const toRmsPa = (levelDb: number): number => 20e-6 * 10 ** (levelDb / 20);
