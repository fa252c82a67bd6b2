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
  let peak = 0;
  for (const x of samples) peak = Math.max(peak, Math.abs(x));
  const sweepStart = samples.findIndex((x) => Math.abs(x) > START_SHARE * peak);
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
