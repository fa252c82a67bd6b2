/**
 * The two questions to the distortion of a band: is there enough of it to explain the loss, and did it
 * grow like an overload or only follow the output (docs/onset-notes.md section 5)?
 */
import { harmonicsOf, type LevelGroup, type MeanHarmonic } from "./compression";
import type { Detection } from "./onset/detect";
import { sayNumber } from "./say";

/** An overload loses level only with this much odd distortion. */
export const OVERLOAD_ODD_RATIO = 0.2;
/** Noise alone must stay under this ratio for a verdict. */
const NOISE_ODD_RATIO = 0.14;
/** Under this loss, dB, the first question says nothing. */
const SMALLEST_LOSS_DB = 0.12;
const LARGEST_GROWTH_NEEDED_DB = 1;
/**
 * No memoryless law has an odd ratio under 1/3. From here the ratio speaks for one, and half the growth is asked:
 * tanh and algebraic laws grow only by about half their loss beyond the output.
 */
const MEMORYLESS_ODD_RATIO = 0.3;
/**
 * With such a ratio, this much odd distortion (amplitude re the fundamental, referred to the input) decides without
 * growth: an arctangent's H3, and that of many suspensions, follows its own output. No sound driver has it of its own.
 */
const TELLING_ODD = 0.045;
/** A memoryless loss grows no faster than by this factor over the square of the drive; a limiter's starts suddenly. */
const GRADUAL_SHARE = 0.6;
const GROWTH_WITHOUT_LOSS_DB = 0.5;
/** A component called noise may stand this far over its floor, dB. */
const HIDDEN_OVER_FLOOR_DB = 6;
/** Standard uncertainty of a component in dB is this times 10^(-SNR/20). */
const AMPLITUDE_SIGMA_DB = 20 / Math.LN10 / Math.SQRT2;

export type OverloadVerdict = "overload" | "no overload" | "no verdict";

export interface DistortionEvidence {
  verdict: OverloadVerdict;
  /** rms of the odd harmonics, referred to the input, over the share of amplitude lost; NaN without a loss. */
  oddRatio: number;
  /** dB by which H3 grew beyond what follows the output; NaN where unknown. */
  growthDb: number;
  growthNeededDb: number;
  /** Why there is no verdict; "" otherwise. */
  reason: string;
}

/**
 * Asks both questions of band `b` at its highest run.
 *
 * @param groups plain short-term levels, ascending.
 * @param detection of the same band over the same levels.
 */
export function weighDistortion(
  groups: readonly LevelGroup[],
  detection: Detection,
  bandIndex: number,
): DistortionEvidence {
  const top = groups[detection.top];
  const none = { oddRatio: Number.NaN, growthDb: Number.NaN, growthNeededDb: Number.NaN };
  if (!top) return { verdict: "no verdict", ...none, reason: "no run" };
  const odd = harmonicsOf(top, bandIndex).filter(
    ({ order, ratio, quality }) => order % 2 === 1 && quality !== null && ratio === ratio,
  );
  const third = odd.find(({ order }) => order === 3);
  if (!third)
    return {
      verdict: "no verdict",
      ...none,
      reason: top.runs.some(({ isTable }) => isTable === true)
        ? "the table holds no third harmonic there"
        : "the third harmonic lies above the measured range",
    };

  const lossDb = detection.lossDb[detection.top] ?? Number.NaN;
  const respondDb = (order: number): number => responseDb(groups, bandIndex, order);
  const share = 1 - 10 ** (-lossDb / 20);
  const hasLoss = lossDb >= SMALLEST_LOSS_DB;
  const audible = odd.filter(({ quality }) => quality !== "noise");
  const oddRatio = hasLoss
    ? Math.sqrt(sum(audible.map(({ inputRatio }) => Math.max(inputRatio, 0)))) / share
    : Number.NaN;
  const noiseRatio = Math.sqrt(sum(odd.map((harmonic) => inputFloor(harmonic, respondDb)))) / share;
  const { growthDb, sigmaDb } = growthOf(groups, detection, bandIndex, third);
  const memoryless = oddRatio >= MEMORYLESS_ODD_RATIO;
  const needed = hasLoss
    ? Math.min(lossDb, LARGEST_GROWTH_NEEDED_DB) * (memoryless ? 0.5 : 1)
    : GROWTH_WITHOUT_LOSS_DB;
  const growthNeededDb = Math.max(needed, 3 * sigmaDb);
  const figures = { oddRatio, growthDb, growthNeededDb };

  const measured = third.quality === "measured" && oddRatio >= OVERLOAD_ODD_RATIO;
  if (hasLoss && !(noiseRatio <= NOISE_ODD_RATIO) && !measured) {
    return { verdict: "no verdict", ...figures, reason: "the odd harmonics lie in the noise" };
  }
  if (hasLoss && oddRatio < OVERLOAD_ODD_RATIO)
    return { verdict: "no overload", ...figures, reason: "" };
  const gradual = memoryless && measured && isGradual(groups, detection);
  if (gradual && oddRatio * share >= TELLING_ODD) {
    return { verdict: "overload", ...figures, reason: "" };
  }
  const grew = third.quality !== "noise" && growthDb > growthNeededDb;
  if (gradual && !grew) {
    const reason = `the odd harmonics (${sayNumber(oddRatio, 2)} of the amplitude lost) suit an overload but grew no faster than the output`;
    return { verdict: "no verdict", ...figures, reason };
  }
  return { verdict: grew ? "overload" : "no overload", ...figures, reason: "" };
}

