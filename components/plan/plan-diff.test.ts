import { describe, expect, it } from "vitest";
import { planSchema } from "@/lib/series/plan-schema";
import { toPlanDifferences } from "./plan-diff";

describe("toPlanDifferences", () => {
  const base = planSchema.parse({});

  it("is empty for the same plan", () => {
    expect(toPlanDifferences(base, planSchema.parse({}))).toEqual([]);
  });

  it("names what differs, with both values", () => {
    const mine = planSchema.parse({ place: { distance_m: 2 }, state: { firmware: "2.1.4" } });
    expect(toPlanDifferences(base, mine)).toEqual([
      { field: "state, firmware", theirs: "nothing", mine: "2.1.4" },
      { field: "place, distance\u00a0m", theirs: "1", mine: "2" },
    ]);
  });

  it("shows lists as a whole", () => {
    const mine = planSchema.parse({
      levels: [{ level_dB: 76 }, { level_dB: 102, long_term: true, repeats: 1 }],
    });
    const [difference] = toPlanDifferences(base, mine);
    expect(difference?.mine).toBe("level dB 76; level dB 102, long term, repeats 1");
  });
});
