import { describe, expect, it } from "vitest";
import { planSchema } from "@/lib/series/plan-schema";
import { toFileStem, toPlannedRuns } from "@/lib/series/planned-runs";
import { toConditioningFiles, toStimulusFile } from "@/lib/series/stimulus-files";
import { listStimulusFiles } from "./stimulus-list";

describe("listStimulusFiles", () => {
  const plan = planSchema.parse({
    levels: [
      { level_dB: 76 },
      { level_dB: 96, long_term: true },
      { level_dB: 102, long_term: true },
    ],
  });
  const listed = listStimulusFiles(plan, "Osier 5A");

  it("names every file as it is served, and no other", () => {
    const planned = toPlannedRuns(plan, toFileStem("Osier 5A"));
    const conditioning = toConditioningFiles(plan, planned, toFileStem("Osier 5A"));
    for (const { slot, name } of listed) {
      const run = planned.find((p) => p.slot === slot);
      const served = run === undefined ? conditioning.get(slot) : toStimulusFile(plan, run);
      expect([slot, served?.name]).toEqual([slot, name]);
    }
    const played = planned.filter((run) => run.stimulusPeakDbfs !== null).length;
    expect(listed).toHaveLength(played + 2);
  });

  it("puts the conditioning of a level before its long-term sweep", () => {
    const slots = listed.map((file) => file.slot);
    expect(slots.slice(0, 3)).toEqual(["short-76", "short-96", "conditioning-96"]);
    expect(slots[3]).toBe("long-96");
    expect(slots).toContain("closing-76");
  });

  it("gives the peak of each file", () => {
    const note = listed.find((file) => file.slot === "short-76")?.note;
    expect(note).toBe("\u221229.0\u00a0dBFS peak");
  });
});
