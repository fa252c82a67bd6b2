/**
 * The shapes that travel inside the engine: from recordings to measured runs (front), and from
 * measured runs to findings (back). Levels are 10 lg of power; NaN is "no value" in here and
 * becomes null only in the result.
 */
import type { Conditioning } from "../series/series-schema";
import type { Quality } from "../result/result-schema";
import type { SplScaleFacts } from "./spl-uncertainty";
import type { RunKind } from "../series/vocabulary";

/** One channel of a recording as the engine takes it. */
export interface Recording {
  file: string;
  rateHz: number;
  /** [n] full scale = 1. */
  samples: Float32Array | Float64Array;
  /** Digital full scale of the file for the clipping check: 1 for float, 1 - 2^(1-bits) for PCM. */
  fullScale: number;
  /** [n] the loopback channel, where there is one. */
  loopback?: Float32Array | Float64Array;
}

/** A third-octave band of the grid. */
export interface ThirdOctave {
  nominalHz: number;
  exactHz: number;
  lowHz: number;
  highHz: number;
}

/** One band of one run. Power in Pa^2 referred to 1 m by the run's calibration, ungated. */
export interface BandMeasure {
  /** Fundamental, noise subtracted, dB re 20 uPa on the run's own scale; NaN where under the floor. */
  levelDb: number;
  /** The same for printing: gated, corrected to 1 m; NaN where SPL is not valid. */
  splDb: number;
  /** Standard uncertainty of levelDb from noise alone, dB. */
  sigmaDb: number;
  /** Fundamental over noise, dB. */
  snrDb: number;
  /**
   * Orders 2 to 9, in order; power ratio to the fundamental at the same excitation frequency.
   * `ratio` has its noise subtracted; NaN where the order does not exist in this band.
   */
  harmonics: {
    order: number;
    ratio: number;
    floorRatio: number;
    quality: Quality | null;
    /** The same ratio referred to the input: divided by |linear response at n f / at f|^2 of a low run. */
    inputRatio: number;
  }[];
  thdPercent: number;
  thdQuality: Quality | null;
  /** "2-5"; "" where a table states THD without its orders. */
  thdOrders: string;
  /** THD that a table states, as a power ratio to the fundamental; absent for recordings. */
  statedThd?: number;
}

/** A run after deconvolution: the end of the engine's front. */
export interface MeasuredRun {
  file: string;
  levelDb: number;
  /** Drive on the scale of levelDb. */
  driveDb: number;
  kind: RunKind;
  variant: string | undefined;
  conditioning: Conditioning | undefined;
  /** Reduced elsewhere: noise floor, clipping and true step are not known. */
  isTable?: boolean;
  measuredLevelDb: number;
  latencyS: number;
  driftPpm: number;
  peakDbfs: number;
  clipped: boolean;
  snrDb: number;
  /** [grid] */
  splDb: Float64Array;
  floorDb: Float64Array;
  /** [grid] ungated fundamental on the scale of BandMeasure.levelDb: for anchors across frequency. */
  levelCurveDb: Float64Array;
  harmonics: {
    order: number;
    splDb: Float64Array;
    floorDb: Float64Array;
    quality: (Quality | null)[];
  }[];
  thdPercent: Float64Array;
  thdQuality: (Quality | null)[];
  thdOrders: string[];
  /** [bands] in the order of MeasuredSeries.bands. */
  bands: BandMeasure[];
}

/** What the back of the engine starts from. */
export interface MeasuredSeries {
  /** [grid] 1/24-octave mid-band frequencies, Hz. */
  gridHz: Float64Array;
  bands: ThirdOctave[];
  runs: MeasuredRun[];
  splValid: boolean;
  /** Highest usable frequency for harmonics: min(f2, 0.45 rate, top of the microphone file). */
  topHz: number;
  tuningHz: number | undefined;
  /** Sweep start and rate constant R, s: when a band is passed. */
  sweep: { startHz: number; stopHz: number; rateConstantS: number };
  /** Calibrator after minus before, dB; absent where there was one recording or none. */
  calibratorChangeDb?: number;
  /** What the uncertainty of an absolute level rests on; absent where levels are simulated. */
  splScale?: SplScaleFacts;
}

/** Progress of an analysis, by run and stage. */
export type Stage = "read" | "aligned" | "harmonics" | "floor" | "levels" | "onset";
export type OnProgress = (event: {
  file: string | null;
  stage: Stage;
  done: number;
  total: number;
}) => void;
