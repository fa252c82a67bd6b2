/**
 * The conditioning signal of long-term runs: pink noise of a stated crest, piece by piece, the same
 * to the last bit at every download.
 */
import { AnalysisError } from "../errors/app-error";

export interface ConditioningShape {
  rateHz: number;
  lengthS: number;
  /** Peak over rms, dB; the noise is held to it by a symmetrical limit. */
  crestDb: number;
  /** Peak re digital full scale, dB. */
  peakDbfs: number;
  /** Whole number; the same seed gives the same noise. */
  seed: number;
}

const PIECE = 1 << 15;
/**
 * First-order sections whose sum falls by 3 dB per octave within half a decibel over the audio band.
 * @see P. Kellet's economy filter for pink noise, music-dsp list, 1999.
 */
const PINK_POLES = [0.99765, 0.963, 0.57] as const;
const PINK_GAINS = [0.099046, 0.2965164, 1.0526913] as const;
const DIRECT_GAIN = 0.1848;
/** Rms of the sum above for white noise of variance one: sum of g_i g_j / (1 - p_i p_j), direct part in. */
const PINK_RMS = pinkRms();

/**
 * @returns pieces of [up to 32768] samples re full scale, `round(lengthS * rateHz)` in all.
 * @throws AnalysisError "stimulus.invalid" for a crest under 3 dB, a peak over full scale or no length.
 */
export function* synthesiseConditioning(shape: ConditioningShape): Generator<Float64Array> {
  const { rateHz, lengthS, crestDb, peakDbfs, seed } = shape;
  const total = Math.round(lengthS * rateHz);
  if (!(total > 0) || !(crestDb >= 3) || !(peakDbfs <= 0)) {
    throw new AnalysisError(
      "stimulus.invalid",
      `Conditioning of ${lengthS} s with a crest of ${crestDb} dB and a peak of ${peakDbfs} dBFS cannot be made.`,
    );
  }
  const top = 10 ** (peakDbfs / 20);
  const gain = (top * 10 ** (-crestDb / 20) * limitedRmsGain(crestDb)) / PINK_RMS;
  const next = createGaussian(seed);
  const state = PINK_POLES.map(() => 0);
  for (let done = 0; done < total; done += PIECE) {
    const piece = new Float64Array(Math.min(PIECE, total - done));
    for (let n = 0; n < piece.length; n += 1) {
      const white = next();
      let pink = DIRECT_GAIN * white;
      for (let i = 0; i < state.length; i += 1) {
        const value = (PINK_POLES[i] ?? 0) * (state[i] ?? 0) + (PINK_GAINS[i] ?? 0) * white;
        state[i] = value;
        pink += value;
      }
      piece[n] = Math.max(-top, Math.min(top, gain * pink));
    }
    yield piece;
  }
}

/** What the limit takes from the rms of normal noise at this crest, given back beforehand. */
function limitedRmsGain(crestDb: number): number {
  let gain = 1;
  const crest = 10 ** (crestDb / 20);
  // Fixed point: rms of clip(gain * x) at limit crest is to be one.
  for (let round = 0; round < 60; round += 1) gain /= Math.sqrt(limitedPower(crest / gain)) * gain;
  return gain;
}

/** Mean square of standard normal noise limited at +-limit. */
function limitedPower(limit: number): number {
  const steps = 2000;
  let sum = 0;
  for (let i = 0; i < steps; i += 1) {
    const x = ((i + 0.5) / steps) * 8;
    sum += Math.min(x, limit) ** 2 * Math.exp((-x * x) / 2) * (8 / steps);
  }
  return (2 * sum) / Math.sqrt(2 * Math.PI);
}

function pinkRms(): number {
  let power = DIRECT_GAIN ** 2;
  PINK_GAINS.forEach((gain, i) => {
    power += 2 * DIRECT_GAIN * gain;
    PINK_GAINS.forEach((other, j) => {
      power += (gain * other) / (1 - (PINK_POLES[i] ?? 0) * (PINK_POLES[j] ?? 0));
    });
  });
  return Math.sqrt(power);
}

/** Marsaglia's polar method on a 32-bit generator (mulberry32): fast, small, the same everywhere. */
function createGaussian(seed: number): () => number {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4_294_967_296;
  };
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    for (;;) {
      const u = 2 * uniform() - 1;
      const v = 2 * uniform() - 1;
      const s = u * u + v * v;
      if (s >= 1 || s === 0) continue;
      const scale = Math.sqrt((-2 * Math.log(s)) / s);
      spare = v * scale;
      return u * scale;
    }
  };
}
