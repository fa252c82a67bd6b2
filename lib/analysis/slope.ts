/** Local slope d(output)/d(input) of a band between successive runs, and what it says. */
import type { LevelGroup } from "./compression";
import type { BandOnset } from "./onset/find-onsets";
import { ONSET_LOSS_DB } from "./onset/shapes";
import { sayDb, sayNumber, sayRun } from "./say";

/** Slopes up to this are a ceiling; up to the next, gradual. */
export const CEILING_SLOPE = 0.3;
const GRADUAL_SLOPE = 0.8;
/** One run that loses less than this, dB, shows neither ceiling nor slope. */
const SHOWS_SLOPE_LOSS_DB = 1;
const SURE = 0.65;
const VERY_SURE = 0.9;
const NEAR_CEILING_SLOPE = 0.5;
/** A slope known no better than this is read from the laws that fit instead. */
const READABLE_SIGMA = 0.15;

export interface StepSlope {
  fromDb: number;
  toDb: number;
  slope: number;
  /** Standard uncertainty from noise, repeats and the step. */
  sigma: number;
}

/** Slopes over every step between runs that have a value in this band, quietest step first. */
export function stepSlopes(groups: readonly LevelGroup[], onset: BandOnset): StepSlope[] {
  const { gainDb, sigmaDb, stepSigmaDb } = onset.gains;
  const valid = [...gainDb.keys()].filter((k) => Number.isFinite(gainDb[k]));
  return valid.slice(1).map((k, i): StepSlope => {
    const below = valid[i] ?? 0;
    const fromDb = groups[below]?.driveDb ?? Number.NaN;
    const toDb = groups[k]?.driveDb ?? Number.NaN;
    const noise = Math.hypot(
      sigmaDb[below] ?? 0,
      sigmaDb[k] ?? 0,
      stepSigmaDb[below] ?? 0,
      stepSigmaDb[k] ?? 0,
    );
    return {
      fromDb,
      toDb,
      slope: 1 + ((gainDb[k] ?? Number.NaN) - (gainDb[below] ?? Number.NaN)) / (toDb - fromDb),
      sigma: noise / (toDb - fromDb),
    };
  });
}

export type SlopeKind = "ceiling" | "gradual" | "unclear";

export interface SlopeReading {
  kind: SlopeKind;
  /** With its figures, without capital and full stop. */
  words: string;
}

/**
 * Reads ceiling or gradual from the top of a band that has an onset: from the top step itself where both its
 * runs are past the onset, else from the laws that fit.
 */
export function readSlope(groups: readonly LevelGroup[], onset: BandOnset): SlopeReading {
  const { detection, posterior } = onset;
  const top = stepSlopes(groups, onset).at(-1);
  if (!detection || !top) return { kind: "unclear", words: "only one run has a value here" };
  const lossDb = detection.lossDb[detection.top] ?? Number.NaN;
  const run = sayRun(groups[detection.top]?.levelDb ?? Number.NaN);
  const flat = posterior?.probabilitySlopeUpTo(CEILING_SLOPE) ?? 0;
  const gradual = (posterior?.probabilitySlopeUpTo(GRADUAL_SLOPE) ?? 0) - flat;
  if (stepsPastOnset(groups, onset) && top.sigma <= READABLE_SIGMA) {
    const step = `over the last ${sayDb(top.toDb - top.fromDb)} of drive the output moved ${sayDb(top.slope * (top.toDb - top.fromDb))} (slope ${sayNumber(top.slope, 2)})`;
    if (top.slope <= CEILING_SLOPE) return { kind: "ceiling", words: `held at a ceiling: ${step}` };
    if (top.slope < NEAR_CEILING_SLOPE && flat >= VERY_SURE) {
      return {
        kind: "ceiling",
        words: `bends towards a ceiling: ${step}, and the laws that fit are flat above their knee`,
      };
    }
    if (top.slope <= GRADUAL_SLOPE)
      return { kind: "gradual", words: `gives way gradually: ${step}` };
    return {
      kind: "unclear",
      words: `the output still follows the input nearly: ${step}, and nothing else was found`,
    };
  }
  if (lossDb < SHOWS_SLOPE_LOSS_DB) {
    return {
      kind: "unclear",
      words: `${sayDb(lossDb)} lost in the ${run} run shows neither ceiling nor slope`,
    };
  }
  const lost = `${sayDb(lossDb)} lost in the ${run} run, no onset before it`;
  if (flat >= SURE)
    return {
      kind: "ceiling",
      words: `${lost}: most laws that fit hold a ceiling (${sayNumber(100 * flat, 0)} %)`,
    };
  if (gradual >= SURE)
    return {
      kind: "gradual",
      words: `${lost}: most laws that fit give way gradually (${sayNumber(100 * gradual, 0)} %)`,
    };
  return { kind: "unclear", words: `${lost}: a ceiling and a gradual law fit alike` };
}

/** Whether the run below the top one is past the onset as well. */
function stepsPastOnset(groups: readonly LevelGroup[], { detection }: BandOnset): boolean {
  if (!detection) return false;
  const below = [...groups.keys()].findLast(
    (k) => k < detection.top && Number.isFinite(detection.lossDb[k]),
  );
  if (below === undefined) return false;
  // Where the very first step loses, the lowest run is past it too or close to it.
  if (below === 0) return false;
  return below >= detection.firstActive && (detection.lossDb[below] ?? 0) >= ONSET_LOSS_DB;
}
