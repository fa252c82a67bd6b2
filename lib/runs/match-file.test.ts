import { describe, expect, it } from "vitest";
import { planSchema } from "../series/plan-schema";
import { toPlannedRuns } from "../series/planned-runs";
import { matchFile } from "./match-file";

const plan = planSchema.parse({
  levels: [
    { level_dB: 76, repeats: 1 },
    { level_dB: 86.5 },
    { level_dB: 96, long_term: true },
    { level_dB: 102, long_term: true },
  ],
  variants: [{ text: "port blocked", level_dB: 96 }],
});
const planned = toPlannedRuns(plan, "osier96");

describe("matchFile", () => {
  it("finds every planned run by the name of its stimulus file", () => {
    for (const run of planned) {
      expect(matchFile(run.fileName, planned)).toEqual({ outcome: "matched", slot: run.slot });
    }
  });

  it.each([
    ["76.wav", "short-76"],
    ["76 dB.WAV", "short-76"],
    ["take 76dB SPL.wav", "short-76"],
    ["osier96_76_short (1).wav", "short-76"],
    ["day one/osier96_76_short.wav", "short-76"],
    ["76_short_r2.flac", "short-76-2"],
    ["76-repeat.wav", "short-76-2"],
    ["run_86.5.wav", "short-86.5"],
    ["run 86,5 dB.wav", "short-86.5"],
    ["96-long.wav", "long-96"],
    ["102dB_conditioned.wav", "long-102"],
    ["closing.wav", "closing-76"],
    ["76_closing.wav", "closing-76"],
    ["96 variant1.wav", "variant-1-96"],
    ["room noise.wav", "ambient"],
    ["Calibrator.wav", "calibrator-before"],
    ["cal_after.wav", "calibrator-after"],
    ["calibrator-end 94 dB.wav", "calibrator-after"],
  ])("%s is %s", (name, slot) => {
    expect(matchFile(name, planned)).toEqual({ outcome: "matched", slot });
  });

  it.each([
    ["corridor_check.wav", /names no planned level/],
    ["osier96.wav", /names no planned level/],
    ["91.wav", /names no planned level/],
    ["76 or 96.wav", /names 76 dB and 96 dB/],
    ["long.wav", /could be 96 dB long-term or 102 dB long-term/],
    ["76 long.wav", /fits no run of the plan/],
    ["76_short_r3.wav", /fits no run of the plan/],
    ["room closing.wav", /more than one kind/],
    ["short.wav", /could be/],
    ["", /names no planned level/],
  ])("leaves %s to the tester", (name, reason) => {
    expect(matchFile(name, planned)).toEqual({
      outcome: "unmatched",
      reason: expect.stringMatching(reason) as string,
    });
  });

  it("leaves a calibrator file alone where the plan has none", () => {
    const without = toPlannedRuns(
      planSchema.parse({ calibration: { by: "sensitivity", full_scale_dB: 124 } }),
      "osier96",
    );
    expect(matchFile("calibrator.wav", without).outcome).toBe("unmatched");
  });
});
