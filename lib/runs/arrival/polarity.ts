/** Whether a run has the polarity of its siblings, by the phase of the direct sound. */
import type { ArrivalCheck } from "../arrival-schema";
import { passed, speaking } from "./check";

/** Arrivals of two takes are aligned within this. */
const REACH_S = 0.8e-3;
const STEP_S = 0.02e-3;
/** Agreement, 0 to 1, and by how much the other sign must be worse. */
const LEAST_AGREEMENT = 0.8;
const LEAST_MARGIN = 0.1;

/** @returns 1 of the same polarity, -1 of the other, 0 where they are too unlike to tell. */
export function comparePolarity(
  own: readonly number[],
  sibling: readonly number[],
  [lowHz, highHz]: readonly [number, number],
): -1 | 0 | 1 {
  const count = own.length;
  if (count === 0 || count !== sibling.length) return 0;
  let most = -1;
  let least = 1;
  for (let delayS = -REACH_S; delayS <= REACH_S; delayS += STEP_S) {
    let sum = 0;
    for (let i = 0; i < count; i += 1) {
      const hz = lowHz * (highHz / lowHz) ** (i / (count - 1));
      sum += Math.cos((own[i] ?? 0) - (sibling[i] ?? 0) + 2 * Math.PI * hz * delayS);
    }
    most = Math.max(most, sum / count);
    least = Math.min(least, sum / count);
  }
  if (Math.max(most, -least) < LEAST_AGREEMENT || Math.abs(most + least) < LEAST_MARGIN) return 0;
  return most > -least ? 1 : -1;
}

export function sayPolarity(sign: -1 | 0 | 1, sibling: string): ArrivalCheck | null {
  if (sign === 0) return null;
  if (sign === 1) {
    return passed("polarity", {
      title: "same polarity",
      finding: `The polarity is that of the ${sibling} run.`,
    });
  }
  return speaking("polarity", "warn", {
    title: "polarity reversed",
    finding: `The polarity is opposite to that of the ${sibling} run.`,
    spoils: "Levels stand, but something was plugged or set anew between the runs.",
    remedy:
      "Check cables and settings. If only the polarity changed, nothing needs repeating; if the input was touched, record the calibrator again and repeat every level.",
  });
}
