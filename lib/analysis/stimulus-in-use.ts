/** The stimulus of a series as the deconvolution needs it: made by us, or taken from its file. */
import { AnalysisError } from "../errors/app-error";
import type { Stimulus } from "../series/series-schema";
import { synthesiseStimulus, toFileSweepTiming, toStimulusLayout, toSweepTiming } from "./sweep";
import type { PlayedStimulus } from "./sweep-in-recording";
import type { Recording } from "./types";

/** The sweep of a file begins where it first exceeds this share of its peak. */
const START_SHARE = 1e-3;

/**
 * @param recording the stimulus file, where the series names one.
 * @throws AnalysisError "stimulus.invalid", "stimulus.rate"
 */
export function toPlayedStimulus(
  stimulus: Stimulus,
  recording: Recording | undefined,
): PlayedStimulus {
  const { start_Hz: startHz, stop_Hz: stopHz, length_s: lengthS, rate_Hz: rateHz } = stimulus;
  if (recording !== undefined) return toPlayedFile(recording, { startHz, stopHz, lengthS, rateHz });
  const shape = {
    startHz,
    stopHz,
    lengthS,
    rateHz,
    leadInS: stimulus.lead_in_s,
    leadOutS: stimulus.lead_out_s,
  };
  const { leadIn, sweep } = toStimulusLayout(shape);
  return {
    samples: synthesiseStimulus(shape),
    sweep: { startHz, stopHz, rateHz, ...toSweepTiming(shape) },
    sweepStart: leadIn,
    sweepLength: sweep,
  };
}

function toPlayedFile(
  recording: Recording,
  shape: { startHz: number; stopHz: number; lengthS: number; rateHz: number },
): PlayedStimulus {
  const { samples, file } = recording;
  if (recording.rateHz !== shape.rateHz) {
    throw new AnalysisError(
      "stimulus.rate",
      `${file} runs at ${recording.rateHz} Hz, the series says ${shape.rateHz} Hz.`,
      { file },
    );
  }
  const sweepLength = Math.round(shape.lengthS * shape.rateHz);
  const sweepStart = toFirstAbove(samples, START_SHARE * toPeak(samples));
  // One part in a thousand of the sweep may be missing: fades hide the very ends.
  if (sweepStart < 0 || samples.length - sweepStart < 0.999 * sweepLength) {
    throw new AnalysisError(
      "stimulus.invalid",
      `${file} holds ${((samples.length - Math.max(0, sweepStart)) / shape.rateHz).toFixed(3)} s from its first sound on; the sweep is said to last ${shape.lengthS} s.`,
      { file },
    );
  }
  return { samples, sweep: { ...shape, ...toFileSweepTiming(shape) }, sweepStart, sweepLength };
}

function toPeak(samples: Recording["samples"]): number {
  let peak = 0;
  for (let n = 0; n < samples.length; n += 1) {
    const size = Math.abs(samples[n]!);
    if (size > peak) peak = size;
  }
  return peak;
}

function toFirstAbove(samples: Recording["samples"], size: number): number {
  for (let n = 0; n < samples.length; n += 1) if (Math.abs(samples[n]!) > size) return n;
  return -1;
}
