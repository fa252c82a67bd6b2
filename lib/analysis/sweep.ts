/**
 * The stimulus: a synchronised exponential sweep x(t) = sin(2 pi f1 R e^(t/R)).
 * f1 R is a whole number, so the n-th harmonic is exactly the n-fold phase (docs/domain.md section 1).
 */
import { AnalysisError } from "../errors/app-error";

export interface SweepShape {
  startHz: number;
  stopHz: number;
  /** Wished length, s; the sweep really lasts toSweepTiming(...).lengthS. */
  lengthS: number;
}

export interface SweepTiming {
  /** R, s: the instantaneous frequency is startHz e^(t/R). */
  rateConstantS: number;
  /** R ln(stop/start), s. */
  lengthS: number;
}

export interface StimulusShape extends SweepShape {
  rateHz: number;
  /** Silence before and after, s; rounded to whole samples. */
  leadInS: number;
  leadOutS: number;
  /** Peak re digital full scale, dB; 0 where not given. */
  gainDb?: number;
}

const FADE_IN_S = 0.05;
const FADE_OUT_S = 0.01;

/**
 * Rate constant and true length of our own sweep.
 * @throws AnalysisError "stimulus.invalid" where the frequencies or the length cannot make a sweep.
 * @see Novak, Lotton, Simon, JAES 63(10), 2015: f1 R whole keeps harmonics in phase.
 */
export function toSweepTiming({ startHz, stopHz, lengthS }: SweepShape): SweepTiming {
  const valid = startHz > 0 && stopHz > startHz && lengthS > 0 && Number.isFinite(stopHz * lengthS);
  const octaves = Math.log(stopHz / startHz);
  const cycles = Math.round((startHz * lengthS) / octaves);
  if (!valid || cycles < 1) {
    throw new AnalysisError(
      "stimulus.invalid",
      `A sweep from ${startHz} to ${stopHz} Hz in ${lengthS} s cannot be made: it needs 0 < start < stop and at least ${(octaves / startHz).toPrecision(3)} s.`,
      { details: { startHz, stopHz, lengthS } },
    );
  }
  const rateConstantS = cycles / startHz;
  return { rateConstantS, lengthS: rateConstantS * octaves };
}

/** Rate constant of a sweep that comes as a file of exactly this length. */
export function toFileSweepTiming({ startHz, stopHz, lengthS }: SweepShape): SweepTiming {
  return { rateConstantS: lengthS / Math.log(stopHz / startHz), lengthS };
}

/** Samples of silence before, of the sweep, and of silence after. */
export function toStimulusLayout(shape: StimulusShape): {
  leadIn: number;
  sweep: number;
  leadOut: number;
  total: number;
} {
  const { lengthS } = toSweepTiming(shape);
  const leadIn = Math.round(shape.leadInS * shape.rateHz);
  const leadOut = Math.round(shape.leadOutS * shape.rateHz);
  const sweep = Math.floor(lengthS * shape.rateHz) + 1;
  return { leadIn, sweep, leadOut, total: leadIn + sweep + leadOut };
}

/**
 * The stimulus as samples, the same to the last bit on every machine.
 *
 * @returns [leadIn + sweep + leadOut] re full scale; raised-cosine fades of 50 ms and 10 ms lie inside the sweep.
 * @throws AnalysisError "stimulus.invalid"
 */
export function synthesiseStimulus(shape: StimulusShape): Float64Array {
  const { rateHz, startHz, stopHz, gainDb = 0 } = shape;
  if (stopHz > rateHz / 2) {
    throw new AnalysisError(
      "stimulus.invalid",
      `The sweep ends at ${stopHz} Hz, above half the sample rate of ${rateHz} Hz.`,
      {
        details: { stopHz, rateHz },
      },
    );
  }
  const { rateConstantS, lengthS } = toSweepTiming(shape);
  const { leadIn, sweep, total } = toStimulusLayout(shape);
  const amplitude = 10 ** (gainDb / 20);
  const cycles = startHz * rateConstantS;
  const samples = new Float64Array(total);
  for (let n = 0; n < sweep; n += 1) {
    const timeS = n / rateHz;
    const turns = cycles * Math.exp(timeS / rateConstantS);
    const fade = fadeAt(timeS, FADE_IN_S) * fadeAt(lengthS - timeS, FADE_OUT_S);
    samples[leadIn + n] = amplitude * fade * Math.sin(2 * Math.PI * (turns - Math.floor(turns)));
  }
  return samples;
}

/** Raised cosine: 0 at the edge, 1 from fadeS inwards. */
function fadeAt(fromEdgeS: number, fadeS: number): number {
  if (fromEdgeS >= fadeS) return 1;
  return fromEdgeS <= 0 ? 0 : 0.5 - 0.5 * Math.cos((Math.PI * fromEdgeS) / fadeS);
}

/** Time by which the n-th harmonic response precedes the linear one, s. */
export function toHarmonicLeadS(order: number, rateConstantS: number): number {
  return rateConstantS * Math.log(order);
}

/** Time from the start of the sweep at which it passes a frequency, s. */
export function toSweepTimeS(frequencyHz: number, startHz: number, rateConstantS: number): number {
  return rateConstantS * Math.log(frequencyHz / startHz);
}
