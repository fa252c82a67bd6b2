/** What full scale is in sound pressure: from a calibrator recording or a known sensitivity (docs/domain.md section 2). */
import { AnalysisError } from "../errors/app-error";
import type { Plans } from "./cell-power";
import { toFftSize } from "./fft/real-fft";
import type { Recording } from "./types";

export interface Tone {
  frequencyHz: number;
  /** Peak re full scale. */
  amplitude: number;
  /** Tone over everything else within half an octave, dB. */
  purityDb: number;
  /** By how much its blocks of 0.2 s differ, the outer tenths left out to either side, dB. */
  spreadDb: number;
}

const SHORTEST_S = 0.3;
const LONGEST_SEARCH = 2 ** 16;
const BLOCK_S = 0.2;
/** A calibrator at another frequency than stated is another calibrator. */
const FREQUENCY_TOLERANCE = 0.05;
const LEAST_PURITY_DB = 10;
/** Blocks weaker than this share of the strongest are handling, not tone. */
const LEAST_BLOCK_SHARE = 0.7;

const sayPurity = (purityDb: number): string =>
  purityDb < 0
    ? `lies ${(-purityDb).toFixed(1)} dB under the rest`
    : `is only ${purityDb.toFixed(1)} dB over the rest`;

/** SPL of a sine that just reaches full scale, from a calibrator of levelDb. */
export function toFullScaleDb(tone: Tone, levelDb: number): number {
  return levelDb - 20 * Math.log10(tone.amplitude);
}

/**
 * Frequency and level of a calibrator's tone: its sine is fitted in blocks and the median taken, so
 * that neither hum nor the handling at the ends counts.
 *
 * @param nominalHz what the calibrator is said to give; 5 % either way are searched.
 * @throws AnalysisError "run.too-short" under 0.3 s, "calibration.not-a-tone"
 */
export function measureTone(
  { samples, rateHz, file }: Recording,
  nominalHz: number,
  plans: Plans,
): Tone {
  if (samples.length < SHORTEST_S * rateHz) {
    throw new AnalysisError(
      "run.too-short",
      `${file} lasts ${(samples.length / rateHz).toFixed(2)} s; a calibrator recording needs ${SHORTEST_S} s, better 10 s.`,
      { file },
    );
  }
  const { frequencyHz, purityDb } = findTone(samples, rateHz, nominalHz, plans);
  const { amplitude, spreadDb } = Number.isFinite(purityDb)
    ? fitAmplitude(samples, rateHz, frequencyHz)
    : { amplitude: 0, spreadDb: 0 };
  if (!(purityDb >= LEAST_PURITY_DB) || !(amplitude > 0)) {
    throw new AnalysisError(
      "calibration.not-a-tone",
      `${file} holds no steady tone near ${nominalHz} Hz${Number.isFinite(purityDb) ? `: the strongest, at ${frequencyHz.toFixed(1)} Hz, ${sayPurity(purityDb)}` : ""}. Record the calibrator again, or state its frequency.`,
      { file, details: { frequencyHz, purityDb } },
    );
  }
  return { frequencyHz, amplitude, purityDb, spreadDb };
}

function findTone(
  samples: Recording["samples"],
  rateHz: number,
  nominalHz: number,
  plans: Plans,
): { frequencyHz: number; purityDb: number } {
  const length = Math.min(samples.length, LONGEST_SEARCH);
  const from = Math.floor((samples.length - length) / 2);
  const fft = plans.fft(toFftSize(length));
  const window = plans.hann(length);
  for (let n = 0; n < length; n += 1) fft.data[n] = samples[from + n]! * window[n]!;
  fft.data.fill(0, length);
  const power = fft.power();
  const binHz = rateHz / fft.size;
  const toBin = (hz: number): number =>
    Math.max(1, Math.min(power.length - 2, Math.round(hz / binHz)));
  let peak = toBin(nominalHz * (1 - FREQUENCY_TOLERANCE));
  for (let k = peak; k <= toBin(nominalHz * (1 + FREQUENCY_TOLERANCE)); k += 1)
    if (power[k]! > power[peak]!) peak = k;
  const reach = Math.ceil((4 * fft.size) / length);
  let tone = 0;
  let rest = 0;
  for (let k = toBin(nominalHz * Math.SQRT1_2); k <= toBin(nominalHz * Math.SQRT2); k += 1) {
    if (Math.abs(k - peak) <= reach) tone += power[k]!;
    else rest += power[k]!;
  }
  const [left, middle, right] = [-1, 0, 1].map((d) =>
    Math.log(power[peak + d]! + Number.MIN_VALUE),
  ) as [number, number, number];
  const bend = left - 2 * middle + right;
  const offset = bend < 0 ? (left - right) / (2 * bend) : 0;
  return {
    frequencyHz: (peak + offset) * binHz,
    purityDb: tone > 0 ? 10 * Math.log10(tone / Math.max(rest, tone * 1e-14)) : Number.NaN,
  };
}

function fitAmplitude(
  samples: Recording["samples"],
  rateHz: number,
  frequencyHz: number,
): Pick<Tone, "amplitude" | "spreadDb"> {
  const length = Math.round(BLOCK_S * rateHz);
  const amplitudes: number[] = [];
  for (let from = 0; from + length <= samples.length; from += length) {
    amplitudes.push(fitBlock(samples, from, length, (2 * Math.PI * frequencyHz) / rateHz));
  }
  const strongest = Math.max(...amplitudes);
  const steady = amplitudes.filter((a) => a >= LEAST_BLOCK_SHARE * strongest).sort((a, b) => a - b);
  const middle = steady.length / 2;
  return {
    amplitude:
      steady.length % 2 === 1
        ? steady[Math.floor(middle)]!
        : (steady[middle - 1]! + steady[middle]!) / 2,
    spreadDb:
      20 *
      Math.log10(
        steady[Math.ceil(0.9 * (steady.length - 1))]! /
          steady[Math.floor(0.1 * (steady.length - 1))]!,
      ),
  };
}

function fitBlock(
  samples: Recording["samples"],
  from: number,
  length: number,
  radiansPerSample: number,
): number {
  let re = 0;
  let im = 0;
  let weight = 0;
  // One rotation per sample; re-started each block, so rounding stays under 1e-12.
  const stepR = Math.cos(radiansPerSample);
  const stepI = Math.sin(radiansPerSample);
  let cr = 1;
  let ci = 0;
  const hannR = Math.cos((2 * Math.PI) / length);
  const hannI = Math.sin((2 * Math.PI) / length);
  let hr = Math.cos(Math.PI / length);
  let hi = Math.sin(Math.PI / length);
  for (let n = 0; n < length; n += 1) {
    const w = 0.5 - 0.5 * hr;
    const x = w * samples[from + n]!;
    re += x * cr;
    im -= x * ci;
    weight += w;
    const nextR = cr * stepR - ci * stepI;
    ci = cr * stepI + ci * stepR;
    cr = nextR;
    const nextHannR = hr * hannR - hi * hannI;
    hi = hr * hannI + hi * hannR;
    hr = nextHannR;
  }
  return (2 * Math.hypot(re, im)) / weight;
}
