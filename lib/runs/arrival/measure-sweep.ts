/** What a recording holds of the planned sweep, measured with the engine's own front. */
import { LEAST_COMPACTNESS } from "../../analysis/arrival";
import { assembleRun, toLowResponse } from "../../analysis/assemble-run";
import { thirdOctaves, twentyFourthOctaves } from "../../analysis/bands";
import type { Plans } from "../../analysis/cell-power";
import { toArrivalBandHz } from "../../analysis/deconvolution";
import { meanInBand } from "../../analysis/mean-in-band";
import { measureFoundRun, type MeasuringContext, type RawRun } from "../../analysis/measure-run";
import type { MicrophoneResponse } from "../../analysis/microphone";
import { toGateWindow, toOrderWindows } from "../../analysis/order-windows";
import { toPlayedStimulus } from "../../analysis/stimulus-in-use";
import { SweepFinder, type FoundSweep } from "../../analysis/sweep-in-recording";
import type { MeasuredRun, Recording, ThirdOctave } from "../../analysis/types";
import type { Plan } from "../../series/plan-schema";
import type { SweepSummary } from "../arrival-schema";
import { findDelayStep, measureBandArrivals, toSlope, type BandArrival } from "./band-arrivals";
import { round } from "./file-facts";
import { toHiss, toSilenceBefore } from "./noise-checks";
import { toTimeline, toTimeS, type SweepTimeline } from "./sweep-timeline";

/** Arrivals at 500 Hz and 2 kHz further apart belong to another sweep (docs/domain.md section 9). */
const LARGEST_SPREAD_S = 0.02;
const PHASES = 12;
const PHASE_BEFORE_S = 0.004;
const PHASE_AFTER_S = 0.012;
/** 14 dB: what is further over the floor is measured. */
const MEASURED_RATIO = 10 ** 1.4;

export interface SweepLook {
  finder: SweepFinder;
  found: FoundSweep;
  timeline: SweepTimeline;
  arrivals: BandArrival[];
  verdict: "found" | "none" | "another";
}

/**
 * @throws AnalysisError "stimulus.invalid" where the plan's sweep cannot be made, "run.silent".
 */
export function lookForSweep(recording: Recording, finder: SweepFinder): SweepLook {
  const found = finder.look(recording);
  const timeline = toTimeline(found, finder.stimulus, recording.samples.length);
  const { sweep } = timeline;
  const covered = measureBandArrivals(found, sweep, finder.plans).filter(
    ({ hz }) => toTimeS(timeline, hz / 1.2) > 0 && toTimeS(timeline, hz * 1.2) < timeline.lengthS,
  );
  return { finder, found, timeline, arrivals: covered, verdict: judge(found, covered) };
}

export const createFinder = (plan: Plan, plans: Plans): SweepFinder =>
  new SweepFinder(toPlayedStimulus({ ...plan.sweep }, undefined), plans);

function judge({ arrival }: FoundSweep, arrivals: readonly BandArrival[]): SweepLook["verdict"] {
  // Lost samples split a sweep in two, each part as sharp as before: the step tells them from another sweep.
  const late = Math.abs(arrival.spreadS) > LARGEST_SPREAD_S;
  if (late || arrival.compactness < LEAST_COMPACTNESS) {
    const slopeS = Math.abs(toSlope(arrivals)) * Math.log(4);
    if (findDelayStep(arrivals) !== null && slopeS < LARGEST_SPREAD_S / 4) return "found";
  }
  if (arrival.compactness < LEAST_COMPACTNESS) return "none";
  return late ? "another" : "found";
}

export interface SweepFacts extends SweepLook {
  bands: ThirdOctave[];
  /** [bands] whether the recording holds all of it. */
  held: boolean[];
  raw: RawRun;
  /** Levels re a sine that just reaches full scale. */
  run: MeasuredRun;
  /** Of the reference band, %; NaN where the harmonics lie in the noise. */
  thdPercent: number;
  summary: SweepSummary;
}

