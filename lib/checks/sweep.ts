/** The sweep, its harmonic leads and its spectrum, docs/check-values.md section 6. */
import { planRealFft, toFftSize } from "../analysis/fft/real-fft";
import { toNoiseGain } from "../analysis/noise-floor";
import {
  synthesiseStimulus,
  toFileSweepTiming,
  toHarmonicLeadS,
  toSweepTimeS,
  toSweepTiming,
} from "../analysis/sweep";
import { toChecks } from "./check";

const SHAPE = { startHz: 20, stopHz: 20_000, lengthS: 10 };
const LN_SPAN = Math.log(SHAPE.stopHz / SHAPE.startHz);
const unit = "s";
const FARINA = "Farina, AES 108 (2000): L ln n [R14, C]";
const SYNCHRONISED = "f1 L whole: Novak, Lotton, Simon, JAES 63(10), 2015 [R14, C]";

const constantS = () => toFileSweepTiming(SHAPE).rateConstantS;
const lead = (order: number) => () => toHarmonicLeadS(order, constantS());

/** Shortest sweep in which a tail of the last order ends before the next order begins. */
const shortestS = (tailS: number, order: number): number =>
  (tailS * LN_SPAN) / (toHarmonicLeadS(order, 1) - toHarmonicLeadS(order - 1, 1));

/** Mean of |X| over (1/2) sqrt(L / f) between 200 Hz and 8 kHz. */
function spectrumRatio(): number {
  const shape = { ...SHAPE, lengthS: 5, rateHz: 48_000, leadInS: 0, leadOutS: 0 };
  const samples = synthesiseStimulus(shape);
  const { rateConstantS } = toSweepTiming(shape);
  const fft = planRealFft(toFftSize(samples.length));
  fft.data.fill(0);
  fft.data.set(samples);
  const power = fft.power();
  const binHz = shape.rateHz / fft.size;
  let sum = 0;
  let count = 0;
  for (let k = Math.ceil(200 / binHz); k * binHz <= 8000; k += 1, count += 1) {
    sum += Math.sqrt(power[k] ?? 0) / shape.rateHz / (0.5 * Math.sqrt(rateConstantS / (k * binHz)));
  }
  return sum / count;
}

export const SWEEP_CHECKS = toChecks("sweep", {
  "rate-constant": {
    what: "20 Hz to 20 kHz in 10 s: rate constant L",
    compute: constantS,
    expected: 1.447648,
    tolerance: 1e-6,
    unit,
    source: "L = T / ln(f2/f1) [R14, C]",
    worked: [31],
  },
  "lead-2": {
    what: "20 Hz to 20 kHz in 10 s: the second harmonic comes early by",
    compute: lead(2),
    expected: 1.00343,
    tolerance: 1e-5,
    unit,
    source: FARINA,
    worked: [31],
  },
  "lead-3": {
    what: "20 Hz to 20 kHz in 10 s: the third harmonic comes early by",
    compute: lead(3),
    expected: 1.5904,
    tolerance: 1e-5,
    unit,
    source: FARINA,
    worked: [31],
  },
  "lead-5": {
    what: "20 Hz to 20 kHz in 10 s: the fifth harmonic comes early by",
    compute: lead(5),
    expected: 2.3299,
    tolerance: 1e-5,
    unit,
    source: FARINA,
    worked: [31],
  },
  cycles: {
    what: "synchronised sweep: f1 L",
    compute: () => toSweepTiming(SHAPE).rateConstantS * SHAPE.startHz,
    expected: 29,
    tolerance: 1e-6,
    unit: "",
    source: SYNCHRONISED,
    worked: [32],
  },
  "synchronised-constant": {
    what: "synchronised sweep: rate constant L",
    compute: () => toSweepTiming(SHAPE).rateConstantS,
    expected: 1.45,
    tolerance: 1e-6,
    unit,
    source: SYNCHRONISED,
    worked: [32],
  },
  "synchronised-length": {
    what: "synchronised sweep: its length",
    compute: () => toSweepTiming(SHAPE).lengthS,
    expected: 10.016245,
    tolerance: 1e-6,
    unit,
    source: SYNCHRONISED,
    worked: [32],
  },
  octave: {
    what: "time that the synchronised sweep spends in an octave",
    compute: () => toSweepTimeS(2 * SHAPE.startHz, SHAPE.startHz, 1.45),
    expected: 1.005063,
    tolerance: 1e-6,
    unit,
    source: "L ln 2 [C]",
  },
  "shortest-5": {
    what: "shortest sweep for tails of 0.1 s up to the fifth harmonic",
    compute: () => shortestS(0.1, 5),
    expected: 3.0957,
    tolerance: 1e-4,
    unit,
    source: "T ≥ τ ln(f2/f1) / ln(N/(N−1)) [C]",
    worked: [33],
  },
  "shortest-10": {
    what: "shortest sweep for tails of 0.1 s up to the tenth harmonic",
    compute: () => shortestS(0.1, 10),
    expected: 6.5563,
    tolerance: 1e-4,
    unit,
    source: "T ≥ τ ln(f2/f1) / ln(N/(N−1)) [C]",
    worked: [33],
  },
  "twice-as-long": {
    what: "noise left by a sweep of twice the length",
    compute: () => 10 * Math.log10(toNoiseGain(0.1, 2 * 1.45) / toNoiseGain(0.1, 1.45)),
    expected: -3.01,
    tolerance: 0.01,
    unit: "dB",
    source: "stationary noise against twice the energy [C]",
    worked: [34],
  },
  spectrum: {
    what: "spectrum of our sweep over its analytic form, 200 Hz to 8 kHz",
    compute: spectrumRatio,
    expected: 1,
    tolerance: 0.0005,
    unit: "",
    source: "½ √(L/f): Novak, Lotton, Simon, JAES 63(10), 2015 [M, C]",
  },
});
