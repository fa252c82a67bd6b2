/** When the sweep passes which frequency in a recording. */
import type { SweepInUse } from "../../analysis/deconvolution";
import type { FoundSweep, PlayedStimulus } from "../../analysis/sweep-in-recording";
import type { ThirdOctave } from "../../analysis/types";
import type { ArrivalCheck } from "../arrival-schema";
import { round } from "./file-facts";

export interface SweepTimeline {
  sweep: SweepInUse;
  /** Of the sweep in the recording, s; before 0 or after the end where parts are missing. */
  startS: number;
  endS: number;
  /** Of the recording, s. */
  lengthS: number;
}

export function toTimeline(
  { stimulusAt }: FoundSweep,
  { sweep, sweepStart }: PlayedStimulus,
  samples: number,
): SweepTimeline {
  const startS = (stimulusAt + sweepStart) / sweep.rateHz;
  return { sweep, startS, endS: startS + sweep.lengthS, lengthS: samples / sweep.rateHz };
}

/** Frequency at a time, held at the ends of the sweep. */
export function toHz({ sweep, startS }: SweepTimeline, timeS: number): number {
  const hz = sweep.startHz * Math.exp((timeS - startS) / sweep.rateConstantS);
  return Math.min(sweep.stopHz, Math.max(sweep.startHz, hz));
}

export const toTimeS = ({ sweep, startS }: SweepTimeline, hz: number): number =>
  startS + sweep.rateConstantS * Math.log(hz / sweep.startHz);

/** A stretch of the recording as a check marks it; frequencies where the sweep was playing. */
export function toPlace(
  timeline: SweepTimeline,
  fromS: number,
  toS: number,
): NonNullable<ArrivalCheck["where"]> {
  const playing = toS >= timeline.startS && fromS <= timeline.endS;
  return {
    from_s: round(fromS, 4),
    to_s: round(toS, 4),
    from_Hz: playing ? Number(toHz(timeline, fromS).toPrecision(4)) : null,
    to_Hz: playing ? Number(toHz(timeline, toS).toPrecision(4)) : null,
  };
}

/** Nominal frequencies of the bands that the sweep passes between two times. */
export function toBandsBetween(
  timeline: SweepTimeline,
  bands: readonly ThirdOctave[],
  fromS: number,
  toS: number,
): number[] {
  return bands
    .filter(
      ({ lowHz, highHz }) => toTimeS(timeline, lowHz) < toS && toTimeS(timeline, highHz) > fromS,
    )
    .map(({ nominalHz }) => nominalHz);
}
