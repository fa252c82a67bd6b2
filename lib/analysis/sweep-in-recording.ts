/** Finds the sweep, or each sweep of a train, in a recording of any length. */
import type { Plans } from "./cell-power";
import { findArrival, requireSweep, type Arrival } from "./arrival";
import {
  createDeconvolver,
  toDeconvolutionSize,
  type Deconvolved,
  type Deconvolver,
  type SweepInUse,
} from "./deconvolution";
import type { Recording } from "./types";

/** What was played, ready to be looked for. */
export interface PlayedStimulus {
  samples: Float32Array | Float64Array;
  sweep: SweepInUse;
  /** Index of the sweep's first sample in samples. */
  sweepStart: number;
  /** Samples of the sweep. */
  sweepLength: number;
}

export interface FoundSweep {
  deconvolved: Deconvolved;
  /** Circular lag of the linear response within deconvolved, samples. */
  lag: number;
  arrival: Arrival;
  /** Position of the stimulus' first sample in the recording, samples with fraction; negative where the recorder started late. */
  stimulusAt: number;
  /** Samples of the sweep that lie outside the recording. */
  missing: number;
}

/** Longer recordings are searched piece by piece, so that memory follows the sweep and not the file. */
const LONGEST_WHOLE = 2.5;
const MARGIN_BEFORE_S = 0.05;
const MARGIN_AFTER_S = 1;
/** Of several arrivals the first counts that reaches this share of the strongest, as power. */
const STRONG_SHARE = 0.25;

/** Keeps one deconvolver per size. */
export class SweepFinder {
  readonly #deconvolvers = new Map<number, Deconvolver>();

  constructor(
    readonly stimulus: PlayedStimulus,
    readonly plans: Plans,
  ) {}

  deconvolver(recordingLength: number): Deconvolver {
    const { samples, sweep } = this.stimulus;
    const size = toDeconvolutionSize(recordingLength, samples.length);
    const known =
      this.#deconvolvers.get(size) ?? createDeconvolver(samples, sweep, size, this.plans);
    this.#deconvolvers.set(size, known);
    return known;
  }

  /**
   * The sweep of a recording; the first one of a train.
   * @param sweeps how many the recording holds.
   * @throws AnalysisError "run.silent", "run.no-sweep"
   */
  find(recording: Recording, sweeps = 1): FoundSweep {
    const found = this.look(recording, sweeps);
    requireSweep(found.arrival, this.stimulus.sweep, recording.file);
    return found;
  }

  /**
   * The same without a verdict: the arrival may be that of no sweep at all.
   * @throws AnalysisError "run.silent"
   */
  look(recording: Recording, sweeps = 1): FoundSweep {
    const { samples, file } = recording;
    const whole = LONGEST_WHOLE * this.stimulus.samples.length;
    if (samples.length <= whole && sweeps === 1)
      return this.#findIn(samples, 0, samples.length, file);
    return this.#lookNear(recording, this.#locateFirst(samples, Math.ceil(whole)));
  }

  /** Where the stimulus begins, to a point of the envelope: the first of the strong arrivals. */
  #locateFirst(samples: Recording["samples"], piece: number): number {
    const { sweep, sweepLength } = this.stimulus;
    const hop = piece - sweepLength - Math.round(MARGIN_AFTER_S * sweep.rateHz);
    let found = { peak: 0, at: 0 };
    for (let from = 0; from === 0 || from + sweepLength < samples.length; from += hop) {
      const { envelope } = this.deconvolver(piece).deconvolve(samples.subarray(from, from + piece));
      const { power, samplesPerPoint } = envelope;
      const peak = power.reduce((top, p) => Math.max(top, p), 0);
      if (peak * STRONG_SHARE <= found.peak) continue;
      const first = power.findIndex((p) => p >= STRONG_SHARE * peak);
      found = { peak, at: from + (first + 1) * samplesPerPoint };
    }
    return found.at;
  }

  /** One sweep of a train, whose stimulus begins near the given sample. */
  findNear(recording: Recording, stimulusAt: number): FoundSweep {
    const found = this.#lookNear(recording, stimulusAt);
    requireSweep(found.arrival, this.stimulus.sweep, recording.file);
    return found;
  }

  #lookNear(recording: Recording, stimulusAt: number): FoundSweep {
    const { rateHz } = this.stimulus.sweep;
    const start = Math.max(
      0,
      Math.round(stimulusAt + this.stimulus.sweepStart - MARGIN_BEFORE_S * rateHz),
    );
    const end =
      start + this.stimulus.sweepLength + Math.round((MARGIN_BEFORE_S + MARGIN_AFTER_S) * rateHz);
    return this.#findIn(
      recording.samples.subarray(start, end),
      start,
      recording.samples.length,
      recording.file,
    );
  }

  #findIn(
    piece: Recording["samples"],
    offset: number,
    recordingLength: number,
    file: string,
  ): FoundSweep {
    const { sweep, sweepStart, sweepLength } = this.stimulus;
    const deconvolved = this.deconvolver(piece.length).deconvolve(piece);
    const arrival = findArrival(deconvolved, sweep.rateHz, file);
    const missingAt = (first: number, length: number): number =>
      Math.max(0, -first) + Math.max(0, first + sweepLength - length);
    // Of the lags that a circle holds alike, the one whose sweep lies in the piece.
    const early = arrival.lag - deconvolved.response.length;
    const lag =
      missingAt(early + sweepStart, piece.length) <
      missingAt(arrival.lag + sweepStart, piece.length)
        ? early
        : arrival.lag;
    return {
      deconvolved,
      lag: arrival.lag,
      arrival,
      stimulusAt: lag + offset,
      missing: missingAt(lag + offset + sweepStart, recordingLength),
    };
  }
}
