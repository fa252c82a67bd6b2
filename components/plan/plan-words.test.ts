import { describe, expect, it } from "vitest";
import { planSchema } from "@/lib/series/plan-schema";
import { toConditioningHint, toDistanceHint, toPlanLine, toSweepHint } from "./plan-words";

const plain = (text: string): string => text.replaceAll("\u00a0", " ");

describe("hints", () => {
  const plan = planSchema.parse({
    levels: [
      { level_dB: 76, long_term: false },
      { level_dB: 102, long_term: true },
    ],
  });

  it("says what the sweep yields", () => {
    expect(plain(toSweepHint(plan.sweep))).toBe(
      "About 0.4 s per third octave. Bands from 40 Hz to 16 kHz, 27 in all: the octave next to the start is not measured well.",
    );
  });

  it("says at which level the conditioning plays", () => {
    expect(plain(toConditioningHint(plan))).toBe("Pink noise at 93 dB. Never leave it unattended.");
  });

  it("says how the conditioning lies to its sweep while nothing long-term is planned", () => {
    const none = planSchema.parse({});
    expect(plain(toConditioningHint(none))).toContain("9 dB under its sweep");
  });

  it("holds the distance against the largest dimension", () => {
    expect(toDistanceHint(1, 0.31)).toEqual({
      near: false,
      words: "3 × 0.31\u00a0m = 0.93\u00a0m: far enough",
    });
    expect(toDistanceHint(1, 0.5)?.near).toBe(true);
    expect(toDistanceHint(1, null)).toBeNull();
  });

  it("sums the plan up in a line", () => {
    expect(plain(toPlanLine(plan))).toBe("2 levels, 1 long-term · 11.05 s sweep, 20 Hz to 20 kHz");
  });
});
