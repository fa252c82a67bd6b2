import { describe, expect, it } from "vitest";
import { planSchema } from "../series/plan-schema";
import { toPlannedRuns } from "../series/planned-runs";
import type { ArrivalCheck, RunState } from "./arrival-schema";
import { toLadder, toStopRule, type LadderRun } from "./ladder";

const planned = toPlannedRuns(
  planSchema.parse({
    levels: [{ level_dB: 76, repeats: 1 }, { level_dB: 86 }, { level_dB: 96, long_term: true }],
  }),
  "fennel5",
);
const run = (slot: string | null, state: RunState, stop = false): LadderRun => ({
  slot,
  state,
  report: stop ? { checks: [stopCheck] } : null,
});
const stopCheck: ArrivalCheck = {
  code: "stop-rule",
  verdict: "warn",
  title: "stop here",
  finding: "THD is 34 % at 50 Hz.",
  spoils: "",
  remedy: "",
  figure: null,
  where: null,
  bands_Hz: [],
};
const none: ReadonlyMap<string, string> = new Map();

describe("toLadder", () => {
  it.each<[string, LadderRun[], ReadonlyMap<string, string>, Record<string, string | null>]>([
    [
      "nothing recorded",
      [],
      none,
      {
        "calibrator-before": null,
        ambient: null,
        "short-76": null,
        "short-76-2": "opens after 76 dB short-term",
        "short-86": "locked until 76 dB has passed",
        "short-96": "locked until 86 dB has passed",
        "long-96": "opens after 96 dB short-term",
        "closing-76": "opens after 76 dB short-term",
        "calibrator-after": null,
      },
    ],
    [
      "the lowest is being checked",
      [run("short-76", "checking")],
      none,
      { "short-86": "locked until 76 dB has passed" },
    ],
    [
      "the lowest has passed",
      [run("short-76", "passed")],
      none,
      { "short-76-2": null, "short-86": null, "short-96": "locked until 86 dB has passed" },
    ],
    ["a warning opens too", [run("short-76", "warned")], none, { "short-86": null }],
    ["a kept failure opens too", [run("short-76", "kept")], none, { "short-86": null }],
    [
      "a failure does not",
      [run("short-76", "failed")],
      none,
      { "short-86": "locked until 76 dB has passed" },
    ],
    [
      "nor an excluded or replaced take",
      [run("short-76", "excluded"), run("short-76", "replaced")],
      none,
      { "short-86": "locked until 76 dB has passed" },
    ],
    ["an excuse opens", [], new Map([["short-76", "no time"]]), { "short-86": null }],
    [
      "the stop rule locks what is louder",
      [run("short-76", "passed"), run("short-86", "warned", true)],
      none,
      { "short-96": "do not go louder: THD is 34 % at 50 Hz.", "short-76-2": null },
    ],
  ])("%s", (_name, runs, excuses, reasons) => {
    const slots = toLadder(planned, runs, excuses);
    for (const [slot, reason] of Object.entries(reasons)) {
      const found = slots.find((s) => s.slot === slot);
      expect([slot, found?.lockReason, found?.open]).toEqual([slot, reason, reason === null]);
    }
  });

  it("lets a file through that was recorded in spite of the stop rule", () => {
    const runs = [run("short-76", "passed"), run("short-86", "warned", true)];
    const slot = toLadder(planned, runs, none).find((s) => s.slot === "short-96");
    expect(slot).toMatchObject({ open: false, waits: false });
  });
});

describe("toStopRule", () => {
  it("says nothing while no run broke it", () => {
    expect(toStopRule(planned, [run("short-76", "passed")])).toBeNull();
  });
  it("names the level and the figure", () => {
    expect(toStopRule(planned, [run("short-86", "passed", true)])).toBe(
      "Do not go louder than 86 dB: THD is 34 % at 50 Hz.",
    );
  });
});