export function measureSweep(
  recording: Recording,
  look: SweepLook,
  plan: Plan,
  role: string,
  microphone: MicrophoneResponse | null,
): SweepFacts {
  const { finder, found, timeline } = look;
  const { sweep } = timeline;
  const { startHz, stopHz, rateConstantS, rateHz } = sweep;
  const grid = twentyFourthOctaves(startHz, stopHz);
  const { environment, gate_ms: gateMs } = plan.place;
  const context: MeasuringContext = {
    finder,
    plans: finder.plans,
    edgeHz: grid.edgeHz,
    windows: toOrderWindows(rateConstantS, rateHz),
    gate: environment === "gated" && gateMs !== null ? toGateWindow(gateMs / 1000, rateHz) : null,
    ambient: null,
    microphone,
    referenceBandHz: plan.reference_band_Hz,
  };
  const raw = measureFoundRun(recording, found, { kind: role }, context);
  const bands = thirdOctaves(startHz, stopHz);
  const everywhere = Array.from(grid.centreHz, () => true);
  const topHz = Math.min(stopHz, 0.45 * rateHz, microphone?.highestHz ?? Infinity);
  const run = assembleRun(
    raw,
    { file: recording.file, level_dB: 0, kind: "short-term", channel: 1 },
    0,
    {
      grid,
      bands,
      fundamentalValid: everywhere,
      splValid: everywhere,
      topHz,
      fullScaleDb: 0,
      referenceBandHz: plan.reference_band_Hz,
      gateNoiseShare: (context.gate?.energyS ?? 0) / (context.windows[0]?.energyS ?? 1),
      lowResponse: toLowResponse(raw),
    },
  );
  const held = bands.map(
    ({ lowHz, highHz }) =>
      toTimeS(timeline, lowHz) >= 0 && toTimeS(timeline, highHz) <= timeline.lengthS,
  );
  return {
    ...look,
    bands,
    held,
    raw,
    run,
    thdPercent: toThdPercent(raw, grid.edgeHz, plan.reference_band_Hz, topHz),
    summary: {
      band_dBFS: run.bands.map(({ levelDb }, b) => (held[b] === true ? orNull(levelDb) : null)),
      sigma_dB: run.bands.map(({ sigmaDb }) => orNull(sigmaDb)),
      level_dBFS: round(run.measuredLevelDb, 3),
      hiss_dBFS: orNull(
        10 *
          Math.log10(
            toHiss(toSilenceBefore(recording, timeline), rateHz, finder.plans) ?? Number.NaN,
          ),
      ),
      phase_rad: measurePhases(found, toArrivalBandHz(sweep), rateHz),
      arrivals: look.arrivals.map(({ hz, delayS }) => ({
        hz: Number(hz.toPrecision(6)),
        delay_ms: round(1000 * delayS, 4),
      })),
    },
  };
}

const orNull = (value: number): number | null => (Number.isFinite(value) ? round(value, 4) : null);

export function toThdPercent(
  { orders }: Pick<RawRun, "orders">,
  edgeHz: Float64Array,
  band: readonly [number, number],
  topHz: number,
): number {
  const mean = (cells: Float64Array): number => meanInBand(cells, edgeHz, band);
  const [fundamental, ...harmonics] = orders;
  if (fundamental === undefined) return Number.NaN;
  let clean = 0;
  let floor = 0;
  for (const order of harmonics.filter((o) => o.order * band[1] <= topHz)) {
    clean += mean(order.power) - mean(order.floor);
    floor += mean(order.floor);
  }
  const ratio = clean / (mean(fundamental.power) - mean(fundamental.floor));
  return clean >= MEASURED_RATIO * floor ? 100 * Math.sqrt(ratio) : Number.NaN;
}

/** Phase of the direct sound at even steps of lg f, re its arrival. */
function measurePhases(
  { deconvolved: { response }, lag }: FoundSweep,
  [lowHz, highHz]: readonly [number, number],
  rateHz: number,
): number[] {
  const size = response.length;
  const before = Math.round(PHASE_BEFORE_S * rateHz);
  const after = Math.round(PHASE_AFTER_S * rateHz);
  const start = Math.round(lag);
  return Array.from({ length: PHASES }, (_, i) => {
    const omega = (2 * Math.PI * lowHz * (highHz / lowHz) ** (i / (PHASES - 1))) / rateHz;
    let re = 0;
    let im = 0;
    for (let n = -before; n < after; n += 1) {
      const side = n < 0 ? before : after;
      const weight = 0.5 + 0.5 * Math.cos((Math.PI * n) / side);
      const x = weight * (response[(((start + n) % size) + size) % size] ?? 0);
      re += x * Math.cos(omega * n);
      im -= x * Math.sin(omega * n);
    }
    return round(Math.atan2(im, re), 3);
  });
}
