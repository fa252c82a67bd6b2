import { describe, expect, it } from "vitest";
import {
  gainRidingExcessDb,
  gainRidingLossDb,
  OVERLOAD_LAWS,
  overloadHarmonic,
  overloadLossDb,
  twoPathExcessDb,
  twoPathLossDb,
} from "./static-laws";

describe("static laws", () => {
  it("are inverted by their excess", () => {
    for (const loss of [0.1, 1 / 3, 1, 3]) {
      for (const knee of [0, 2, 12]) {
        for (const slope of [0, 0.3, 0.7]) {
          expect(gainRidingLossDb(gainRidingExcessDb(loss, knee, slope), knee, slope)).toBeCloseTo(
            loss,
            9,
          );
        }
      }
      expect(twoPathLossDb(twoPathExcessDb(loss, 0.5), 0.5)).toBeCloseTo(loss, 9);
    }
    expect(twoPathExcessDb(3, 0.2)).toBe(Infinity);
  });

  it.each(OVERLOAD_LAWS)("%s: odd distortion of a third of the amplitude lost, at least", (law) => {
    for (const excessDb of [0.5, 2, 4, 8, 12]) {
      const amplitude = 10 ** (excessDb / 20);
      const first = overloadHarmonic(law, amplitude, 1, 2000);
      const odd = [3, 5, 7, 9].map(
        (order) => overloadHarmonic(law, amplitude, order, 2000) / first,
      );
      const lost = 1 - 10 ** (-overloadLossDb(law, excessDb, 2000) / 20);
      // Arctangent has exactly 1/3 in H3 alone (docs/onset-notes.md section 5).
      expect(Math.hypot(...odd) / lost).toBeGreaterThan(0.3333);
    }
  });
});
