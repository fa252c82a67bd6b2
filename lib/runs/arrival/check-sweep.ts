/** The checks of a recording that should hold the planned sweep. */
import type { Plans } from "../../analysis/cell-power";
import { toArrivalBandHz } from "../../analysis/deconvolution";
import { toMicrophoneResponse, type MicrophoneResponse } from "../../analysis/microphone";
import { sayRun } from "../../analysis/say";
import { toPlaceDb } from "../../analysis/scale";
import type { Recording } from "../../analysis/types";
import { readTable } from "../../audio/read-table";
import { AnalysisError, FileError } from "../../errors/app-error";
import type { ArrivalCheck, ArrivalReport } from "../arrival-schema";
import type { ArrivalRequest } from "./arrival-request";
import { findDelayStep, type BandArrival, type DelayStep } from "./band-arrivals";
import { checkClipping } from "./file-checks";
import { drawEnvelope, round, type FileFacts } from "./file-facts";
import {
  checkClosing,
  checkLevelPlan,
  checkLevelStep,
  checkLowestDistortion,
  checkStopRule,
} from "./level-checks";
import { createFinder, lookForSweep, measureSweep, type SweepFacts } from "./measure-sweep";
import { checkAutomaticGain, checkHum, toSilenceBefore } from "./noise-checks";
import { comparePolarity, sayPolarity } from "./polarity";
import { findFullScaleDb, listShortSiblings, type SweepSibling } from "./siblings";
import {
  checkComplete,
  checkDrift,
  checkDropped,
  checkSignalToNoise,
  sayNoSweep,
  sayPresent,
} from "./sweep-checks";

export interface SweepFindings {
  checks: ArrivalCheck[];
  /** What the report says besides. */
  figures: Partial<ArrivalReport>;
}

/** @param facts of the same recording, which is at the rate of the plan and not silent. */
export function checkSweep(
  request: ArrivalRequest,
  recording: Recording,
  facts: FileFacts,
  plans: Plans,
): SweepFindings {
  const { plan, run } = request;
  const look = lookForSweep(recording, createFinder(plan, plans));
  if (look.verdict !== "found") {
    return { checks: [checkClipping(recording, facts, null), sayNoSweep(look)], figures: {} };
  }
  const sweep = measureSweep(
    recording,
    look,
    plan,
    run.place?.role ?? "short-term",
    readMicrophone(request),
  );
  const { timeline } = sweep;
  const fullScaleDb = findFullScaleDb(plan, request.siblings);
  const { environment, distance_m: distanceM } = plan.place;
  const levelDb =
    fullScaleDb === null
      ? null
      : sweep.summary.level_dBFS + fullScaleDb + toPlaceDb(environment, distanceM);
  const clipped = facts.clips.length > 0;
  const checks = [
    checkClipping(recording, facts, sweep),
    ...sayPresent(sweep),
    checkComplete(sweep),
    ...checkAlong(request, recording, sweep, plans, clipped),
    checkSignalToNoise(sweep, request.limits),
    // A clipped take has no level of its own.
    ...(clipped ? [] : checkLevels(request, sweep, levelDb)),
  ].filter((check) => check !== null);
  return {
    checks,
    figures: {
      measured_level_dB: clipped || levelDb === null ? null : round(levelDb, 2),
      snr_dB: Number.isFinite(sweep.raw.snrDb) ? round(sweep.raw.snrDb, 1) : null,
      latency_s: round(sweep.raw.latencyS, 5),
      drift_ppm: Number.isFinite(sweep.raw.driftPpm) ? round(sweep.raw.driftPpm, 1) : null,
      full_scale_dB: fullScaleDb === null ? null : round(fullScaleDb, 3),
      sweep: sweep.summary,
      envelope: drawEnvelope(recording, {
        fromS: timeline.startS,
        toS: timeline.endS,
        fromHz: timeline.sweep.startHz,
        toHz: timeline.sweep.stopHz,
      }),
    },
  };
}

/**
 * What shows along the sweep and beside it; after a jump in time the rest says nothing. The overtones of
 * a clipped input arrive before their time: neither a jump nor a clock can be read beside them.
 */
function checkAlong(
  request: ArrivalRequest,
  recording: Recording,
  sweep: SweepFacts,
  plans: Plans,
  clipped: boolean,
): (ArrivalCheck | null)[] {
  const sibling = toPeer(request);
  const step = clipped ? null : findStep(sweep.arrivals, sibling);
  const dropped = clipped ? null : checkDropped(sweep, step);
  if (step !== null) return [dropped];
  // Cut or buried in noise, a sweep does not show its clock.
  const clear =
    !clipped && sweep.raw.missing === 0 && sweep.raw.snrDb >= request.limits.snr_fail_dB;
  const hot = request.run.place?.role === "long-term";
  return [
    dropped,
    clear ? checkDrift(sweep) : null,
    hot ? null : checkHum(toSilenceBefore(recording, sweep.timeline), recording.rateHz, plans),
    hot ? null : checkAutomaticGain(recording, sweep.timeline, plans),
    sibling === undefined
      ? null
      : sayPolarity(
          comparePolarity(
            sweep.summary.phase_rad,
            sibling.summary.phase_rad,
            toArrivalBandHz(sweep.timeline.sweep),
          ),
          sayRun(sibling.levelDb),
        ),
  ];
}

function findStep(arrivals: readonly BandArrival[], sibling?: SweepSibling): DelayStep | null {
  const alone = findDelayStep(arrivals);
  if (alone !== null || sibling === undefined) return alone;
  return findDelayStep(
    arrivals,
    sibling.summary.arrivals.map(({ hz, delay_ms }) => ({ hz, delayS: delay_ms / 1000 })),
  );
}

/** The short run next in level: most like this one. A variant may be set up otherwise. */
function toPeer(request: ArrivalRequest): SweepSibling | undefined {
  const { place } = request.run;
  if (place === null || place.role === "variant") return undefined;
  const { levelDb } = place;
  const away = (s: SweepSibling): number => Math.abs(s.levelDb - (levelDb ?? 0));
  // A table has neither phase nor arrivals.
  const recorded = listShortSiblings(request).filter((s) => s.summary.phase_rad.length > 0);
  return recorded.sort((a, b) => away(a) - away(b))[0];
}

function checkLevels(
  request: ArrivalRequest,
  sweep: SweepFacts,
  levelDb: number | null,
): (ArrivalCheck | null)[] {
  return [
    levelDb === null ? null : checkLevelPlan(request, levelDb),
    checkLevelStep(request, sweep),
    checkClosing(request, sweep),
    checkLowestDistortion(request, sweep),
    checkStopRule(request, sweep),
  ];
}

function readMicrophone({ plan, open }: ArrivalRequest): MicrophoneResponse | null {
  const { microphone, calibration } = plan;
  if (microphone === null) return null;
  const { file_name: file, kind } = microphone;
  const source = open(microphone.digest);
  try {
    return toMicrophoneResponse(
      { file, kind, ...readTable(source.read(0, source.size), file) },
      calibration.by === "sensitivity" ? 1000 : calibration.frequency_Hz,
    );
  } catch (error) {
    // The recording is not at fault.
    if (error instanceof FileError)
      throw new AnalysisError("microphone.not-readable", error.message, { file, cause: error });
    throw error;
  }
}
