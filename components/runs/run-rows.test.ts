import { describe, expect, it } from "vitest";
import type { RunView } from "@/lib/api/runs";
import { planSchema } from "@/lib/series/plan-schema";
import { toPlannedRuns } from "@/lib/series/planned-runs";
import { makeRun, makeUpload } from "./run-samples";
import { toRunName, toRunTable } from "./run-rows";

const planned = toPlannedRuns(planSchema.parse({}), "osier5a");
const slots = planned.map((p) => ({ slot: p.slot, open: true, lock_reason: null, excused: null }));
const toTable = (runs: RunView[], uploads = [makeUpload({ slot: "short-86" })]) =>
  toRunTable({ planned, runs, slots, uploads });

describe("toRunTable", () => {
  it("sets calibrator and room noise before, closing repeat and calibrator after", () => {
    const slotsOf = toTable([]).groups.map((group) => group.rows.map((row) => row.planned.slot));
    expect(slotsOf).toEqual([
      ["calibrator-before", "ambient"],
      ["short-76", "short-86", "short-96", "short-102"],
      ["closing-76", "calibrator-after"],
    ]);
  });

  it("counts the newest take that was not put aside", () => {
    const table = toTable([
      makeRun({ slot: "short-76", take: 1, state: "replaced" }),
      makeRun({ slot: "short-76", take: 2, state: "failed" }),
    ]);
    const row = table.groups[1]?.rows[0];
    expect(row?.run?.take).toBe(2);
    expect(row?.earlier.map((run) => run.take)).toEqual([1]);
  });

  it("leaves the place free where the only take was excluded", () => {
    const row = toTable([makeRun({ slot: "short-76", state: "excluded" })]).groups[1]?.rows[0];
    expect(row?.run).toBeNull();
    expect(row?.earlier).toHaveLength(1);
  });

  it("puts a file on its way beside its place, and at the foot where it has none", () => {
    const table = toTable([], [makeUpload({ slot: "short-86" }), makeUpload({ slot: null })]);
    expect(table.groups[1]?.rows[1]?.upload?.slot).toBe("short-86");
    expect(table.loose).toHaveLength(1);
  });

  it("keeps what fits no planned run at the foot", () => {
    const table = toTable([makeRun({ slot: null, file_name: "corridor_check.wav" })]);
    expect(table.unassigned.map((run) => run.file_name)).toEqual(["corridor_check.wav"]);
  });
});

describe("toRunName", () => {
  it.each([
    ["calibrator-before", "calibrator", "94 dB, 1 kHz"],
    ["ambient", "room noise", "nothing playing"],
    ["short-76", "76\u00a0dB", "short-term"],
    ["closing-76", "76\u00a0dB", "closing repeat"],
  ])("%s", (slot, name, kind) => {
    const run = planned.find((p) => p.slot === slot);
    expect(run && toRunName(run, "94 dB, 1 kHz")).toEqual({ name, kind });
  });
});
