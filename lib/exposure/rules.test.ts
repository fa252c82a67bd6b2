import { describe, expect, it } from "vitest";
import { computeAllowedS, computeDose, DAY_RULES, WEEK_RULES } from "./rules";

describe("computeDose", () => {
  it("adds up: a session is the sum of its parts", () => {
    const parts = [
      { levelDbA: 91, durationS: 600 },
      { levelDbA: 102.4, durationS: 11 },
      { levelDbA: 60, durationS: 90_000 },
    ];
    const apart = parts.reduce((sum, part) => sum + computeDose([part], DAY_RULES.niosh), 0);
    expect(computeDose(parts, DAY_RULES.niosh)).toBeCloseTo(apart, 12);
  });

  it("is one when the allowed time is spent, by every rule", () => {
    for (const rule of [DAY_RULES.niosh, DAY_RULES.eu, WEEK_RULES.adult, WEEK_RULES.sensitive]) {
      const durationS = computeAllowedS(97.3, rule);
      expect(computeDose([{ levelDbA: 97.3, durationS }], rule)).toBeCloseTo(1, 12);
    }
  });

  it("refuses what is no level and no time", () => {
    expect(() => computeAllowedS(NaN, DAY_RULES.eu)).toThrow("not a number");
    expect(() => computeDose([{ levelDbA: 80, durationS: -1 }], DAY_RULES.eu)).toThrow("-1 s");
  });
});
