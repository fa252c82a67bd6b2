import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { computeAllowedS, computeDose, DAY_RULES, WEEK_RULES } from "./rules";

describe("computeDose", () => {
  const exposures = fc.array(
    fc.record({
      levelDbA: fc.double({ min: 20, max: 140, noNaN: true }),
      // Shorter ones lose their last digits in halving.
      durationS: fc.oneof(fc.constant(0), fc.double({ min: 1e-9, max: 1e6, noNaN: true })),
    }),
    { maxLength: 8 },
  );

  it("adds up: a session is the sum of its parts, in any order, however a part is cut", () => {
    fc.assert(
      fc.property(exposures, fc.constantFrom(...Object.values(DAY_RULES)), (parts, rule) => {
        const whole = computeDose(parts, rule);
        const apart = parts.reduce((sum, part) => sum + computeDose([part], rule), 0);
        const halves = parts.flatMap((part) => {
          const half = { ...part, durationS: part.durationS / 2 };
          return [half, half];
        });
        for (const other of [
          apart,
          computeDose(parts.toReversed(), rule),
          computeDose(halves, rule),
        ])
          expect(Math.abs(other - whole)).toBeLessThanOrEqual(1e-12 * whole);
      }),
    );
  });

  it("never falls as the level rises", () => {
    const level = fc.double({ min: 20, max: 140, noNaN: true });
    fc.assert(
      fc.property(level, level, (a, b) => {
        const dose = (levelDbA: number) =>
          computeDose([{ levelDbA, durationS: 60 }], WEEK_RULES.adult);
        expect(dose(Math.max(a, b))).toBeGreaterThanOrEqual(dose(Math.min(a, b)));
      }),
    );
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
