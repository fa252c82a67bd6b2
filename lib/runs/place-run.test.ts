import { describe, expect, it } from "vitest";
import { planSchema } from "../series/plan-schema";
import { toPlannedRuns } from "../series/planned-runs";
import { toLadder } from "./ladder";
import { placeRun } from "./place-run";

const planned = toPlannedRuns(planSchema.parse({}), "fennel5");
const fresh = toLadder(planned, [], new Map());
const opened = toLadder(planned, [{ slot: "short-76", state: "passed", report: null }], new Map());

describe("placeRun", () => {
  it.each([
    [
      "by name",
      fresh,
      { fileName: "76.wav", slot: null },
      "short-76",
      "short-76",
      /^in its place$/,
    ],
    [
      "by choice, against its name",
      opened,
      { fileName: "76.wav", slot: "short-86" },
      "short-86",
      "short-86",
      /^in its place$/,
    ],
    [
      "waiting for its level",
      fresh,
      { fileName: "86.wav", slot: null },
      null,
      "short-86",
      /86 dB short-term: locked until 76 dB has passed/,
    ],
    [
      "no name that says",
      opened,
      { fileName: "take.wav", slot: null },
      null,
      null,
      /names no planned level/,
    ],
    [
      "a place that is not planned",
      opened,
      { fileName: "76.wav", slot: "short-81" },
      null,
      null,
      /no run short-81/,
    ],
  ])("%s", (_name, ladder, file, slot, wantedSlot, note) => {
    const placed = placeRun(file, planned, ladder);
    expect([placed.slot, placed.wantedSlot]).toEqual([slot, wantedSlot]);
    expect(placed.note ?? "in its place").toMatch(note);
  });
});
