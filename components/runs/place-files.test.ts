import { describe, expect, it } from "vitest";
import { planSchema } from "@/lib/series/plan-schema";
import { toPlannedRuns } from "@/lib/series/planned-runs";
import { isClear, placeFiles, toPlaceNote } from "./place-files";
import { toRunTable } from "./run-rows";
import { makeRun } from "./run-samples";

const planned = toPlannedRuns(planSchema.parse({}), "osier5a");
const file = (name: string): File => new File(["x"], name);
const rowsWith = (...runs: ReturnType<typeof makeRun>[]) =>
  toRunTable({
    planned,
    runs,
    slots: planned.map((p) => ({
      slot: p.slot,
      open: p.slot !== "short-102",
      lock_reason: p.slot === "short-102" ? "locked until 96 dB has passed" : null,
      excused: null,
    })),
    uploads: [],
  }).groups.flatMap((group) => group.rows);

describe("placeFiles", () => {
  it("finds places by the names of the stimulus files", () => {
    const placed = placeFiles([file("osier5a_86_short.wav"), file("osier5a_room.wav")], planned);
    expect(placed.map((p) => p.slot)).toEqual(["short-86", "ambient"]);
  });

  it("says why a file has no place", () => {
    const [placed] = placeFiles([file("corridor_check.wav")], planned);
    expect(placed?.slot).toBeNull();
    expect(placed?.reason).toContain("corridor_check.wav");
  });

  it("gives a place to the first of two files only", () => {
    const placed = placeFiles([file("a/osier5a_86_short.wav"), file("86 dB.wav")], planned);
    expect(placed.map((p) => p.slot)).toEqual(["short-86", null]);
  });
});

describe("before sending", () => {
  it("asks nothing for free places and for takes that failed", () => {
    const placed = placeFiles([file("osier5a_86_short.wav")], planned);
    expect(isClear(placed, rowsWith())).toBe(true);
    expect(isClear(placed, rowsWith(makeRun({ state: "failed" })))).toBe(true);
    expect(isClear(placed, rowsWith(makeRun({ state: "passed" })))).toBe(false);
    expect(isClear(placeFiles([file("what.wav")], planned), rowsWith())).toBe(false);
  });

  it("tells what a file would replace, and why a place is locked", () => {
    const rows = rowsWith(makeRun({ take: 3 }));
    const at = (slot: string) => toPlaceNote(rows.find((r) => r.planned.slot === slot));
    expect(at("short-86")).toBe("replaces take 3");
    expect(at("short-102")).toBe("locked until 96 dB has passed");
    expect(at("short-96")).toBeNull();
  });
});
