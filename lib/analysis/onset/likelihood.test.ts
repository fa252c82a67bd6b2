import { describe, expect, it } from "vitest";
import { computeLikelihood } from "./likelihood";
import { ONSET_STEP_DB, planOnset } from "./onset-plan";

const { NaN: none } = Number;

/** chi^2 of one law beside one band, the common gain profiled out: the slow way, from the shape's own curve. */
function toChiSquare(gains: readonly number[], weights: readonly number[], losses: number[]) {
  const rest = gains.map((gain, k) => (weights[k] === 0 ? 0 : gain + losses[k]!));
  const total = weights.reduce((sum, w) => sum + w, 0);
  const mean = rest.reduce((sum, r, k) => sum + weights[k]! * r, 0) / total;
  return rest.reduce((sum, r, k) => sum + weights[k]! * (r - mean) ** 2, 0);
}

describe("computeLikelihood", () => {
  it.each([
    ["whole steps, an odd number of columns", [76, 86, 96, 102], [0, -0.02, -0.5, -2.1], 85, 96],
    ["whole steps, an even number of columns", [76, 86, 96, 102], [0, -0.02, -0.5, -2.1], 85, 96.1],
    ["steps between the grid's", [80.03, 90, 95.26], [0.1, -0.9, -3], 70, 99],
    ["a level without a value", [76, 86, 96, 102], [none, 0, -0.4, -2], 60, 110],
  ])("%s: agrees with the sum over levels", (_, drivesDb, gainDb, lowDb, highDb) => {
    const plan = planOnset(drivesDb);
    const sigmaDb = drivesDb.map((__, k) => 0.02 + 0.01 * k);
    const found = computeLikelihood(
      plan,
      {
        gainDb: Float64Array.from(gainDb),
        sigmaDb: Float64Array.from(sigmaDb),
        stepSigmaDb: new Float64Array(drivesDb.length).fill(0.03),
      },
      Float64Array.from(gainDb, (gain) => -gain),
      lowDb,
      highDb,
    );
    const weights = [...found.weights];
    const lowest = drivesDb[weights.findIndex((weight) => weight > 0)]!;
    plan.shapes.forEach((shape, j) => {
      let best = -Infinity;
      for (let i = 0; i < found.columns; i += 1) {
        const onsetDb = plan.firstOnsetDb + (found.firstColumn + i) * ONSET_STEP_DB;
        const losses = drivesDb.map((drive) => shape.lossDb(drive - onsetDb));
        const expected =
          -0.5 * toChiSquare(gainDb, weights, losses) - Math.max(0, lowest - onsetDb) / 8;
        const value = found.logLikelihood[j * found.columns + i]!;
        if (Math.abs(value - expected) > 1e-6 + 1e-9 * Math.abs(expected))
          expect([shape.law, onsetDb, value]).toEqual([shape.law, onsetDb, expected]);
        best = Math.max(best, value);
      }
      expect(found.shapeBest[j]).toBe(best);
    });
  });
});