/** Whether the run below the top one has lost as much as a law that begins with the square of the drive asks. */
function isGradual(groups: readonly LevelGroup[], { lossDb, top }: Detection): boolean {
  const below = [...lossDb.keys()].findLast((k) => k < top && Number.isFinite(lossDb[k]));
  if (below === undefined) return false;
  const stepDb = (groups[top]?.driveDb ?? Number.NaN) - (groups[below]?.driveDb ?? Number.NaN);
  return (lossDb[below] ?? 0) >= GRADUAL_SHARE * (lossDb[top] ?? 0) * 10 ** (-stepDb / 10);
}

const sum = (values: number[]): number => values.reduce((total, value) => total + value, 0);

/** Floor of a harmonic referred to the input: by its own response ratio, or by that of the lowest run. */
function inputFloor(harmonic: MeanHarmonic, respondDb: (order: number) => number): number {
  const { ratio, inputRatio, floorRatio, order } = harmonic;
  if (ratio > 0 && inputRatio > 0) return floorRatio * (inputRatio / ratio);
  const response = respondDb(order);
  return floorRatio * (Number.isFinite(response) ? 10 ** (-response / 10) : 1);
}

/** Linear response at order times the band's frequency re the band, dB, from the lowest run's bands. */
function responseDb(groups: readonly LevelGroup[], bandIndex: number, order: number): number {
  const gains = groups[0]?.gainDb;
  const at = bandIndex + 10 * Math.log10(order);
  const low = gains?.[Math.floor(at)] ?? Number.NaN;
  const high = gains?.[Math.ceil(at)] ?? Number.NaN;
  return low + (at - Math.floor(at)) * (high - low) - (gains?.[bandIndex] ?? Number.NaN);
}

/**
 * Growth of H3 over what the output's growth predicts from a lower run: from the run that shows it most surely,
 * since the quietest runs predict it only within their noise. A run that loses level itself serves as well:
 * behind a gain control H3 follows the output from any run to any other.
 */
function growthOf(
  groups: readonly LevelGroup[],
  detection: Detection,
  bandIndex: number,
  third: MeanHarmonic,
): { growthDb: number; sigmaDb: number } {
  const topDb = 10 * Math.log10(third.ratio);
  const topSigmaDb = sigmaOf(third);
  const lossAt = (k: number): number => detection.lossDb[k] ?? Number.NaN;
  const topDriveDb = groups[detection.top]?.driveDb ?? Number.NaN;
  let best = { growthDb: Number.NaN, sigmaDb: topSigmaDb };
  if (third.quality === "noise") return best;
  for (const [k, group] of groups.slice(0, detection.top).entries()) {
    const own = harmonicsOf(group, bandIndex).find(
      ({ order, quality }) => order === 3 && quality !== null,
    );
    const outputStepDb = topDriveDb - group.driveDb - (lossAt(detection.top) - lossAt(k));
    if (!own || !Number.isFinite(outputStepDb)) continue;
    // In the noise, the upper bound of what may hide there makes the prediction: the growth is a safe lower bound.
    const inNoise = own.quality === "noise" || !(own.ratio > own.floorRatio);
    const startDb = inNoise
      ? 10 * Math.log10(own.floorRatio) + HIDDEN_OVER_FLOOR_DB
      : 10 * Math.log10(own.ratio);
    const growthDb = topDb - (startDb + 2 * outputStepDb);
    const sigmaDb = Math.hypot(topSigmaDb, inNoise ? 0 : sigmaOf(own));
    if (!(growthDb - 3 * sigmaDb <= best.growthDb - 3 * best.sigmaDb)) best = { growthDb, sigmaDb };
  }
  return best;
}

const sigmaOf = ({ ratio, floorRatio }: MeanHarmonic): number =>
  ratio > 0 ? AMPLITUDE_SIGMA_DB * Math.sqrt(floorRatio / ratio) : Infinity;
