/** The level whose run would narrow an onset's interval most: the expected width over what that run may show. */
import type { LawSample, OnsetPosterior } from "./onset/posterior";
import { ONSET_LOSS_DB } from "./onset/shapes";

/** Intervals this narrow, dB, are not worth a run. */
const NARROW_DB = 0.6;
/** A run must bring at least this share off the width. */
const WORTH_SHARE = 0.15;
/** Of the equally likely laws, every so many-th plays the truth. */
const TRUTH_STRIDE = 16;
const LAW_STRIDE = 2;
const LAW_ERROR_DB = 0.02;

export interface NextRun {
  levelDb: number;
  widthNowDb: number;
  widthExpectedDb: number;
  /** Every level that was weighed, ascending, with the width to be expected after a run there. */
  candidates: { levelDb: number; widthExpectedDb: number }[];
}

/**
 * @param sigmaDb standard uncertainty of one further run's loss: noise and step, dB.
 * @param tested drives that exist already, dB, ascending. No candidate lies above the highest.
 * @returns null where no whole-decibel level would help.
 */
export function suggestNextRun(
  posterior: OnsetPosterior,
  tested: readonly number[],
  sigmaDb: number,
): NextRun | null {
  const top = tested.at(-1) ?? Number.NaN;
  const now = posterior.quantiles(ONSET_LOSS_DB, top);
  const widthNowDb = now.highDb - now.lowDb;
  if (!(widthNowDb > NARROW_DB)) return null;
  const laws = posterior.samples.filter((_, i) => i % LAW_STRIDE === 0);
  const candidates: NextRun["candidates"] = [];
  const from = Math.ceil(now.lowDb - 1);
  const to = Math.min(Math.floor(now.highDb + 1), Math.floor(top));
  for (let levelDb = from; levelDb <= to; levelDb++) {
    if (tested.some((drive) => Math.abs(drive - levelDb) < 0.5)) continue;
    candidates.push({ levelDb, widthExpectedDb: expectedWidth(laws, levelDb, sigmaDb) });
  }
  const best = candidates.reduce<NextRun["candidates"][number] | null>(
    (found, next) =>
      found === null || next.widthExpectedDb < found.widthExpectedDb - 0.02 ? next : found,
    null,
  );
  return best !== null && best.widthExpectedDb <= (1 - WORTH_SHARE) * widthNowDb
    ? { ...best, widthNowDb, candidates }
    : null;
}

/** Mean 90 % width after a run at `levelDb`, each of a few laws playing the truth in turn. */
function expectedWidth(laws: readonly LawSample[], levelDb: number, sigmaDb: number): number {
  const losses = Float64Array.from(laws, ({ shape, onsetDb }) => shape.lossDb(levelDb - onsetDb));
  const weights = new Float64Array(laws.length);
  let widths = 0;
  let truths = 0;
  for (let truth = TRUTH_STRIDE / 4; truth < laws.length; truth += TRUTH_STRIDE / LAW_STRIDE) {
    const shown = losses[truth] ?? 0;
    const sigma = Math.hypot(sigmaDb, LAW_ERROR_DB * (1 + shown));
    let total = 0;
    for (let i = 0; i < laws.length; i++) {
      weights[i] = Math.exp(-0.5 * (((losses[i] ?? 0) - shown) / sigma) ** 2);
      total += weights[i] ?? 0;
    }
    widths += quantile(laws, weights, 0.95 * total) - quantile(laws, weights, 0.05 * total) + 0.2;
    truths++;
  }
  return widths / truths;
}

function quantile(laws: readonly LawSample[], weights: Float64Array, target: number): number {
  let sum = 0;
  for (let i = 0; i < laws.length; i++) {
    sum += weights[i] ?? 0;
    if (sum >= target) return laws[i]?.onsetDb ?? Number.NaN;
  }
  return laws.at(-1)?.onsetDb ?? Number.NaN;
}
