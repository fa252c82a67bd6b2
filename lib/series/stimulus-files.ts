/** The files that a series is played from: one per planned run, and the conditioning noise. */
import { synthesiseConditioning } from "../analysis/conditioning-noise";
import { synthesiseStimulus, toStimulusLayout, type StimulusShape } from "../analysis/sweep";
import { streamPcm24, toPcm24Bytes } from "../audio/stream-wav";
import { toCheckList } from "./check-list";
import type { Plan } from "./plan-schema";
import { toLevelText, type PlannedRun } from "./planned-runs";

export interface StimulusFile {
  name: string;
  bytes: number;
  /** Made as it is read; each call starts anew. */
  read: () => Iterable<Uint8Array<ArrayBuffer>>;
}

/** The slot under which the conditioning noise of the loudest long-term run is asked for. */
export const CONDITIONING_SLOT = "conditioning";
/** Peak over rms of a sine. */
const SINE_CREST_DB = 10 * Math.log10(2);
const CONDITIONING_SEED = 1;

/**
 * The stimulus of one planned run, right to the sample: only its gain differs between levels.
 *
 * @returns null where nothing of ours is played: calibrator and room noise.
 */
export function toStimulusFile(plan: Plan, run: PlannedRun): StimulusFile | null {
  if (run.stimulusPeakDbfs === null) return null;
  const { start_Hz, stop_Hz, length_s, rate_Hz, lead_in_s, lead_out_s } = plan.sweep;
  const shape: StimulusShape = {
    startHz: start_Hz,
    stopHz: stop_Hz,
    lengthS: length_s,
    rateHz: rate_Hz,
    leadInS: lead_in_s,
    leadOutS: lead_out_s,
    gainDb: run.stimulusPeakDbfs,
  };
  const { total } = toStimulusLayout(shape);
  return {
    name: run.fileName,
    bytes: toPcm24Bytes(total),
    read: () => streamPcm24(cut(synthesiseStimulus(shape)), total, rate_Hz),
  };
}

/**
 * The conditioning noise of each level with a long-term run, loudest first: pink, with the plan's
 * minutes, its rms where the plan puts it re the sweep of that level, its crest as planned. Where
 * that would pass full scale the rms holds and the crest gives way.
 *
 * @returns by slot: "conditioning" for the loudest, "conditioning-96" for each.
 */
export function toConditioningFiles(
  plan: Plan,
  planned: readonly PlannedRun[],
  fileStem: string,
): Map<string, StimulusFile> {
  const files = new Map<string, StimulusFile>();
  const longRuns = planned
    .filter((run) => run.role === "long-term")
    .sort((a, b) => (b.levelDb ?? 0) - (a.levelDb ?? 0));
  for (const run of longRuns) {
    const number = toLevelText(run.levelDb ?? 0);
    const file = toConditioningFile(plan, run, `${fileStem}_${number}_conditioning.wav`);
    if (files.size === 0) files.set(CONDITIONING_SLOT, file);
    files.set(`${CONDITIONING_SLOT}-${number}`, file);
  }
  return files;
}

function toConditioningFile(plan: Plan, run: PlannedRun, name: string): StimulusFile {
  const rateHz = plan.sweep.rate_Hz;
  const { minutes, crest_dB, rms_re_sweep_dB } = plan.conditioning;
  const lengthS = minutes * 60;
  const frames = Math.round(lengthS * rateHz);
  const rmsDbfs = (run.stimulusPeakDbfs ?? 0) - SINE_CREST_DB + rms_re_sweep_dB;
  const peakDbfs = Math.min(0, rmsDbfs + crest_dB);
  return {
    name,
    bytes: toPcm24Bytes(frames),
    read: () =>
      streamPcm24(
        synthesiseConditioning({
          rateHz,
          lengthS,
          crestDb: peakDbfs - rmsDbfs,
          peakDbfs,
          seed: CONDITIONING_SEED,
        }),
        frames,
        rateHz,
      ),
  };
}

/** The check-list as a text file to lie beside the stimuli. */
export function toCheckListText(plan: Plan, title: string): string {
  const lines = toCheckList(plan).map((line, index) => `${index + 1}. [ ] ${line}`);
  return [title, "", ...lines, ""].join("\r\n").replaceAll("\u00a0", " ");
}

const PIECE = 1 << 15;

function* cut(samples: Float64Array): Generator<Float64Array> {
  for (let at = 0; at < samples.length; at += PIECE) yield samples.subarray(at, at + PIECE);
}
