import { describe, expect, it } from "vitest";
import { toLadder } from "../runs/ladder";
import { planSchema } from "../series/plan-schema";
import { toPlannedRuns, type RequestedRun } from "../series/planned-runs";
import { toRequestSlot, type WantedRun } from "./run-request";

const plan = planSchema.parse({});
const planned = toPlannedRuns(plan, "osier5a");
const recorded = new Set(planned.map((run) => run.slot));
const levels = plan.levels.map((level) => level.level_dB);
const loudest = Math.max(...levels);
const want = (over: Partial<WantedRun>): WantedRun => ({
  level_dB: 91,
  kind: "short-term",
  variant: null,
  ...over,
});
const request = (over: Partial<RequestedRun>): RequestedRun => ({
  slot: "short-91",
  levelDb: 91,
  kind: "short-term",
  variant: null,
  by: "T. Reith",
  reason: "narrower",
  ...over,
});

describe("toRequestSlot", () => {
  it.each([
    ["a new level", want({}), "short-91"],
    ["a level once more", want({ level_dB: loudest }), `short-${loudest}-2`],
    ["a new long-term level", want({ kind: "long-term" }), "long-91"],
    ["another setting", want({ variant: "port blocked" }), "variant-asked-91"],
    ["a half decibel", want({ level_dB: 91.5 }), "short-91.5"],
  ])("%s", (_name, wanted, slot) => {
    expect(toRequestSlot(wanted, planned, recorded)).toBe(slot);
  });

  it.each([
    ["louder than the gain allows", want({ level_dB: loudest + 1 }), recorded, "request.invalid"],
    ["a long-term variant", want({ kind: "long-term", variant: "x" }), recorded, "request.invalid"],
    [
      "what is planned and not in",
      want({ level_dB: loudest }),
      new Set<string>(),
      "conflict.exists",
    ],
  ])("refuses %s", (_name, wanted, slots, code) => {
    expect(() => toRequestSlot(wanted, planned, slots)).toThrowError(
      expect.objectContaining({ code }),
    );
  });

  it("refuses the same request twice, and takes it again once it is recorded", () => {
    const asked = toPlannedRuns(plan, "osier5a", [request({})]);
    expect(() => toRequestSlot(want({}), asked, recorded)).toThrowError(
      expect.objectContaining({ code: "conflict.exists" }),
    );
    const done = new Set([...recorded, "short-91"]);
    expect(toRequestSlot(want({}), asked, done)).toBe("short-91-2");
  });
});

describe("runs asked for in the plan", () => {
  it("stand at the end of their level, played with the same gain", () => {
    const asked = toPlannedRuns(plan, "osier5a", [request({})]);
    expect(asked).toHaveLength(planned.length + 1);
    const at = asked.findIndex((run) => run.slot === "short-91");
    expect(asked[at]).toMatchObject({
      role: "short-term",
      label: "91 dB short-term",
      fileName: "osier5a_91_short.wav",
      stimulusPeakDbfs: -3 - (loudest - 91),
      asked: { by: "T. Reith", reason: "narrower" },
    });
    expect(asked[at + 1]?.levelDb).toBeGreaterThan(91);
    expect(asked[at - 1]?.levelDb).toBeLessThan(91);
  });

  it("above the whole ladder stand before the closing repeat", () => {
    const asked = toPlannedRuns(plan, "x", [
      request({ slot: `long-${loudest}`, levelDb: loudest, kind: "long-term" }),
    ]);
    const at = asked.findIndex((run) => run.asked !== undefined);
    expect(asked[at]?.label).toBe(`${loudest} dB long-term`);
    expect(asked[at + 1]?.role).toBe("closing");
  });

  it("are repeats by the number of their place", () => {
    const slot = `short-${loudest}-2`;
    const asked = toPlannedRuns(plan, "x", [request({ slot, levelDb: loudest })]);
    expect(asked.find((run) => run.slot === slot)).toMatchObject({
      repeat: 2,
      label: `${loudest} dB short-term, repeat 1`,
      fileName: `x_${loudest}_short_r2.wav`,
    });
  });

  it("hold up none of the plan's own runs", () => {
    const asked = toPlannedRuns(plan, "x", [request({})]);
    const own = asked.filter((run) => run.asked === undefined && run.slot !== `short-${loudest}`);
    const runs = own.map((run) => ({ slot: run.slot, state: "passed" as const, report: null }));
    const ladder = toLadder(asked, runs, new Map());
    expect(ladder.find((slot) => slot.slot === `short-${loudest}`)?.open).toBe(true);
    expect(ladder.find((slot) => slot.slot === "short-91")?.open).toBe(true);
  });
});
