/**
 * Records a demo series as a tester would: calibrator, room noise, the ladder upwards, closing
 * repeat, calibrator. Each file is made when it is asked for, so that one is in memory at a time.
 */
import { synthesiseStimulus, type StimulusShape } from "../../lib/analysis/sweep";
import { writeWav } from "../../lib/audio/write-wav";
import type { Plan } from "../../lib/series/plan-schema";
import { toFileStem, toPlannedRuns, type PlannedRun } from "../../lib/series/planned-runs";
import { toVirtualLoudspeaker, type DemoSeries, type Mishap } from "./demo-labs";
import { createRandom, type Random } from "./random";
import {
  computeMidGain,
  recordCalibrator,
  recordPlayback,
  recordRoom,
  type Conditioned,
  type Recorder,
} from "./virtual-loudspeaker";

export interface DemoRecording {
  run: PlannedRun;
  mishap: Mishap | null;
  /** A whole 24-bit WAV file. */
  makeWav: () => Uint8Array<ArrayBuffer>;
}

const CALIBRATOR_S = 6;
const ROOM_S = 10;
const NOISE = { roomDb: 36, microphoneDb: 16 };
const PLAYER_LATENCY_S = { from: 0.12, to: 0.42 };
const SPEED_OF_SOUND_M_S = 343;
const TAIL_S = 0.1;
const TOP_DBFS = -3;

/** The recordings made so far, in their order. The same series gives the same bytes. */
export function recordSeries(series: DemoSeries): DemoRecording[] {
  const { plan } = series;
  const runs = toPlannedRuns(plan, toFileStem(series.loudspeaker.model));
  let midGain: number | null = null;
  return runs.slice(0, countRecorded(series, runs)).map((run) => {
    const mishap = series.mishaps[run.slot] ?? null;
    return {
      run,
      mishap,
      makeWav: () => {
        midGain ??= computeMidGain(toVirtualLoudspeaker(series));
        const samples = recordRun(series, run, midGain, createRandom(`${series.name}/${run.slot}`));
        return writeWav([befall(samples, mishap, plan.sweep.rate_Hz)], plan.sweep.rate_Hz, "pcm24");
      },
    };
  });
}

function countRecorded({ recorded }: DemoSeries, runs: readonly PlannedRun[]): number {
  if (recorded === "all") return runs.length;
  if (recorded === "none") return 0;
  return runs.findIndex((run) => run.slot === recorded.upTo) + 1;
}

function recordRun(
  series: DemoSeries,
  run: PlannedRun,
  midGain: number,
  random: Random,
): Float64Array {
  const { plan, fullScaleDb } = series;
  const rateHz = plan.sweep.rate_Hz;
  const { from, to } = PLAYER_LATENCY_S;
  const latencyS =
    from + (to - from) * random.uniform() + plan.place.distance_m / SPEED_OF_SOUND_M_S;
  const recorder: Recorder = {
    fullScaleDb,
    distanceM: plan.place.distance_m,
    noise: NOISE,
    latencyS,
    driftPpm: 0,
    lengthS: 0,
  };
  if (run.role === "ambient" || series.mishaps[run.slot]?.kind === "silence") {
    return recordRoom(rateHz, { ...recorder, lengthS: ROOM_S }, random);
  }
  if (run.role === "calibrator-before" || run.role === "calibrator-after") {
    const { level_dB, frequency_Hz } = plan.calibration;
    // The microphone warms a little during the session.
    const levelDb = level_dB + (run.role === "calibrator-after" ? -0.03 : 0);
    return recordCalibrator(
      { levelDb, frequencyHz: frequency_Hz },
      rateHz,
      { ...recorder, lengthS: CALIBRATOR_S },
      random,
    );
  }
  const stimulus = synthesiseStimulus(toStimulusShape(plan, run));
  return recordPlayback(
    {
      loudspeaker: toVirtualLoudspeaker(series),
      stimulus,
      rateHz,
      fullScaleLevelDb: Math.max(...plan.levels.map((l) => l.level_dB)) - TOP_DBFS,
      conditioned: toConditioned(plan, run),
      midGain,
    },
    { ...recorder, lengthS: stimulus.length / rateHz + latencyS + TAIL_S },
    random,
  );
}

/** The stimulus that the plan asks for in this run. */
function toStimulusShape({ sweep }: Plan, run: PlannedRun): StimulusShape {
  return {
    startHz: sweep.start_Hz,
    stopHz: sweep.stop_Hz,
    lengthS: sweep.length_s,
    rateHz: sweep.rate_Hz,
    leadInS: sweep.lead_in_s,
    leadOutS: sweep.lead_out_s,
    gainDb: run.stimulusPeakDbfs ?? 0,
  };
}

function toConditioned({ conditioning }: Plan, run: PlannedRun): Conditioned | null {
  if (run.role !== "long-term" || run.levelDb === null) return null;
  return {
    levelDb: run.levelDb + conditioning.rms_re_sweep_dB,
    minutes: conditioning.minutes,
    gapS: conditioning.gap_s,
  };
}

const BUMP = { frequencyHz: 9, peak: 4, decayS: 0.05 };

/** What went wrong with what sounded: the stand was hit, or the take was cut off. */
function befall(samples: Float64Array, mishap: Mishap | null, rateHz: number): Float64Array {
  if (mishap === null || mishap.kind === "silence") return samples;
  if (mishap.kind === "stops-early")
    return samples.subarray(0, Math.round(mishap.lengthS * rateHz));
  return samples.map((x, n) => {
    const sinceS = n / rateHz - mishap.atS;
    if (sinceS < 0) return x;
    const swing =
      Math.exp(-sinceS / BUMP.decayS) * Math.sin(2 * Math.PI * BUMP.frequencyHz * sinceS);
    return Math.max(-1, Math.min(1, x + BUMP.peak * swing));
  });
}
